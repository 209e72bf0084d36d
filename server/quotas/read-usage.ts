import { QueryTypes, type Transaction } from 'sequelize';
import { UsageEntry } from '../models/usage-entry.js';

export interface Usage {
  /** CPU seconds of runs that have ended. */
  readonly usedCpuSeconds: number;
  /** CPU seconds set aside for runs that have not. */
  readonly reservedCpuSeconds: number;
  readonly runCount: number;
}

export const NO_USAGE: Usage = { usedCpuSeconds: 0, reservedCpuSeconds: 0, runCount: 0 };

/** UTC month as usage is counted, `2031-07`. */
export const usageMonth = (now: Date): string => now.toISOString().slice(0, 7);

interface UsageRow {
  readonly userId: string;
  readonly used: number;
  readonly reserved: number;
  readonly runCount: number;
}

/** Usage of a month by person; people without any are absent. */
export async function readTeamUsage(transaction: Transaction, teamId: string, month: string): Promise<Map<string, Usage>> {
  const rows = await sumUsage(transaction, 'team_id = :teamId AND month = :month', { teamId, month });
  return new Map(rows.map((row) => [row.userId, { usedCpuSeconds: row.used, reservedCpuSeconds: row.reserved, runCount: row.runCount }]));
}

/** Usage of one member in a month. */
export async function readUsage(transaction: Transaction, teamId: string, userId: string, month: string): Promise<Usage> {
  const [row] = await sumUsage(transaction, 'team_id = :teamId AND user_id = :userId AND month = :month', { teamId, userId, month });
  return row === undefined ? NO_USAGE : { usedCpuSeconds: row.used, reservedCpuSeconds: row.reserved, runCount: row.runCount };
}

async function sumUsage(transaction: Transaction, condition: string, replacements: Record<string, string>): Promise<UsageRow[]> {
  const { sequelize } = UsageEntry;
  if (sequelize === undefined) throw new Error('The models are not bound to a database.');
  return await sequelize.query<UsageRow>(
    `SELECT user_id AS userId,
            SUM(IF(kind = 'settled', cpu_seconds, 0)) AS used,
            SUM(IF(kind = 'reserved', cpu_seconds, 0)) AS reserved,
            COUNT(*) AS runCount
       FROM usage_entries WHERE ${condition} GROUP BY user_id`,
    { type: QueryTypes.SELECT, replacements, transaction },
  );
}
