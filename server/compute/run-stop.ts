import type { RunSettings, ShardLimit } from '../../shared/jobs/contract.js';
import type { Run } from '../models/run.js';

type RunLimits = Pick<RunSettings, 'maxSeconds' | 'maxConstitutions'>;

/** Why a run ended otherwise than it should, for people. */
export interface RunFailure {
  readonly code: string;
  readonly message: string;
}

const LIMIT_CODES = ['timeLimit', 'countLimit', 'memoryLimit', 'quotaUsedUp'] as const;
type LimitCode = (typeof LIMIT_CODES)[number];

/** Why a run does not go to its regular end. After a limit what was found is still ranked; the others end it at once. */
export type Stop =
  | { readonly kind: 'limit'; readonly code: LimitCode; readonly message: string }
  | ({ readonly kind: 'failed' } & RunFailure)
  | { readonly kind: 'cancelled' };

export const timeLimitStop = (maxSeconds: number): Stop & RunFailure => ({
  kind: 'limit',
  code: 'timeLimit',
  message: `Stopped at the time limit of ${maxSeconds} s; what was found by then is ranked.`,
});

export const QUOTA_STOP: Stop & RunFailure = {
  kind: 'limit',
  code: 'quotaUsedUp',
  message: 'Stopped because the CPU seconds of this month are used up; what was found by then is ranked.',
};

export const countLimitStop = (maxConstitutions: number): Stop & RunFailure => ({
  kind: 'limit',
  code: 'countLimit',
  message: `Stopped at the limit of ${maxConstitutions} constitutions; what was found by then is ranked.`,
});

const MEMORY_STOP: Stop & RunFailure = {
  kind: 'limit',
  code: 'memoryLimit',
  message: 'Parts of the search were stopped because they needed more memory than a thread may use; what was found by then is ranked.',
};

/** The reason of a run whose shards stopped themselves. */
export function stopOfShards(stoppedBy: ShardLimit | null, { maxSeconds, maxConstitutions = null }: RunLimits): (Stop & RunFailure) | null {
  if (stoppedBy === 'memory') return MEMORY_STOP;
  if (stoppedBy === 'count' && maxConstitutions !== null) return countLimitStop(maxConstitutions);
  return stoppedBy === 'time' && maxSeconds !== null ? timeLimitStop(maxSeconds) : null;
}

/** What the row of a run that is under way says about its end, so that every process that works on it knows. */
export function readStop({ cancelRequestedAt, failure }: Pick<Run, 'cancelRequestedAt' | 'failure'>): Stop | null {
  if (cancelRequestedAt !== null) return { kind: 'cancelled' };
  if (failure === null) return null;
  const { code, message } = failure;
  const limit = LIMIT_CODES.find((known) => known === code);
  return limit === undefined ? { kind: 'failed', code, message } : { kind: 'limit', code: limit, message };
}
