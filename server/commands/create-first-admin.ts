import { randomBytes } from 'node:crypto';
import type { AppContext } from '../app-context.js';
import { recordAudit } from '../audit/record-audit.js';
import { User } from '../models/user.js';
import { hashPassword } from '../sessions/passwords.js';

const DEFAULT_EMAIL = 'admin@isoloom.local';

/**
 * Gives a new installation its first admin, with a password that is shown once and stored nowhere.
 * @returns how to sign in; null when there is an admin already
 */
export async function ensureFirstAdmin({
  config,
  sequelize,
}: Pick<AppContext, 'config' | 'sequelize'>): Promise<{ email: string; password: string } | null> {
  if ((await User.count({ where: { isAdmin: true } })) > 0) return null;
  const email = config.adminEmail ?? DEFAULT_EMAIL;
  const password = randomBytes(18).toString('base64url');
  const passwordHash = await hashPassword(config, password);
  return await sequelize.transaction(async (transaction) => {
    const existing = await User.findOne({ where: { email }, transaction, lock: transaction.LOCK.UPDATE });
    const user =
      existing === null
        ? await User.create({ email, name: 'Administrator', passwordHash, isAdmin: true }, { transaction })
        : await existing.update({ passwordHash, isAdmin: true, isDisabled: false }, { transaction });
    await recordAudit(transaction, null, 'user.create', { kind: 'user', id: user.id, label: email }, { isAdmin: true });
    return { email, password };
  });
}
