import { ID, tableMigration } from './migration.js';

export const createQuotas = tableMigration(
  '20261201120800-create-quotas',
  'quotas',
  `
    id ${ID} NOT NULL,
    team_id ${ID} NOT NULL,
    user_id ${ID} NOT NULL,
    cpu_seconds_per_month INT NULL,
    candidates_per_run INT NULL,
    runs_at_once INT NULL,
    created_at DATETIME(3) NOT NULL,
    updated_at DATETIME(3) NOT NULL,
    CONSTRAINT quotas_pk PRIMARY KEY (id),
    CONSTRAINT quotas_team_user_key UNIQUE (team_id, user_id),
    INDEX quotas_user_idx (user_id),
    CONSTRAINT quotas_team_fk FOREIGN KEY (team_id) REFERENCES teams (id),
    CONSTRAINT quotas_user_fk FOREIGN KEY (user_id) REFERENCES users (id)
  `,
);
