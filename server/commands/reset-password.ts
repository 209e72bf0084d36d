import type { AppContext } from '../app-context.js';
import { recordAudit } from '../audit/record-audit.js';
import { linkUsedUp } from '../errors.js';
import { PasswordReset } from '../models/password-reset.js';
import { User } from '../models/user.js';
import { endSessionsOf } from '../sessions/end-sessions.js';
import { hashPassword } from '../sessions/passwords.js';
import { forgetSignInAttempts } from '../sessions/sign-in-attempts.js';
import { hashOf } from '../sessions/tokens.js';

/**
 * Sets a new password with a link from a mail. Whoever was signed in is signed out, other links stop working, and a
 * lock after wrong passwords is lifted.
 * @throws NotFoundError linkUsedUp
 */
export async function resetPassword({ config, sequelize }: AppContext, secret: string, password: string): Promise<void> {
  const tokenHash = hashOf(secret);
  const known = await PasswordReset.findOne({ where: { tokenHash } });
  if (known === null || !known.isOpen(new Date())) throw linkUsedUp();
  const passwordHash = await hashPassword(config, password);
  await sequelize.transaction(async (transaction) => {
    const reset = await PasswordReset.findOne({ where: { tokenHash }, transaction, lock: transaction.LOCK.UPDATE });
    const now = new Date();
    if (reset === null || !reset.isOpen(now)) throw linkUsedUp();
    const user = await User.findByPk(reset.userId, { transaction, lock: transaction.LOCK.UPDATE });
    if (user === null || user.isDisabled) throw linkUsedUp();
    await user.update({ passwordHash }, { transaction });
    await PasswordReset.update({ usedAt: now }, { where: { userId: user.id, usedAt: null }, transaction });
    await endSessionsOf(transaction, user.id, 'passwordReset');
    await forgetSignInAttempts(user.email, transaction);
    await recordAudit(transaction, { userId: user.id, name: user.name }, 'password.reset', {
      kind: 'user',
      id: user.id,
      label: user.email,
    });
  });
}
