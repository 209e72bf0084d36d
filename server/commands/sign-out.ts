import type { AppContext } from '../app-context.js';
import { recordAudit } from '../audit/record-audit.js';
import { Session } from '../models/session.js';
import { User } from '../models/user.js';
import { verifyAccessToken, verifyRefreshToken } from '../sessions/tokens.js';

/** Ends the session that either token names; without a good one there is nothing to end. */
export async function signOut({ config, sequelize }: AppContext, accessToken: string | null, refreshToken: string | null): Promise<void> {
  const key = config.secrets.tokenKey;
  const sessionId =
    (accessToken === null ? null : verifyAccessToken(key, accessToken)) ??
    (refreshToken === null ? null : verifyRefreshToken(key, refreshToken));
  if (sessionId === null) return;
  await sequelize.transaction(async (transaction) => {
    const session = await Session.findByPk(sessionId, { transaction, lock: transaction.LOCK.UPDATE });
    if (session === null || session.endedAt !== null) return;
    const user = await User.findByPk(session.userId, { transaction, rejectOnEmpty: true });
    await session.update({ endedAt: new Date(), endReason: 'signedOut' }, { transaction });
    await recordAudit(transaction, { userId: user.id, name: user.name }, 'session.end', { kind: 'user', id: user.id, label: user.email });
  });
}
