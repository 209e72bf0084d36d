import type { TeamRole } from '../../shared/types/roles.js';
import type { AppContext } from '../app-context.js';
import { recordAudit } from '../audit/record-audit.js';
import { ConflictError } from '../errors.js';
import { invitationLink } from '../mail/links.js';
import { invitationMessage } from '../mail/messages.js';
import { queueMail } from '../mail/queue-mail.js';
import { Invitation } from '../models/invitation.js';
import { Membership } from '../models/membership.js';
import type { Team } from '../models/team.js';
import { User } from '../models/user.js';
import type { Actor } from '../policies/actor.js';
import { createSecret, hashOf } from '../sessions/tokens.js';

const INVITATION_DAYS = 7;

/**
 * Invites an address to a team. An open invitation of the same address is replaced: its link stops working.
 * @returns the invitation and its link, which is stored nowhere but in the mail
 * @throws ConflictError alreadyMember
 */
export async function createInvitation(
  { sequelize, config }: AppContext,
  actor: Actor,
  team: Team,
  input: { readonly email: string; readonly role: TeamRole },
): Promise<{ invitation: Invitation; link: string }> {
  const secret = createSecret();
  const link = invitationLink(config, secret);
  const now = new Date();
  const expiresAt = new Date(now.getTime() + INVITATION_DAYS * 86_400_000);
  const invitation = await sequelize.transaction(async (transaction) => {
    await team.reload({ transaction, lock: transaction.LOCK.UPDATE });
    const user = await User.findOne({ where: { email: input.email }, transaction });
    if (user !== null && (await Membership.count({ where: { teamId: team.id, userId: user.id }, transaction })) > 0) {
      throw new ConflictError('alreadyMember', `${input.email} is a member of this team already.`);
    }
    await Invitation.update(
      { revokedAt: now },
      { where: { teamId: team.id, email: input.email, acceptedAt: null, revokedAt: null }, transaction },
    );
    const created = await Invitation.create(
      { teamId: team.id, email: input.email, role: input.role, tokenHash: hashOf(secret), invitedById: actor.userId, expiresAt },
      { transaction },
    );
    await queueMail(
      transaction,
      invitationMessage({ email: input.email, teamName: team.name, role: input.role, invitedBy: actor.name, link, expiresAt }),
      expiresAt,
    );
    await recordAudit(
      transaction,
      actor,
      'invitation.create',
      { kind: 'invitation', id: created.id, label: input.email, teamId: team.id },
      { role: input.role },
    );
    return created;
  });
  return { invitation, link };
}
