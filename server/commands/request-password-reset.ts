import { Op } from 'sequelize';
import type { AppContext } from '../app-context.js';
import { recordAudit } from '../audit/record-audit.js';
import { passwordResetMessage } from '../mail/messages.js';
import { queueMail } from '../mail/queue-mail.js';
import { PasswordReset } from '../models/password-reset.js';
import { User } from '../models/user.js';
import { createResetLink } from '../sessions/create-reset-link.js';

const HOUR_MS = 3_600_000;
/** More mails in an hour would only annoy the owner of the address. */
const RESETS_PER_HOUR = 3;

/** Sends a link to set a new password, good for an hour, if there is such an account. Says nothing either way. */
export async function requestPasswordReset({ config, sequelize }: AppContext, email: string): Promise<void> {
  const user = await User.findOne({ where: { email } });
  if (user === null || user.isDisabled) return;
  await sequelize.transaction(async (transaction) => {
    await user.reload({ transaction, lock: transaction.LOCK.UPDATE });
    const recentCount = await PasswordReset.count({
      where: { userId: user.id, createdAt: { [Op.gt]: new Date(Date.now() - HOUR_MS) } },
      transaction,
    });
    if (recentCount >= RESETS_PER_HOUR) return;
    const { link, expiresAt } = await createResetLink(transaction, config, user.id);
    await queueMail(transaction, passwordResetMessage({ email: user.email, link, expiresAt }), expiresAt);
    await recordAudit(transaction, { userId: user.id, name: user.name }, 'password.requestReset', {
      kind: 'user',
      id: user.id,
      label: user.email,
    });
  });
}
