import { exactText, ID, tableMigration } from './migration.js';

export const createEvidenceRevisions = tableMigration(
  '20261201121000-create-evidence-revisions',
  'evidence_revisions',
  `
    id ${ID} NOT NULL,
    team_id ${ID} NOT NULL,
    unknown_id ${ID} NOT NULL,
    number INT NOT NULL,
    author_id ${ID} NOT NULL,
    comment VARCHAR(500) NOT NULL,
    formula ${exactText(120)} NOT NULL,
    evidence JSON NOT NULL,
    notes JSON NOT NULL,
    created_at DATETIME(3) NOT NULL,
    CONSTRAINT evidence_revisions_pk PRIMARY KEY (id),
    CONSTRAINT evidence_revisions_unknown_number_key UNIQUE (unknown_id, number),
    INDEX evidence_revisions_team_idx (team_id),
    INDEX evidence_revisions_author_idx (author_id),
    CONSTRAINT evidence_revisions_team_fk FOREIGN KEY (team_id) REFERENCES teams (id),
    CONSTRAINT evidence_revisions_unknown_fk FOREIGN KEY (unknown_id) REFERENCES unknowns (id),
    CONSTRAINT evidence_revisions_author_fk FOREIGN KEY (author_id) REFERENCES users (id)
  `,
);
