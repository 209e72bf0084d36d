import type { Transaction } from 'sequelize';
import type { MailMessage } from '../app-context.js';
import { OutboxMail } from '../models/outbox-mail.js';

/** Puts a mail into the outbox with the change it tells of: both are there, or neither is. */
export async function queueMail(transaction: Transaction, message: MailMessage, expiresAt: Date): Promise<void> {
  await OutboxMail.create(
    { recipient: message.to, subject: message.subject.slice(0, 200), body: message.text, nextAttemptAt: new Date(), expiresAt },
    { transaction },
  );
}
