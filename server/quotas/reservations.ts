import type { Transaction } from 'sequelize';
import { ConflictError, NotFoundError } from '../errors.js';
import { Run } from '../models/run.js';
import { UsageEntry } from '../models/usage-entry.js';
import type { QuotaFigures } from './quota-defaults.js';
import { readQuota } from './read-quota.js';
import { readUsage, usageMonth } from './read-usage.js';

/** What a run asks for before it starts. */
export interface RunDemand {
  readonly teamId: string;
  readonly userId: string;
  readonly keep: number;
  /** CPU seconds the run can take at most; null = no limit. */
  readonly maxCpuSeconds: number | null;
}

/**
 * A run reserves CPU seconds in steps of this share of the month, so that one long run does not keep its owner from
 * starting a short one; a step is at least and at most so many seconds.
 */
const STEP_SHARE = 0.05;
const SMALLEST_STEP_SECONDS = 30;
const LARGEST_STEP_SECONDS = 1_800;

const reservationStep = (figures: QuotaFigures): number =>
  Math.min(LARGEST_STEP_SECONDS, Math.max(SMALLEST_STEP_SECONDS, figures.cpuSecondsPerMonth * STEP_SHARE));

/**
 * Checks a run against the quota of its owner.
 * @param figures - read by `readQuota` in the same transaction: it keeps the membership locked, so that two runs
 * started at the same time are counted one after the other
 * @returns the CPU seconds to reserve
 * @throws ConflictError `quotaExceeded` with the figures
 */
export async function checkQuota(transaction: Transaction, figures: QuotaFigures, demand: RunDemand, now: Date): Promise<number> {
  const { usedCpuSeconds, reservedCpuSeconds } = await readUsage(transaction, demand.teamId, demand.userId, usageMonth(now));
  const runningCount = await Run.count({
    where: { teamId: demand.teamId, startedById: demand.userId, status: ['queued', 'running'] },
    transaction,
  });
  if (runningCount >= figures.runsAtOnce) {
    throw quotaExceeded(
      `You have ${runningCount} of at most ${figures.runsAtOnce} runs under way at once. Wait for one to end, or cancel it.`,
      {
        runningCount,
        runsAtOnce: figures.runsAtOnce,
      },
    );
  }
  if (demand.keep > figures.candidatesPerRun) {
    throw quotaExceeded(`The run asks to keep ${demand.keep} candidates; your quota allows ${figures.candidatesPerRun}.`, {
      keep: demand.keep,
      candidatesPerRun: figures.candidatesPerRun,
    });
  }
  const leftSeconds = figures.cpuSecondsPerMonth - usedCpuSeconds - reservedCpuSeconds;
  if (leftSeconds <= 0) {
    throw quotaExceeded(
      `Of the ${figures.cpuSecondsPerMonth} CPU seconds of this month ${Math.round(usedCpuSeconds)} are used and ${Math.round(reservedCpuSeconds)} are reserved for runs under way.`,
      { usedCpuSeconds, reservedCpuSeconds, cpuSecondsPerMonth: figures.cpuSecondsPerMonth },
    );
  }
  return Math.min(leftSeconds, reservationStep(figures), demand.maxCpuSeconds ?? Infinity);
}

/** Sets CPU seconds aside for a run, in the transaction that creates it. */
export async function reserveUsage(
  transaction: Transaction,
  run: { id: string; teamId: string; startedById: string },
  cpuSeconds: number,
  now: Date,
): Promise<void> {
  await UsageEntry.create(
    { teamId: run.teamId, userId: run.startedById, runId: run.id, month: usageMonth(now), kind: 'reserved', cpuSeconds },
    { transaction },
  );
}

/** CPU seconds set aside for a run; 0 once it is settled. */
export async function readReservation(runId: string): Promise<number> {
  const entry = await UsageEntry.findOne({ where: { runId, kind: 'reserved' } });
  return entry?.cpuSeconds ?? 0;
}

/**
 * Sets more aside for a run that needs it, as far as the quota goes.
 * @param usedSeconds - CPU seconds the run has used so far
 * @returns CPU seconds set aside now; not above `usedSeconds` when the quota is used up
 */
export async function extendReservation(transaction: Transaction, runId: string, usedSeconds: number): Promise<number> {
  const known = await UsageEntry.findOne({ where: { runId, kind: 'reserved' }, transaction });
  if (known === null) return 0;
  try {
    // Membership first, then the entry: the order in which a starting run takes its locks.
    const { figures } = await readQuota(transaction, known.teamId, known.userId);
    const usage = await readUsage(transaction, known.teamId, known.userId, known.month);
    const leftSeconds = figures.cpuSecondsPerMonth - usage.usedCpuSeconds - usage.reservedCpuSeconds;
    const cpuSeconds = Math.min(usedSeconds + reservationStep(figures), known.cpuSeconds + Math.max(0, leftSeconds));
    await known.update({ cpuSeconds: Math.max(cpuSeconds, known.cpuSeconds) }, { transaction });
    return known.cpuSeconds;
  } catch (error) {
    // Whoever left the team gets nothing more.
    if (error instanceof NotFoundError) return known.cpuSeconds;
    throw error;
  }
}

/** Charges a run with what it used, in the transaction that ends it. */
export async function settleUsage(transaction: Transaction, runId: string, cpuSeconds: number): Promise<void> {
  await UsageEntry.update({ kind: 'settled', cpuSeconds }, { where: { runId, kind: 'reserved' }, transaction });
}

const quotaExceeded = (message: string, figures: Record<string, number>): ConflictError =>
  new ConflictError('quotaExceeded', message, figures);
