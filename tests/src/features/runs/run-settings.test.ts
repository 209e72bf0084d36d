import { describe, expect, it } from 'vitest';
import { formatEstimate } from '../../../../src/features/runs/components/estimate-text.js';
import { checkRunSettings, describeFigure } from '../../../../src/features/runs/components/run-settings.js';

describe('the settings of a run', () => {
  it('may keep as many candidates as the quota allows, and not one more', () => {
    expect(checkRunSettings({ keep: 2000, maxSeconds: null }, 2000).keep).toBeUndefined();
    expect(checkRunSettings({ keep: 2001, maxSeconds: null }, 2000).keep).toContain('between 1 and 2000');
  });

  it.each([[0], [1.5], [null], [Number.NaN]])('refuse %s candidates', (keep) => {
    expect(checkRunSettings({ keep, maxSeconds: null }, 2000).keep).toBeDefined();
  });

  it('need no time limit, but a sensible one if any', () => {
    expect(checkRunSettings({ keep: 1, maxSeconds: null }, 10).maxSeconds).toBeUndefined();
    expect(checkRunSettings({ keep: 1, maxSeconds: 90 }, 10).maxSeconds).toBeUndefined();
    for (const bad of [0, -5, 90_000, Number.NaN]) expect(checkRunSettings({ keep: 1, maxSeconds: bad }, 10).maxSeconds).toBeDefined();
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
  });
});
