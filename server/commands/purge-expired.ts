import { Op } from 'sequelize';
import type { AppContext } from '../app-context.js';
import { OutboxMail } from '../models/outbox-mail.js';
import { PasswordReset } from '../models/password-reset.js';
import { Session } from '../models/session.js';
import { SignInAttempt } from '../models/sign-in-attempt.js';

const DAY_MS = 86_400_000;
/** Ended sessions and used links are kept so long, for those who look into what happened. */
const KEPT_DAYS = 30;

/** Removes what is good for nothing any more: old sessions, links and counters, and secrets in mails never sent. */
export async function purgeExpired({ sequelize }: Pick<AppContext, 'sequelize'>, now: Date): Promise<void> {
  const longAgo = new Date(now.getTime() - KEPT_DAYS * DAY_MS);
  await sequelize.transaction(async (transaction) => {
    await OutboxMail.update(
      { status: 'expired', body: '' },
      { where: { status: ['waiting', 'failed'], expiresAt: { [Op.lte]: now } }, transaction },
    );
    await OutboxMail.destroy({ where: { status: ['sent', 'expired'], createdAt: { [Op.lt]: longAgo } }, transaction });
    await Session.destroy({ where: { [Op.or]: [{ expiresAt: { [Op.lt]: longAgo } }, { endedAt: { [Op.lt]: longAgo } }] }, transaction });
    await PasswordReset.destroy({ where: { expiresAt: { [Op.lt]: longAgo } }, transaction });
    await SignInAttempt.destroy({ where: { updatedAt: { [Op.lt]: new Date(now.getTime() - DAY_MS) } }, transaction });
  });
}
