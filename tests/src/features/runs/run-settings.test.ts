import { describe, expect, it } from 'vitest';
import { formatEstimate, formatShare, formatSpan } from '../../../../src/features/runs/components/estimate-text.js';
import { checkRunSettings, describeFigure } from '../../../../src/features/runs/components/run-settings.js';

const free = { keep: 1, maxSeconds: null, maxConstitutions: null };

describe('the settings of a run', () => {
  it('may keep as many candidates as the quota allows, and not one more', () => {
    expect(checkRunSettings({ ...free, keep: 2000 }, 2000).keep).toBeUndefined();
    expect(checkRunSettings({ ...free, keep: 2001 }, 2000).keep).toContain('between 1 and 2000');
  });

  it.each([[0], [1.5], [null], [Number.NaN]])('refuse %s candidates', (keep) => {
    expect(checkRunSettings({ ...free, keep }, 2000).keep).toBeDefined();
  });

  it('need no time limit, but a sensible one if any', () => {
    expect(checkRunSettings(free, 10).maxSeconds).toBeUndefined();
    expect(checkRunSettings({ ...free, maxSeconds: 90 }, 10).maxSeconds).toBeUndefined();
    for (const bad of [0, -5, 90_000, Number.NaN]) expect(checkRunSettings({ ...free, maxSeconds: bad }, 10).maxSeconds).toBeDefined();
  });
});

describe('a limit of constitutions', () => {
  it('is a whole number from 1 on, or none', () => {
    for (const good of [null, 1, 250_000])
      expect(checkRunSettings({ ...free, maxConstitutions: good }, 10).maxConstitutions).toBeUndefined();
    for (const bad of [0, 2.5, Number.NaN, 1e13])
      expect(checkRunSettings({ ...free, maxConstitutions: bad }, 10).maxConstitutions).toBeDefined();
  });
});

describe('the figures behind a refusal', () => {
  it('are named and carry their unit', () => {
    expect(describeFigure('usedCpuSeconds', 7200)).toEqual({ label: 'CPU time used this month', value: '7200\u2009s' });
    expect(describeFigure('runsAtOnce', 2)).toEqual({ label: 'Runs at once', value: '2' });
  });

  it('are spelt out when they are new here', () => {
    expect(describeFigure('queuedRuns', 12_345)).toEqual({ label: 'Queued runs', value: '12\u2009345' });
  });
});

describe('an estimated number', () => {
  it('has no more digits than an estimate deserves', () => {
    expect(formatEstimate(212)).toBe('212');
    expect(formatEstimate(24_938)).toBe('24\u2009900');
    expect(formatEstimate(3_149_000)).toBe('3.1 million');
    expect(formatEstimate(2.5e11)).toBe('250 billion');
    expect(formatEstimate(6.54e19)).toBe('6.5\u2009×\u200910¹⁹');
  });

  it('of seconds is told in the largest unit that says something', () => {
    expect([0.02, 12, 80, 1_257, 12_000, 3 * 86_400, 3.2e9, 1e20].map(formatSpan)).toEqual([
      '<\u20090.1\u2009s',
      '12\u2009s',
      '80\u2009s',
      '21\u2009min',
      '3.3\u2009h',
      '3 days',
      '101 years',
      '3.2 trillion years',
    ]);
  });

  it('of a share is a percentage, or a factor when it is many times too much', () => {
    expect([0.0004, 0.0123, 0.42, 1.8, 550_000].map(formatShare)).toEqual([
      '<\u20090.1\u2009%',
      '1.2\u2009%',
      '42\u2009%',
      '180\u2009%',
      '550\u2009000 times',
    ]);
  });
});
