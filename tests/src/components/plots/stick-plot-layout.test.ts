import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
  axisTicks,
  panRange,
  spreadLabels,
  stickHeight,
  wholeRange,
  zoomRange,
  type Stick,
} from '../../../../src/components/plots/stick-plot-layout.js';

const sticks = (nucleus: '13C' | '1H'): fc.Arbitrary<Stick[]> =>
  fc.array(
    fc.record({
      key: fc.string(),
      shift: fc.double(nucleus === '13C' ? { min: -5, max: 220, noNaN: true } : { min: -1, max: 14, noNaN: true }),
      sd: fc.double(nucleus === '13C' ? { min: 0.1, max: 12, noNaN: true } : { min: 0.02, max: 1.5, noNaN: true }),
      nuclei: fc.integer({ min: 1, max: 18 }),
      text: fc.constant(''),
    }),
    { minLength: 1, maxLength: 40 },
  );

describe('the range of a stick plot', () => {
  it.each(['13C', '1H'] as const)('holds every %s stick with its uncertainty', (nucleus) => {
    fc.assert(
      fc.property(sticks(nucleus), (list) => {
        const range = wholeRange(list, nucleus);
        for (const stick of list) {
          expect(stick.shift - stick.sd!).toBeGreaterThan(range.low);
          expect(stick.shift + stick.sd!).toBeLessThan(range.high);
        }
      }),
    );
  });

  it('does not blow up a single signal to the whole width', () => {
    const range = wholeRange([{ key: 'a', shift: 7.26, nuclei: 1, text: '' }], '1H');
    expect(range.high - range.low).toBeGreaterThanOrEqual(1.5);
  });
});

describe('axis ticks', () => {
  it('are evenly spaced round numbers inside the range', () => {
    expect(axisTicks({ low: 0, high: 220 }, 800)).toEqual([0, 20, 40, 60, 80, 100, 120, 140, 160, 180, 200, 220]);
    expect(axisTicks({ low: 0.75, high: 8 }, 560)).toEqual([1, 2, 3, 4, 5, 6, 7, 8]);
    expect(axisTicks({ low: 1.1, high: 1.55 }, 320)).toEqual([1.1, 1.2, 1.3, 1.4, 1.5]);
  });
});

describe('spread labels', () => {
  const placing = fc.tuple(
    fc.array(fc.double({ min: -20, max: 420, noNaN: true }), { maxLength: 25 }),
    fc.double({ min: 4, max: 16, noNaN: true }),
  );

  it('keep their distance, their order and the frame', () => {
    fc.assert(
      fc.property(placing, ([positions, distance]) => {
        const placed = spreadLabels(positions, distance, { from: 0, to: 400 });
        if (placed === null) return expect((positions.length - 1) * distance).toBeGreaterThan(400);
        const order = positions.map((_, index) => index).sort((a, b) => positions[a] - positions[b]);
        order.slice(1).forEach((index, rank) => expect(placed[index] - placed[order[rank]]).toBeGreaterThanOrEqual(distance - 1e-6));
        for (const place of placed) expect(place).toBeGreaterThanOrEqual(-1e-6);
        for (const place of placed) expect(place).toBeLessThanOrEqual(400 + 1e-6);
      }),
    );
  });

  it('leave labels alone that have room already', () => {
    expect(spreadLabels([300, 20, 120], 14, { from: 0, to: 400 })).toEqual([300, 20, 120]);
  });

  it('share the shift between two that collide', () => {
    expect(spreadLabels([100, 104], 14, { from: 0, to: 400 })).toEqual([95, 109]);
  });
});

describe('zoom and pan', () => {
  const whole = { low: 0, high: 220 };
  it('keep the point that is looked at in place', () => {
    const zoomed = zoomRange(whole, 0.5, 165, whole);
    expect((165 - zoomed.low) / (zoomed.high - zoomed.low)).toBeCloseTo(165 / 220);
  });

  it('never leave the whole range', () => {
    fc.assert(
      fc.property(
        fc.double({ min: 0.05, max: 4, noNaN: true }),
        fc.double({ min: 0, max: 220, noNaN: true }),
        fc.double({ min: -3, max: 3, noNaN: true }),
        (factor, about, share) => {
          const range = panRange(zoomRange({ low: 40, high: 140 }, factor, Math.min(140, Math.max(40, about)), whole), share, whole);
          expect(range.low).toBeGreaterThanOrEqual(-1e-9);
          expect(range.high).toBeLessThanOrEqual(220 + 1e-9);
          expect(range.high).toBeGreaterThan(range.low);
        },
      ),
    );
  });
});

it('keeps one proton visible beside nine', () => {
  expect(stickHeight(9, 9)).toBe(1);
  expect(stickHeight(1, 9)).toBeCloseTo(1 / 3);
});
