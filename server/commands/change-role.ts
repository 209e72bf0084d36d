import type { TeamRole } from '../../shared/types/roles.js';
import type { AppContext } from '../app-context.js';
import { recordAudit } from '../audit/record-audit.js';
import type { Team } from '../models/team.js';
import type { Actor } from '../policies/actor.js';
import { findMember, type Member } from '../queries/members.js';
import { requireAnotherLead } from './require-another-lead.js';

/**
 * Gives a member another role.
 * @throws NotFoundError when the person is not a member
 * @throws ConflictError lastLead
 */
export async function changeRole({ sequelize }: AppContext, actor: Actor, team: Team, userId: string, role: TeamRole): Promise<Member> {
  return await sequelize.transaction(async (transaction) => {
    // Changes in one team wait for each other, so that two leads cannot take the role from one another at once.
    await team.reload({ transaction, lock: transaction.LOCK.UPDATE });
    const member = await findMember(team.id, userId, transaction);
    const before = member.membership.role;
    if (before === role) return member;
    requireAnotherLead(actor, 'member.changeRole', member);
    await member.membership.update({ role }, { transaction });
    await recordAudit(
      transaction,
      actor,
      'member.changeRole',
      { kind: 'member', id: userId, label: member.user.email, teamId: team.id },
      { before, after: role },
    );
    return await findMember(team.id, userId, transaction);
  });
}
