import { HASH, tableMigration } from './migration.js';

export const createSignInAttempts = tableMigration(
  '20261201122000-create-sign-in-attempts',
  'sign_in_attempts',
  `
    email_hash ${HASH} NOT NULL,
    failures INT NOT NULL,
    locked_until DATETIME(3) NULL,
    updated_at DATETIME(3) NOT NULL,
    CONSTRAINT sign_in_attempts_pk PRIMARY KEY (email_hash),
    INDEX sign_in_attempts_updated_idx (updated_at)
  `,
);
