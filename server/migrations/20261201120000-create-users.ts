import { exactText, ID, tableMigration } from './migration.js';

export const createUsers = tableMigration(
  '20261201120000-create-users',
  'users',
  `
    id ${ID} NOT NULL,
    email ${exactText(254)} NOT NULL,
    name VARCHAR(120) NOT NULL,
    password_hash VARCHAR(100) CHARACTER SET ascii COLLATE ascii_bin NOT NULL,
    is_admin TINYINT(1) NOT NULL DEFAULT 0,
    is_disabled TINYINT(1) NOT NULL DEFAULT 0,
    created_at DATETIME(3) NOT NULL,
    updated_at DATETIME(3) NOT NULL,
    CONSTRAINT users_pk PRIMARY KEY (id),
    CONSTRAINT users_email_key UNIQUE (email)
  `,
);
