import { HASH, ID, WORD, tableMigration } from './migration.js';

export const createSessions = tableMigration(
  '20261201120300-create-sessions',
  'sessions',
  `
    id ${ID} NOT NULL,
    user_id ${ID} NOT NULL,
    refresh_token_hash ${HASH} NOT NULL,
    user_agent VARCHAR(300) NOT NULL,
    created_at DATETIME(3) NOT NULL,
    last_used_at DATETIME(3) NOT NULL,
    expires_at DATETIME(3) NOT NULL,
    ended_at DATETIME(3) NULL,
    end_reason ${WORD} NULL,
    CONSTRAINT sessions_pk PRIMARY KEY (id),
    INDEX sessions_user_idx (user_id, ended_at),
    INDEX sessions_expires_idx (expires_at),
    CONSTRAINT sessions_user_fk FOREIGN KEY (user_id) REFERENCES users (id)
  `,
);
