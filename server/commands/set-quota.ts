import type { z } from 'zod';
import type { quotaOverrideRequest } from '../../shared/schemas/people.js';
import type { AppContext } from '../app-context.js';
import { recordAudit } from '../audit/record-audit.js';
import { Quota } from '../models/quota.js';
import type { Team } from '../models/team.js';
import type { Actor } from '../policies/actor.js';
import { findMember } from '../queries/members.js';
import type { QuotaFigures } from '../quotas/quota-defaults.js';
import { readQuota } from '../quotas/read-quota.js';

/**
 * Sets what a member may use. Figures that are absent follow the role again; without any, nothing is overridden.
 * @returns what holds from now on
 * @throws NotFoundError when the person is not a member
 */
export async function setQuota(
  { sequelize }: AppContext,
  actor: Actor,
  team: Team,
  userId: string,
  override: z.output<typeof quotaOverrideRequest>,
): Promise<QuotaFigures> {
  return await sequelize.transaction(async (transaction) => {
    const { user } = await findMember(team.id, userId, transaction);
    const { figures: before } = await readQuota(transaction, team.id, userId);
    await Quota.destroy({ where: { teamId: team.id, userId }, transaction });
    if (Object.values(override).some((figure) => figure !== undefined)) {
      await Quota.create(
        {
          teamId: team.id,
          userId,
          cpuSecondsPerMonth: override.cpuSecondsPerMonth ?? null,
          candidatesPerRun: override.candidatesPerRun ?? null,
          runsAtOnce: override.runsAtOnce ?? null,
        },
        { transaction },
      );
    }
    const { figures: after } = await readQuota(transaction, team.id, userId);
    await recordAudit(
      transaction,
      actor,
      'member.setQuota',
      { kind: 'member', id: userId, label: user.email, teamId: team.id },
      { before, after },
    );
    return after;
  });
}
