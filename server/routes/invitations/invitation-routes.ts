import type { AppContext } from '../../app-context.js';
import { acceptInvitation } from '../../commands/accept-invitation.js';
import { createInvitation } from '../../commands/create-invitation.js';
import { revokeInvitation } from '../../commands/revoke-invitation.js';
import { Invitation } from '../../models/invitation.js';
import { Team } from '../../models/team.js';
import { User } from '../../models/user.js';
import { authorize } from '../../policies/authorize.js';
import { presentInvitation } from '../../presenters/invitation.js';
import { findInvitationBySecret } from '../../queries/invitations.js';
import { publicRoute, route, type Route } from '../route.js';
import { answerWithSession } from '../session/answer-with-session.js';

export function invitationRoutes(context: AppContext): Route[] {
  return [
    publicRoute(
      'readInvitation',
      async ({ params }) => {
        const invitation = await findInvitationBySecret(params.token);
        return {
          email: invitation.email,
          teamName: invitation.team.name,
          role: invitation.role,
          invitedBy: invitation.invitedBy.name,
          expiresAt: invitation.expiresAt.toISOString(),
          needsAccount: (await User.count({ where: { email: invitation.email } })) === 0,
        };
      },
      { limit: 'secretLink' },
    ),
    publicRoute(
      'acceptInvitation',
      async ({ params, body, request, response }) => {
        const invitation = await findInvitationBySecret(params.token);
        const session = await acceptInvitation(context, invitation, { ...body, userAgent: request.get('User-Agent') ?? '' });
        return await answerWithSession(context, response, session);
      },
      { limit: 'secretLink' },
    ),
    route(
      'invite',
      async ({ actor, params, body }) => {
        const team = authorize(actor, 'team.manageMembers', await Team.findByPk(params.teamId));
        const { invitation, link } = await createInvitation(context, actor, team, body);
        return { invitation: presentInvitation(actor, invitation, actor.name), link };
      },
      { status: 201 },
    ),
    route('revokeInvitation', async ({ actor, params }) => {
      const invitation = await Invitation.findOne({ where: { id: params.invitationId, teamId: params.teamId } });
      await revokeInvitation(context, actor, authorize(actor, 'invitation.revoke', invitation));
    }),
  ];
}
