import type { AppContext } from '../app-context.js';
import { recordAudit } from '../audit/record-audit.js';
import { ConflictError } from '../errors.js';
import type { User } from '../models/user.js';
import type { Actor } from '../policies/actor.js';
import { createResetLink } from '../sessions/create-reset-link.js';

/**
 * Makes a reset link for somebody who forgot the password, to be handed over in person: an installation without a mail
 * server has no other way. The audit tells that it was made.
 * @throws ConflictError accountDisabled
 */
export async function issueResetLink(
  { config, sequelize }: AppContext,
  actor: Actor,
  user: User,
): Promise<{ link: string; expiresAt: Date }> {
  return await sequelize.transaction(async (transaction) => {
    await user.reload({ transaction, lock: transaction.LOCK.UPDATE });
    if (user.isDisabled) throw new ConflictError('accountDisabled', 'This account is disabled. Enable it first.');
    const reset = await createResetLink(transaction, config, user.id);
    await recordAudit(transaction, actor, 'user.issueResetLink', { kind: 'user', id: user.id, label: user.email });
    return reset;
  });
}
