import { exactText, HASH, ID, WORD, tableMigration } from './migration.js';

export const createInvitations = tableMigration(
  '20261201120400-create-invitations',
  'invitations',
  `
    id ${ID} NOT NULL,
    team_id ${ID} NOT NULL,
    email ${exactText(254)} NOT NULL,
    role ${WORD} NOT NULL,
    token_hash ${HASH} NOT NULL,
    invited_by_id ${ID} NOT NULL,
    created_at DATETIME(3) NOT NULL,
    expires_at DATETIME(3) NOT NULL,
    accepted_at DATETIME(3) NULL,
    revoked_at DATETIME(3) NULL,
    CONSTRAINT invitations_pk PRIMARY KEY (id),
    CONSTRAINT invitations_token_key UNIQUE (token_hash),
    INDEX invitations_team_email_idx (team_id, email),
    INDEX invitations_invited_by_idx (invited_by_id),
    CONSTRAINT invitations_team_fk FOREIGN KEY (team_id) REFERENCES teams (id),
    CONSTRAINT invitations_invited_by_fk FOREIGN KEY (invited_by_id) REFERENCES users (id),
    CONSTRAINT invitations_role_check CHECK (role IN ('chemist', 'lead', 'reader'))
  `,
);
