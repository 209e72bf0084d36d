import type { Sequelize } from 'sequelize';
import type { z } from 'zod';
import type { ownQuotaResponse, usageResponse } from '../../shared/schemas/people.js';
import { Quota } from '../models/quota.js';
import { Run } from '../models/run.js';
import { effectiveQuota, readQuota } from '../quotas/read-quota.js';
import { NO_USAGE, readTeamUsage, readUsage, usageMonth } from '../quotas/read-usage.js';
import { findMembers } from './members.js';

/** Usage of this month of every member. */
export async function findTeamUsage(sequelize: Sequelize, teamId: string, now: Date): Promise<z.input<typeof usageResponse>> {
  return await sequelize.transaction(async (transaction) => {
    const month = usageMonth(now);
    const members = await findMembers(teamId, transaction);
    const usageByUser = await readTeamUsage(transaction, teamId, month);
    const overrides = new Map((await Quota.findAll({ where: { teamId }, transaction })).map((quota) => [quota.userId, quota]));
    const people = members.map(({ membership, user }) => {
      const { figures, isOverridden } = effectiveQuota(user.isAdmin ? 'admin' : membership.role, overrides.get(user.id) ?? null);
      return {
        userId: user.id,
        name: user.name,
        role: membership.role,
        ...(usageByUser.get(user.id) ?? NO_USAGE),
        quota: figures,
        isOverridden,
      };
    });
    return { month, people };
  });
}

/** What a member may use, has used this month, and has under way. */
export async function findOwnQuota(
  sequelize: Sequelize,
  teamId: string,
  userId: string,
  now: Date,
): Promise<z.input<typeof ownQuotaResponse>> {
  return await sequelize.transaction(async (transaction) => {
    const { figures } = await readQuota(transaction, teamId, userId);
    const { usedCpuSeconds, reservedCpuSeconds } = await readUsage(transaction, teamId, userId, usageMonth(now));
    const runningCount = await Run.count({ where: { teamId, startedById: userId, status: ['queued', 'running'] }, transaction });
    return { quota: figures, usedCpuSeconds, reservedCpuSeconds, runningCount };
  });
}
