import { ID, WORD, tableMigration } from './migration.js';

export const createRunShards = tableMigration(
  '20261201121400-create-run-shards',
  'run_shards',
  `
    id ${ID} NOT NULL,
    team_id ${ID} NOT NULL,
    run_id ${ID} NOT NULL,
    shard_index INT NOT NULL,
    spec JSON NOT NULL,
    status ${WORD} NOT NULL,
    attempt INT NOT NULL DEFAULT 0,
    result JSON NULL,
    cpu_seconds DOUBLE NOT NULL DEFAULT 0,
    finished_at DATETIME(3) NULL,
    CONSTRAINT run_shards_pk PRIMARY KEY (id),
    CONSTRAINT run_shards_run_index_key UNIQUE (run_id, shard_index),
    INDEX run_shards_run_status_idx (run_id, status),
    INDEX run_shards_team_idx (team_id),
    CONSTRAINT run_shards_team_fk FOREIGN KEY (team_id) REFERENCES teams (id),
    CONSTRAINT run_shards_run_fk FOREIGN KEY (run_id) REFERENCES runs (id) ON DELETE CASCADE,
    CONSTRAINT run_shards_status_check CHECK (status IN ('waiting', 'running', 'done'))
  `,
);
