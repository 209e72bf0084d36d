import { ID, WORD, tableMigration } from './migration.js';

export const createUsageEntries = tableMigration(
  '20261201121900-create-usage-entries',
  'usage_entries',
  `
    id ${ID} NOT NULL,
    team_id ${ID} NOT NULL,
    user_id ${ID} NOT NULL,
    run_id ${ID} NOT NULL,
    month CHAR(7) CHARACTER SET ascii COLLATE ascii_bin NOT NULL,
    kind ${WORD} NOT NULL,
    cpu_seconds DOUBLE NOT NULL,
    created_at DATETIME(3) NOT NULL,
    updated_at DATETIME(3) NOT NULL,
    CONSTRAINT usage_entries_pk PRIMARY KEY (id),
    CONSTRAINT usage_entries_run_key UNIQUE (run_id),
    INDEX usage_entries_team_user_month_idx (team_id, user_id, month),
    INDEX usage_entries_user_idx (user_id),
    CONSTRAINT usage_entries_team_fk FOREIGN KEY (team_id) REFERENCES teams (id),
    CONSTRAINT usage_entries_user_fk FOREIGN KEY (user_id) REFERENCES users (id),
    CONSTRAINT usage_entries_run_fk FOREIGN KEY (run_id) REFERENCES runs (id),
    CONSTRAINT usage_entries_kind_check CHECK (kind IN ('reserved', 'settled'))
  `,
);
