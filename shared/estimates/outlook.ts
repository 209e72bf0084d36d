/** A number with the ends of its 95 % interval. */
export interface Interval {
  readonly estimate: number;
  readonly low: number;
  readonly high: number;
}

/** What a run may use; null = no limit. */
export interface RunLimits {
  /** CPU seconds left of the person's month. */
  readonly cpuSecondsLeft: number | null;
  /** Wall-clock limit of the run. */
  readonly maxSeconds: number | null;
  readonly maxConstitutions: number | null;
  /** Threads that share the work. */
  readonly threadCount: number;
}

export type LimitKind = 'quota' | 'timeLimit' | 'countLimit';

export interface Outlook {
  /** ends: even the high end of the interval fits; doubtful: only part of it does; hopeless: not even the low end does. */
  readonly kind: 'ends' | 'doubtful' | 'hopeless';
  /** The limit that is passed by most; null when all hold. */
  readonly limit: LimitKind | null;
  /** Expected need over what that limit allows. */
  readonly excess: number;
}

/** Tells whether a run of the estimated size comes to its end within its limits. */
export function outlookOf(cpuSeconds: Interval, constitutions: Interval, limits: RunLimits): Outlook {
  const needs: { limit: LimitKind; low: number; high: number; estimate: number }[] = [];
  const add = (limit: LimitKind, { low, high, estimate }: Interval, allowed: number | null): void => {
    if (allowed !== null) needs.push({ limit, low: over(low, allowed), high: over(high, allowed), estimate: over(estimate, allowed) });
  };
  add('quota', cpuSeconds, limits.cpuSecondsLeft);
  add('timeLimit', cpuSeconds, limits.maxSeconds === null ? null : limits.maxSeconds * limits.threadCount);
  add('countLimit', constitutions, limits.maxConstitutions);
  const worst = needs.sort((a, b) => b.estimate - a.estimate)[0];
  if (worst === undefined || worst.high <= 1) return { kind: 'ends', limit: null, excess: worst?.estimate ?? 0 };
  return { kind: worst.low > 1 ? 'hopeless' : 'doubtful', limit: worst.limit, excess: worst.estimate };
}

const over = (need: number, allowed: number): number => (allowed > 0 ? need / allowed : need > 0 ? Infinity : 0);
