import type { z } from 'zod';
import { type Interval, outlookOf } from '../../shared/estimates/outlook.js';
import type { estimateResponse, runStartRequest } from '../../shared/schemas/runs.js';
import type { AppContext } from '../app-context.js';
import { ask } from '../compute/ask.js';
import type { Unknown } from '../models/unknown.js';
import type { Actor } from '../policies/actor.js';
import { findOwnQuota } from '../queries/usage.js';
import { chooseRevision } from './choose-revision.js';

const PROBES = 1_000_000;
const SEED = 1;
/** Of two seconds that people wait, some go to waiting for the thread and to the way there and back. */
const MAX_SECONDS = 1.5;
const LONGEST_WAIT_MS = 1_700;

/**
 * Size and cost of a run with these settings, by random probing, and what that is of the caller's quota. Saves nothing.
 * @throws InvalidInputError on evidence that the engine refuses
 */
export async function estimateRun(
  context: AppContext,
  actor: Actor,
  unknown: Unknown,
  input: z.output<typeof runStartRequest>,
): Promise<z.input<typeof estimateResponse>> {
  const deadlineEpochMs = Date.now() + LONGEST_WAIT_MS;
  const [{ evidence }, { quota, usedCpuSeconds, reservedCpuSeconds }] = await Promise.all([
    chooseRevision(unknown, input.revisionId),
    findOwnQuota(context.sequelize, unknown.teamId, actor.userId, new Date()),
  ]);
  const { options } = evidence;
  const keep = input.keep ?? Math.min(options.keep, quota.candidatesPerRun);
  const maxSeconds = input.maxSeconds === undefined ? options.maxSeconds : input.maxSeconds;
  const maxConstitutions = input.maxConstitutions === undefined ? (options.maxConstitutions ?? null) : input.maxConstitutions;
  const estimated = await ask(
    context,
    'estimate',
    { evidence, mode: 'rank', probes: PROBES, seed: SEED, maxSeconds: MAX_SECONDS, deadlineEpochMs, keep },
    'evidence.',
  );
  const threadCount = context.compute?.threadCount ?? 1;
  const cpuSecondsLeft = Math.max(0, quota.cpuSecondsPerMonth - usedCpuSeconds - reservedCpuSeconds);
  const cpu = { estimate: estimated.cpuSeconds, low: estimated.cpuSecondsLow, high: estimated.cpuSecondsHigh };
  const { kind, limit } = outlookOf(cpu, estimated, { cpuSecondsLeft, maxSeconds, maxConstitutions, threadCount });
  const { estimate, low, high, isExact, survivors, cpuSeconds, cpuSecondsLow, cpuSecondsHigh, hints, seconds } = estimated;
  return {
    estimate,
    low,
    high,
    isExact,
    survivors,
    cpuSeconds,
    cpuSecondsLow,
    cpuSecondsHigh,
    threadCount,
    cpuSecondsLeft,
    quotaShare: shareOf(cpu, cpuSecondsLeft),
    candidateShare: shareOf(atMost(survivors, keep), quota.candidatesPerRun),
    isHopeless: kind === 'hopeless',
    limit,
    hints: [...hints],
    seconds,
  };
}

function shareOf({ estimate, low, high }: Interval, allowed: number): Interval | null {
  return allowed > 0 ? { estimate: estimate / allowed, low: low / allowed, high: high / allowed } : null;
}

const atMost = ({ estimate, low, high }: Interval, most: number): Interval => ({
  estimate: Math.min(most, estimate),
  low: Math.min(most, low),
  high: Math.min(most, high),
});
