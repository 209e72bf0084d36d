import { ID, tableMigration } from './migration.js';

export const createTeams = tableMigration(
  '20261201120100-create-teams',
  'teams',
  `
    id ${ID} NOT NULL,
    name VARCHAR(120) NOT NULL,
    is_demo TINYINT(1) NOT NULL DEFAULT 0,
    last_unknown_number INT NOT NULL DEFAULT 0,
    created_at DATETIME(3) NOT NULL,
    updated_at DATETIME(3) NOT NULL,
    CONSTRAINT teams_pk PRIMARY KEY (id),
    INDEX teams_name_idx (name)
  `,
);
