import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { layOutBand, threadCount, type BandFrame } from '../../../../src/components/funnel/band-geometry.js';
import { bandFromFunnel, bandFromProgress, describeBand, type Funnel } from '../../../../src/components/funnel/funnel-stages.js';

const frame: BandFrame = { width: 1000, height: 160, left: 8, top: 10, pitch: 3, threadsPerDecade: 4 };

const STAGES = ['constitutions', 'excludedFragments', 'ringSizes', 'plausibility', 'signals', 'ranked'] as const;
/** Funnels whose stages hand on what they let through, as the contract of a run says. */
const funnels: fc.Arbitrary<Funnel> = fc
  .tuple(fc.integer({ min: 0, max: 50_000_000 }), fc.array(fc.double({ min: 0, max: 1, noNaN: true }), { minLength: 6, maxLength: 6 }))
  .map(([woven, shares]) => {
    let arriving = woven;
    return STAGES.map((stage, index) => {
      const entered = arriving;
      const passed = Math.floor(entered * shares[index]);
      arriving = passed;
      return { stage, entered, passed, rejections: entered > passed ? [{ reason: 'r', text: 'a reason', count: entered - passed }] : [] };
    });
  });

const endOf = (d: string) => Number(/H([\d.]+)/.exec(d)?.[1]);
/** Where a leaving thread goes straight down, and from which height. */
const dropOf = (d: string) => {
  const [, x, y] = /1 ([\d.]+) ([\d.]+)V/.exec(d)!;
  return { x: Number(x), y: Number(y) };
};

describe('the width of the band', () => {
  it('is the logarithm of what is left: equal factors take equal numbers of threads', () => {
    expect(threadCount(0, 4)).toBe(0);
    expect(threadCount(1, 4)).toBe(1);
    const steps = [1, 10, 100, 1000, 10_000].map((count) => threadCount(count, 4));
    expect(steps.slice(1).map((count, index) => count - steps[index])).toEqual([4, 4, 4, 4]);
  });

  it('never grows when fewer are left', () => {
    fc.assert(fc.property(fc.nat(1e9), fc.nat(1e9), (a, b) => threadCount(Math.min(a, b), 4) <= threadCount(Math.max(a, b), 4)));
  });
});

describe('the layout of a finished run', () => {
  it('ends with as many threads as stand for what is left', () => {
    fc.assert(
      fc.property(funnels, (funnel) => {
        const geometry = layOutBand(bandFromFunnel(funnel), frame);
        expect(geometry.left.length).toBe(threadCount(funnel.at(-1)!.passed, frame.threadsPerDecade));
        for (const path of geometry.left) expect(endOf(path.d)).toBe(frame.width);
      }),
    );
  });

  it('shows at least one leaving thread at every gate that cut something, and none elsewhere', () => {
    fc.assert(
      fc.property(funnels, (funnel) => {
        const band = bandFromFunnel(funnel);
        const geometry = layOutBand(band, frame);
        band.gates.forEach((gate, index) => {
          const leaving = geometry.cut.filter((path) => path.gate === index);
          expect(leaving.length > 0).toBe(gate.cut > 0);
        });
      }),
    );
  });

  it('lets leaving threads of one gate run side by side without crossing', () => {
    fc.assert(
      fc.property(funnels, (funnel) => {
        const geometry = layOutBand(bandFromFunnel(funnel), frame);
        geometry.gates.forEach((_, index) => {
          const drops = geometry.cut.filter((path) => path.gate === index).map((path) => dropOf(path.d));
          for (let i = 1; i < drops.length; i++) {
            expect(drops[i].x).toBeGreaterThan(drops[i - 1].x);
            // Concentric quarter circles all end at the height of their common centre.
            expect(drops[i].y).toBeCloseTo(drops[0].y, 1);
          }
        });
      }),
    );
  });

  it('keeps every count of the funnel in the words beside the picture', () => {
    const funnel: Funnel = [
      { stage: 'constitutions', entered: 300, passed: 300, rejections: [] },
      {
        stage: 'plausibility',
        entered: 300,
        passed: 212,
        rejections: [{ reason: 'allene', text: 'Cumulated double bonds in a small ring', count: 88 }],
      },
      {
        stage: 'signals',
        entered: 212,
        passed: 40,
        rejections: [{ reason: 'carbonCount', text: 'Fewer carbon environments than signals', count: 172 }],
      },
      { stage: 'ranked', entered: 40, passed: 40, rejections: [] },
    ];
    const text = describeBand(bandFromFunnel(funnel), String);
    for (const number of ['300', '88 cut', '212 left', '172 cut', '40 left']) expect(text).toContain(number);
  });
});

describe('the layout of a run that is going on', () => {
  it('ends before the gates that are not reached yet', () => {
    const geometry = layOutBand(bandFromProgress({ constitutionsSeen: 5000, survivors: 12 }), frame);
    expect(geometry.reachesEnd).toBe(false);
    expect(geometry.left.length).toBe(threadCount(12, frame.threadsPerDecade));
    for (const path of geometry.left) expect(endOf(path.d)).toBeLessThan(frame.width);
  });

  it('spreads threads of which the reason is not known yet over the open gates', () => {
    const geometry = layOutBand(bandFromProgress({ constitutionsSeen: 100_000, survivors: 10 }), frame);
    expect(geometry.cut.every((path) => !path.isCounted)).toBe(true);
    expect(geometry.cut.length).toBe(threadCount(100_000, 4) - threadCount(10, 4));
    expect(new Set(geometry.cut.map((path) => path.gate)).size).toBe(4);
  });

  it('is empty before the first report', () => {
    const geometry = layOutBand(bandFromProgress(null), frame);
    expect(geometry.left).toEqual([]);
    expect(geometry.cut).toEqual([]);
  });
});

describe('candidates that are ranked but not kept', () => {
  const funnel: Funnel = [
    { stage: 'constitutions', entered: 5493, passed: 5493, rejections: [] },
    { stage: 'signals', entered: 5493, passed: 5273, rejections: [{ reason: 's', text: 'Too few signals', count: 220 }] },
    { stage: 'ranked', entered: 5273, passed: 5273, rejections: [] },
  ];

  it('leave at the last gate with their count', () => {
    const last = bandFromFunnel(funnel, 1000).gates.at(-1)!;
    expect(last).toMatchObject({ left: 1000, cut: 4273 });
    expect(last.reasons.map(({ count }) => count)).toEqual([4273]);
  });

  it('are not there when everything was kept', () => {
    expect(bandFromFunnel(funnel, 5273).gates.at(-1)).toMatchObject({ left: 5273, cut: 0, reasons: [] });
  });
});
