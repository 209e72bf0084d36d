import type { AppContext } from '../app-context.js';
import { recordAudit } from '../audit/record-audit.js';
import { Quota } from '../models/quota.js';
import type { Team } from '../models/team.js';
import type { Actor } from '../policies/actor.js';
import { findMember } from '../queries/members.js';
import { requireAnotherLead } from './require-another-lead.js';

/**
 * Takes a person out of a team; what they made stays, with their name.
 * @throws NotFoundError when the person is not a member
 * @throws ConflictError lastLead
 */
export async function removeMember({ sequelize }: AppContext, actor: Actor, team: Team, userId: string): Promise<void> {
  await sequelize.transaction(async (transaction) => {
    await team.reload({ transaction, lock: transaction.LOCK.UPDATE });
    const member = await findMember(team.id, userId, transaction);
    requireAnotherLead(actor, 'member.remove', member);
    await Quota.destroy({ where: { teamId: team.id, userId }, transaction });
    await member.membership.destroy({ transaction });
    await recordAudit(
      transaction,
      actor,
      'member.remove',
      { kind: 'member', id: userId, label: member.user.email, teamId: team.id },
      { role: member.membership.role },
    );
  });
}
