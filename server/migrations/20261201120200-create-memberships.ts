import { ID, WORD, tableMigration } from './migration.js';

export const createMemberships = tableMigration(
  '20261201120200-create-memberships',
  'memberships',
  `
    id ${ID} NOT NULL,
    team_id ${ID} NOT NULL,
    user_id ${ID} NOT NULL,
    role ${WORD} NOT NULL,
    created_at DATETIME(3) NOT NULL,
    updated_at DATETIME(3) NOT NULL,
    CONSTRAINT memberships_pk PRIMARY KEY (id),
    CONSTRAINT memberships_team_user_key UNIQUE (team_id, user_id),
    INDEX memberships_user_idx (user_id),
    CONSTRAINT memberships_team_fk FOREIGN KEY (team_id) REFERENCES teams (id),
    CONSTRAINT memberships_user_fk FOREIGN KEY (user_id) REFERENCES users (id),
    CONSTRAINT memberships_role_check CHECK (role IN ('chemist', 'lead', 'reader'))
  `,
);
