import { Op } from 'sequelize';
import { linkUsedUp } from '../errors.js';
import { Invitation } from '../models/invitation.js';
import { Team } from '../models/team.js';
import { User } from '../models/user.js';
import { hashOf } from '../sessions/tokens.js';

/** An invitation with its team and the person who made it, for whoever holds the link. */
export async function findInvitationBySecret(secret: string): Promise<Invitation & { team: Team; invitedBy: User }> {
  const invitation = await Invitation.findOne({
    where: { tokenHash: hashOf(secret) },
    include: [
      { model: Team, as: 'team', required: true },
      { model: User, as: 'invitedBy', required: true },
    ],
  });
  if (invitation === null || !invitation.isOpen(new Date())) throw linkUsedUp();
  // Both are required by the query.
  return invitation as Invitation & { team: Team; invitedBy: User };
}

/** Open invitations of a team, newest first. */
export async function findOpenInvitations(teamId: string): Promise<Invitation[]> {
  return await Invitation.findAll({
    where: { teamId, acceptedAt: null, revokedAt: null, expiresAt: { [Op.gt]: new Date() } },
    include: [{ model: User, as: 'invitedBy', required: true }],
    order: [['createdAt', 'DESC']],
  });
}
