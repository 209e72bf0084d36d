import { exactText, HASH, ID, tableMigration } from './migration.js';

export const createFragments = tableMigration(
  '20261201121200-create-fragments',
  'fragments',
  `
    id ${ID} NOT NULL,
    team_id ${ID} NOT NULL,
    name VARCHAR(80) NOT NULL,
    group_name VARCHAR(40) NOT NULL,
    smiles ${exactText(300)} NOT NULL,
    canonical_hash ${HASH} NOT NULL,
    created_by_id ${ID} NOT NULL,
    created_at DATETIME(3) NOT NULL,
    CONSTRAINT fragments_pk PRIMARY KEY (id),
    CONSTRAINT fragments_team_canonical_key UNIQUE (team_id, canonical_hash),
    INDEX fragments_created_by_idx (created_by_id),
    CONSTRAINT fragments_team_fk FOREIGN KEY (team_id) REFERENCES teams (id),
    CONSTRAINT fragments_created_by_fk FOREIGN KEY (created_by_id) REFERENCES users (id)
  `,
);
