import { describe, expect, it } from 'vitest';
import { formatFold } from '../../../shared/estimates/fold.js';
import { outlookOf } from '../../../shared/estimates/outlook.js';

const free = { cpuSecondsLeft: null, maxSeconds: null, maxConstitutions: null, threadCount: 2 };
const interval = (estimate: number, factor = 2) => ({ estimate, low: estimate / factor, high: estimate * factor });

describe('the outlook of a run', () => {
  it('is that it ends where the whole interval fits', () => {
    expect(outlookOf(interval(100), interval(1_000), free)).toEqual({ kind: 'ends', limit: null, excess: 0 });
    expect(outlookOf(interval(100), interval(1_000), { ...free, cpuSecondsLeft: 200 }).kind).toBe('ends');
  });

  it('is doubtful where only a part of it fits, hopeless where none does', () => {
    expect(outlookOf(interval(100), interval(1_000), { ...free, cpuSecondsLeft: 199 })).toEqual({
      kind: 'doubtful',
      limit: 'quota',
      excess: 100 / 199,
    });
    expect(outlookOf(interval(100), interval(1_000), { ...free, cpuSecondsLeft: 49 })).toMatchObject({ kind: 'hopeless', limit: 'quota' });
  });

  it('shares CPU seconds out among the threads for a time limit', () => {
    expect(outlookOf(interval(100), interval(1_000), { ...free, maxSeconds: 100 }).kind).toBe('ends');
    expect(outlookOf(interval(100), interval(1_000), { ...free, maxSeconds: 20 })).toMatchObject({ kind: 'hopeless', limit: 'timeLimit' });
  });

  it('names the limit that is passed by most', () => {
    const limits = { cpuSecondsLeft: 10, maxSeconds: null, maxConstitutions: 10, threadCount: 1 };
    expect(outlookOf(interval(100), interval(1_000), limits)).toMatchObject({ kind: 'hopeless', limit: 'countLimit', excess: 100 });
  });

  it('is hopeless with nothing left', () => {
    expect(outlookOf(interval(1), interval(1), { ...free, cpuSecondsLeft: 0 })).toMatchObject({ kind: 'hopeless', limit: 'quota' });
  });
});

describe('a factor in words', () => {
  it('has no more digits than an estimate deserves', () => {
    expect([1.62, 2.7, 2.8, 7.6, 12.3, 94, 296, 1_234, 45_678].map(formatFold)).toEqual([
      '1.6-fold',
      '2.7-fold',
      '3-fold',
      '8-fold',
      '12-fold',
      '94-fold',
      '300-fold',
      '1000-fold',
      '50\u2009000-fold',
    ]);
    expect(formatFold(3.2e8)).toBe('3 × 10⁸-fold');
  });
});
