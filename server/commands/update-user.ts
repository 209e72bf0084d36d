import type { z } from 'zod';
import type { userUpdateRequest } from '../../shared/schemas/people.js';
import type { AppContext } from '../app-context.js';
import { recordAudit } from '../audit/record-audit.js';
import { ConflictError } from '../errors.js';
import { User } from '../models/user.js';
import type { Actor } from '../policies/actor.js';
import { endSessionsOf } from '../sessions/end-sessions.js';

/**
 * Makes a person an admin or takes that back, disables an account or enables it again. A disabled person is signed out
 * at once.
 * @throws ConflictError lastAdmin
 */
export async function updateUser(
  { sequelize }: AppContext,
  actor: Actor,
  user: User,
  change: z.output<typeof userUpdateRequest>,
): Promise<User> {
  return await sequelize.transaction(async (transaction) => {
    // The admins' rows are locked together, so that two of them cannot take the role from one another at once.
    const admins = await User.findAll({ where: { isAdmin: true, isDisabled: false }, transaction, lock: transaction.LOCK.UPDATE });
    await user.reload({ transaction, lock: transaction.LOCK.UPDATE });
    const before = { isAdmin: user.isAdmin, isDisabled: user.isDisabled };
    const after = { isAdmin: change.isAdmin ?? before.isAdmin, isDisabled: change.isDisabled ?? before.isDisabled };
    if ((!after.isAdmin || after.isDisabled) && admins.every(({ id }) => id === user.id)) {
      throw new ConflictError('lastAdmin', 'This is the last admin of the installation. Make somebody else an admin first.');
    }
    await user.update(after, { transaction });
    if (after.isDisabled && !before.isDisabled) await endSessionsOf(transaction, user.id, 'disabled');
    await recordAudit(transaction, actor, 'user.update', { kind: 'user', id: user.id, label: user.email }, { before, after });
    return user;
  });
}
