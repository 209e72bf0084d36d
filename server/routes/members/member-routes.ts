import type { AppContext } from '../../app-context.js';
import { changeRole } from '../../commands/change-role.js';
import { removeMember } from '../../commands/remove-member.js';
import { setQuota } from '../../commands/set-quota.js';
import { Team } from '../../models/team.js';
import { authorize } from '../../policies/authorize.js';
import { presentInvitation } from '../../presenters/invitation.js';
import { presentMember } from '../../presenters/member.js';
import { findOpenInvitations } from '../../queries/invitations.js';
import { findMembers } from '../../queries/members.js';
import { route, type Route } from '../route.js';

export function memberRoutes(context: AppContext): Route[] {
  return [
    route('listMembers', async ({ actor, params }) => {
      const team = authorize(actor, 'team.readMembers', await Team.findByPk(params.teamId));
      const [members, invitations] = await Promise.all([findMembers(team.id), findOpenInvitations(team.id)]);
      return {
        members: members.map((member) => presentMember(actor, member)),
        invitations: invitations.map((invitation) => presentInvitation(actor, invitation, invitation.invitedBy?.name ?? '')),
      };
    }),
    route('changeRole', async ({ actor, params, body }) => {
      const team = authorize(actor, 'team.manageMembers', await Team.findByPk(params.teamId));
      return presentMember(actor, await changeRole(context, actor, team, params.userId, body.role));
    }),
    route('removeMember', async ({ actor, params }) => {
      const team = authorize(actor, 'team.manageMembers', await Team.findByPk(params.teamId));
      await removeMember(context, actor, team, params.userId);
    }),
    route('setQuota', async ({ actor, params, body }) => {
      const team = authorize(actor, 'team.setQuotas', await Team.findByPk(params.teamId));
      return await setQuota(context, actor, team, params.userId, body);
    }),
  ];
}
