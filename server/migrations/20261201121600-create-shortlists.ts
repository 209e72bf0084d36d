import { ID, tableMigration } from './migration.js';

export const createShortlists = tableMigration(
  '20261201121600-create-shortlists',
  'shortlists',
  `
    id ${ID} NOT NULL,
    team_id ${ID} NOT NULL,
    unknown_id ${ID} NOT NULL,
    created_at DATETIME(3) NOT NULL,
    CONSTRAINT shortlists_pk PRIMARY KEY (id),
    CONSTRAINT shortlists_unknown_key UNIQUE (unknown_id),
    INDEX shortlists_team_idx (team_id),
    CONSTRAINT shortlists_team_fk FOREIGN KEY (team_id) REFERENCES teams (id),
    CONSTRAINT shortlists_unknown_fk FOREIGN KEY (unknown_id) REFERENCES unknowns (id)
  `,
);
