import { HASH, ID, tableMigration } from './migration.js';

export const createPasswordResets = tableMigration(
  '20261201120500-create-password-resets',
  'password_resets',
  `
    id ${ID} NOT NULL,
    user_id ${ID} NOT NULL,
    token_hash ${HASH} NOT NULL,
    created_at DATETIME(3) NOT NULL,
    expires_at DATETIME(3) NOT NULL,
    used_at DATETIME(3) NULL,
    CONSTRAINT password_resets_pk PRIMARY KEY (id),
    CONSTRAINT password_resets_token_key UNIQUE (token_hash),
    INDEX password_resets_user_idx (user_id),
    CONSTRAINT password_resets_user_fk FOREIGN KEY (user_id) REFERENCES users (id)
  `,
);
