import { exactText, ID, WORD, tableMigration } from './migration.js';

export const createMailOutbox = tableMigration(
  '20261201120600-create-mail-outbox',
  'mail_outbox',
  `
    id ${ID} NOT NULL,
    recipient ${exactText(254)} NOT NULL,
    subject VARCHAR(200) NOT NULL,
    body TEXT NOT NULL,
    status ${WORD} NOT NULL,
    attempts INT NOT NULL DEFAULT 0,
    last_error VARCHAR(500) NULL,
    created_at DATETIME(3) NOT NULL,
    next_attempt_at DATETIME(3) NOT NULL,
    expires_at DATETIME(3) NOT NULL,
    sent_at DATETIME(3) NULL,
    CONSTRAINT mail_outbox_pk PRIMARY KEY (id),
    INDEX mail_outbox_due_idx (status, next_attempt_at),
    CONSTRAINT mail_outbox_status_check CHECK (status IN ('waiting', 'sent', 'failed', 'expired'))
  `,
);
