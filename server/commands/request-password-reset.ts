import { Op } from 'sequelize';
import type { AppContext } from '../app-context.js';
import { recordAudit } from '../audit/record-audit.js';
import { passwordResetLink } from '../mail/links.js';
import { passwordResetMessage } from '../mail/messages.js';
import { queueMail } from '../mail/queue-mail.js';
import { PasswordReset } from '../models/password-reset.js';
import { User } from '../models/user.js';
import { createSecret, hashOf } from '../sessions/tokens.js';

const HOUR_MS = 3_600_000;
/** More mails in an hour would only annoy the owner of the address. */
const RESETS_PER_HOUR = 3;

/** Sends a link to set a new password, good for an hour, if there is such an account. Says nothing either way. */
export async function requestPasswordReset({ config, sequelize }: AppContext, email: string): Promise<void> {
  const user = await User.findOne({ where: { email } });
  if (user === null || user.isDisabled) return;
  const secret = createSecret();
  const now = new Date();
  const expiresAt = new Date(now.getTime() + HOUR_MS);
  await sequelize.transaction(async (transaction) => {
    await user.reload({ transaction, lock: transaction.LOCK.UPDATE });
    const recentCount = await PasswordReset.count({
      where: { userId: user.id, createdAt: { [Op.gt]: new Date(now.getTime() - HOUR_MS) } },
      transaction,
    });
    if (recentCount >= RESETS_PER_HOUR) return;
    await PasswordReset.create({ userId: user.id, tokenHash: hashOf(secret), createdAt: now, expiresAt }, { transaction });
    await queueMail(
      transaction,
      passwordResetMessage({ email: user.email, link: passwordResetLink(config, secret), expiresAt }),
      expiresAt,
    );
    await recordAudit(transaction, { userId: user.id, name: user.name }, 'password.requestReset', {
      kind: 'user',
      id: user.id,
      label: user.email,
    });
  });
}
