import type { AppContext } from '../app-context.js';
import { recordAudit } from '../audit/record-audit.js';
import { UnauthenticatedError } from '../errors.js';
import { User } from '../models/user.js';
import { verifyPassword } from '../sessions/passwords.js';
import { countSignInAttempt, forgetSignInAttempts } from '../sessions/sign-in-attempts.js';
import { startSession, type StartedSession } from '../sessions/start-session.js';

/**
 * Opens a session for a right password. Unknown, disabled and existing accounts get the same answers in the same time.
 * @throws UnauthenticatedError signInFailed
 * @throws TooManyRequestsError after too many wrong passwords
 */
export async function signIn(
  context: AppContext,
  input: { readonly email: string; readonly password: string; readonly userAgent: string },
): Promise<StartedSession> {
  const { config, sequelize } = context;
  await countSignInAttempt(sequelize, input.email);
  const user = await User.findOne({ where: { email: input.email } });
  const isRight = await verifyPassword(config, input.password, user?.passwordHash ?? null);
  if (user === null || !isRight || user.isDisabled)
    throw new UnauthenticatedError('signInFailed', 'E-mail address or password is not right.');
  return await sequelize.transaction(async (transaction) => {
    await forgetSignInAttempts(user.email, transaction);
    const session = await startSession(transaction, config.secrets.tokenKey, user.id, input.userAgent);
    await recordAudit(transaction, { userId: user.id, name: user.name }, 'session.start', { kind: 'user', id: user.id, label: user.email });
    return session;
  });
}
