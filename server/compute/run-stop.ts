import type { Run } from '../models/run.js';

/** Why a run ended otherwise than it should, for people. */
export interface RunFailure {
  readonly code: string;
  readonly message: string;
}

/** Why a run does not go to its regular end. After a limit what was found is still ranked; the others end it at once. */
export type Stop =
  | { readonly kind: 'limit'; readonly code: 'timeLimit' | 'quotaUsedUp'; readonly message: string }
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

/** What the row of a run that is under way says about its end, so that every process that works on it knows. */
export function readStop({ cancelRequestedAt, failure }: Pick<Run, 'cancelRequestedAt' | 'failure'>): Stop | null {
  if (cancelRequestedAt !== null) return { kind: 'cancelled' };
  if (failure === null) return null;
  const { code, message } = failure;
  return code === 'timeLimit' || code === 'quotaUsedUp' ? { kind: 'limit', code, message } : { kind: 'failed', code, message };
}
