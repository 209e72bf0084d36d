import type { AppContext } from '../app-context.js';
import { recordAudit } from '../audit/record-audit.js';
import { UnauthenticatedError } from '../errors.js';
import { Session } from '../models/session.js';
import { User } from '../models/user.js';
import { sessionExpiry, type StartedSession } from '../sessions/start-session.js';
import { createTokenPair, hashOf, verifyRefreshToken } from '../sessions/tokens.js';

/**
 * Exchanges a refresh token for a new pair. Each is good once: one that comes a second time has been copied by
 * somebody, and since nobody can tell which of the two is the thief, the session ends for both.
 * @throws UnauthenticatedError
 */
export async function refreshSession(context: AppContext, refreshToken: string | null): Promise<StartedSession> {
  const { config, sequelize } = context;
  const sessionId = refreshToken === null ? null : verifyRefreshToken(config.secrets.tokenKey, refreshToken);
  if (refreshToken === null || sessionId === null) throw new UnauthenticatedError();
  const now = new Date();
  // A replay must be committed, so it leaves the transaction as a value.
  const renewed = await sequelize.transaction(async (transaction) => {
    const session = await Session.findByPk(sessionId, { transaction, lock: transaction.LOCK.UPDATE });
    if (session === null || !session.isOpen(now)) return null;
    const user = await User.findByPk(session.userId, { transaction });
    if (user === null || user.isDisabled) return null;
    if (session.refreshTokenHash !== hashOf(refreshToken)) {
      await session.update({ endedAt: now, endReason: 'replayed' }, { transaction });
      await recordAudit(transaction, { userId: user.id, name: user.name }, 'session.replayed', {
        kind: 'user',
        id: user.id,
        label: user.email,
      });
      return null;
    }
    const tokens = createTokenPair(config.secrets.tokenKey, session.id);
    await session.update(
      { refreshTokenHash: hashOf(tokens.refresh), lastUsedAt: now, expiresAt: sessionExpiry(session.createdAt, now) },
      { transaction },
    );
    return { sessionId: session.id, tokens };
  });
  if (renewed === null) throw new UnauthenticatedError('sessionEnded', 'Your session has ended. Please sign in again.');
  return renewed;
}
