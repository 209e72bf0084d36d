import type { Transaction } from 'sequelize';
import { NotFoundError } from '../errors.js';
import { Membership } from '../models/membership.js';
import { Quota } from '../models/quota.js';
import { User } from '../models/user.js';
import { QUOTA_DEFAULTS, type QuotaFigures } from './quota-defaults.js';

export interface EffectiveQuota {
  readonly figures: QuotaFigures;
  /** At least one figure was set for this member. */
  readonly isOverridden: boolean;
}

/** Default of the role with what was set for the member laid over it. */
export function effectiveQuota(role: keyof typeof QUOTA_DEFAULTS, override: Quota | null): EffectiveQuota {
  const defaults = QUOTA_DEFAULTS[role];
  return {
    figures: {
      cpuSecondsPerMonth: override?.cpuSecondsPerMonth ?? defaults.cpuSecondsPerMonth,
      candidatesPerRun: override?.candidatesPerRun ?? defaults.candidatesPerRun,
      runsAtOnce: override?.runsAtOnce ?? defaults.runsAtOnce,
    },
    isOverridden: override !== null,
  };
}

/**
 * What a member may use in a team. The membership row is locked until the transaction ends, so that two reservations
 * of one member are made one after the other.
 * @throws NotFoundError when the person is not a member
 */
export async function readQuota(transaction: Transaction, teamId: string, userId: string): Promise<EffectiveQuota> {
  const membership = await Membership.findOne({ where: { teamId, userId }, transaction, lock: transaction.LOCK.UPDATE });
  const user = membership === null ? null : await User.findByPk(userId, { attributes: ['isAdmin'], transaction });
  if (membership === null || user === null) throw new NotFoundError();
  const override = await Quota.findOne({ where: { teamId, userId }, transaction });
  return effectiveQuota(user.isAdmin ? 'admin' : membership.role, override);
}
