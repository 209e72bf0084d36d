import { Op } from 'sequelize';
import type { AppContext } from '../app-context.js';
import { OutboxMail } from '../models/outbox-mail.js';

const POLL_MS = 3_000;
/** Waits after the first, second … failed attempt; after the last one the mail is given up. */
const RETRY_MINUTES = [1, 5, 30, 120, 480] as const;

export interface OutboxSender {
  /** Stops polling and waits for the mail that is being sent. */
  stop(): Promise<void>;
}

/**
 * Sends the oldest due mail. Its row stays locked meanwhile, so that several servers share one outbox; a crash after
 * the mail server took it sends it twice, never not at all.
 * @returns whether there was one
 */
export async function sendNextMail({ sequelize, mailer, logger }: Pick<AppContext, 'sequelize' | 'mailer' | 'logger'>): Promise<boolean> {
  return await sequelize.transaction(async (transaction) => {
    const now = new Date();
    const mail = await OutboxMail.findOne({
      where: { status: 'waiting', nextAttemptAt: { [Op.lte]: now }, expiresAt: { [Op.gt]: now } },
      order: [['nextAttemptAt', 'ASC']],
      lock: transaction.LOCK.UPDATE,
      skipLocked: true,
      transaction,
    });
    if (mail === null) return false;
    try {
      await mailer.send({ to: mail.recipient, subject: mail.subject, text: mail.body });
      await mail.update({ status: 'sent', body: '', attempts: mail.attempts + 1, lastError: null, sentAt: new Date() }, { transaction });
    } catch (error) {
      const attempts = mail.attempts + 1;
      const waitMinutes = RETRY_MINUTES[attempts - 1];
      logger.warn({ err: error, mailId: mail.id, attempts }, 'a mail was not taken');
      await mail.update(
        {
          status: waitMinutes === undefined ? 'failed' : 'waiting',
          attempts,
          lastError: (error instanceof Error ? error.message : String(error)).slice(0, 500),
          nextAttemptAt: new Date(Date.now() + (waitMinutes ?? 0) * 60_000),
        },
        { transaction },
      );
    }
    return true;
  });
}

/** Empties the outbox from now on. Without a mail server it does nothing. */
export function startOutboxSender(context: AppContext): OutboxSender {
  if (context.config.smtpUrl === null) return { stop: () => Promise.resolve() };
  let isStopped = false;
  const sendAll = async (): Promise<void> => {
    try {
      while (!isStopped && (await sendNextMail(context)));
    } catch (error) {
      context.logger.error({ err: error }, 'the outbox could not be read');
    }
  };
  let current = sendAll();
  let isBusy = true;
  void current.then(() => (isBusy = false));
  const timer = setInterval(() => {
    if (isBusy) return;
    isBusy = true;
    current = sendAll().then(() => {
      isBusy = false;
    });
  }, POLL_MS);
  return {
    stop: async () => {
      isStopped = true;
      clearInterval(timer);
      await current;
    },
  };
}
