import { ID, tableMigration } from './migration.js';

export const createComments = tableMigration(
  '20261201121800-create-comments',
  'comments',
  `
    id ${ID} NOT NULL,
    team_id ${ID} NOT NULL,
    unknown_id ${ID} NOT NULL,
    author_id ${ID} NOT NULL,
    text TEXT NOT NULL,
    created_at DATETIME(3) NOT NULL,
    CONSTRAINT comments_pk PRIMARY KEY (id),
    INDEX comments_unknown_idx (unknown_id, created_at),
    INDEX comments_team_idx (team_id),
    INDEX comments_author_idx (author_id),
    CONSTRAINT comments_team_fk FOREIGN KEY (team_id) REFERENCES teams (id),
    CONSTRAINT comments_unknown_fk FOREIGN KEY (unknown_id) REFERENCES unknowns (id),
    CONSTRAINT comments_author_fk FOREIGN KEY (author_id) REFERENCES users (id)
  `,
);
