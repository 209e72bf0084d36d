import { UniqueConstraintError } from 'sequelize';
import type { AppContext } from '../app-context.js';
import { recordAudit } from '../audit/record-audit.js';
import { ConflictError, linkUsedUp, UnauthenticatedError } from '../errors.js';
import type { Invitation } from '../models/invitation.js';
import { Membership } from '../models/membership.js';
import { User } from '../models/user.js';
import { hashPassword, verifyPassword } from '../sessions/passwords.js';
import { countSignInAttempt, forgetSignInAttempts } from '../sessions/sign-in-attempts.js';
import { startSession, type StartedSession } from '../sessions/start-session.js';

export interface InvitationAnswer {
  readonly name: string;
  readonly password: string;
  readonly userAgent: string;
}

/**
 * Joins the team and signs in. A new address gets an account with this name and password. An address that has an
 * account must give its present password: the link is also shown to the person who invites, and must not open
 * somebody else's account.
 * @throws NotFoundError linkUsedUp
 * @throws UnauthenticatedError signInFailed
 */
export async function acceptInvitation(context: AppContext, invitation: Invitation, answer: InvitationAnswer): Promise<StartedSession> {
  const { config, sequelize } = context;
  const existing = await User.findOne({ where: { email: invitation.email } });
  if (existing !== null) await proveOwnership(context, existing, answer.password);
  const passwordHash = existing === null ? await hashPassword(config, answer.password) : existing.passwordHash;
  try {
    return await sequelize.transaction(async (transaction) => {
      await invitation.reload({ transaction, lock: transaction.LOCK.UPDATE });
      if (!invitation.isOpen(new Date())) throw linkUsedUp();
      const user = existing ?? (await User.create({ email: invitation.email, name: answer.name, passwordHash }, { transaction }));
      const actor = { userId: user.id, name: user.name };
      await Membership.create({ teamId: invitation.teamId, userId: user.id, role: invitation.role }, { transaction });
      await invitation.update({ acceptedAt: new Date() }, { transaction });
      await forgetSignInAttempts(user.email, transaction);
      await recordAudit(
        transaction,
        actor,
        'invitation.accept',
        { kind: 'invitation', id: invitation.id, label: invitation.email, teamId: invitation.teamId },
        { role: invitation.role, newAccount: existing === null },
      );
      return await startSession(transaction, config.secrets.tokenKey, user.id, answer.userAgent);
    });
  } catch (error) {
    // Two invitations of one address accepted at the same moment: the second finds the account or membership made by the first.
    if (error instanceof UniqueConstraintError) throw new ConflictError('alreadyMember', 'This address has just joined. Please sign in.');
    throw error;
  }
}

async function proveOwnership({ config, sequelize }: AppContext, user: User, password: string): Promise<void> {
  await countSignInAttempt(sequelize, user.email);
  const isRight = await verifyPassword(config, password, user.passwordHash);
  if (!isRight || user.isDisabled) throw new UnauthenticatedError('signInFailed', 'This is not the password of the account.');
}
