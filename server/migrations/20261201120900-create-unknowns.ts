import { exactText, ID, WORD, tableMigration } from './migration.js';

export const createUnknowns = tableMigration(
  '20261201120900-create-unknowns',
  'unknowns',
  `
    id ${ID} NOT NULL,
    team_id ${ID} NOT NULL,
    number INT NOT NULL,
    code VARCHAR(16) CHARACTER SET ascii COLLATE ascii_general_ci NOT NULL,
    title VARCHAR(160) NOT NULL,
    description TEXT NOT NULL,
    purpose ${WORD} NOT NULL,
    status ${WORD} NOT NULL,
    formula ${exactText(120)} NULL,
    current_revision_id ${ID} NULL,
    created_by_id ${ID} NOT NULL,
    created_at DATETIME(3) NOT NULL,
    updated_at DATETIME(3) NOT NULL,
    CONSTRAINT unknowns_pk PRIMARY KEY (id),
    CONSTRAINT unknowns_team_number_key UNIQUE (team_id, number),
    INDEX unknowns_team_status_idx (team_id, status, updated_at),
    INDEX unknowns_team_updated_idx (team_id, updated_at),
    INDEX unknowns_current_revision_idx (current_revision_id),
    INDEX unknowns_created_by_idx (created_by_id),
    CONSTRAINT unknowns_team_fk FOREIGN KEY (team_id) REFERENCES teams (id),
    CONSTRAINT unknowns_created_by_fk FOREIGN KEY (created_by_id) REFERENCES users (id),
    CONSTRAINT unknowns_purpose_check CHECK (purpose IN ('research', 'regulated')),
    CONSTRAINT unknowns_status_check CHECK (status IN ('new', 'inProgress', 'settled', 'shelved'))
  `,
);
