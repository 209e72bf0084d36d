import { exactText, HASH, ID, tableMigration } from './migration.js';

export const createCandidates = tableMigration(
  '20261201121500-create-candidates',
  'candidates',
  `
    id ${ID} NOT NULL,
    team_id ${ID} NOT NULL,
    run_id ${ID} NOT NULL,
    rank INT NOT NULL,
    smiles ${exactText(600)} NOT NULL,
    idcode ${exactText(600)} NOT NULL,
    idcode_hash ${HASH} NOT NULL,
    key_hash ${HASH} NOT NULL,
    probability DOUBLE NOT NULL,
    score DOUBLE NOT NULL,
    terms JSON NOT NULL,
    carbon_deviation DOUBLE NULL,
    proton_deviation DOUBLE NULL,
    spectra JSON NOT NULL,
    matches JSON NOT NULL,
    remarks JSON NOT NULL,
    CONSTRAINT candidates_pk PRIMARY KEY (id),
    CONSTRAINT candidates_run_rank_key UNIQUE (run_id, rank),
    INDEX candidates_run_idcode_idx (run_id, idcode_hash),
    INDEX candidates_run_key_idx (run_id, key_hash),
    INDEX candidates_team_idx (team_id),
    CONSTRAINT candidates_team_fk FOREIGN KEY (team_id) REFERENCES teams (id),
    CONSTRAINT candidates_run_fk FOREIGN KEY (run_id) REFERENCES runs (id) ON DELETE CASCADE
  `,
);
