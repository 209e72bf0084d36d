import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { evidenceDocument } from '../../../../shared/schemas/evidence.js';
import { plotSticks, signalRows, sortRows, stickKeys, worstRow } from '../../../../src/features/candidate/components/signal-rows.js';

/** Observed 13C shifts of isopropyl acetate: SCIENCE.md 11, row 16. Predictions are invented. */
const evidence = evidenceDocument.parse({
  formula: 'C5H10O2',
  carbonSignals: [
    { shift: 170.63, hydrogens: 0 },
    { shift: 67.64, hydrogens: 1 },
    { shift: 21.84, hydrogens: 3 },
    { shift: 21.42, hydrogens: 3, count: 1 },
  ],
  protonSignals: [{ shift: 4.99, count: 1, multiplicity: 'sept', couplings: [6.3] }],
});
const carbon = (atoms: number[], shift: number, sd: number, hydrogens: number) => ({ atoms, shift, sd, hydrogens, basis: 'rule' });
const candidate = {
  spectra: {
    carbons: [carbon([1], 170.0, 2, 0), carbon([4], 61.6, 2, 1), carbon([5, 6], 22.0, 2, 3), carbon([0], 20.9, 1, 3)],
    protons: [{ atoms: [4], shift: 5.0, sd: 0.2, count: 1, multiplicity: 'sept', couplings: [6.5], exchangeable: false, basis: 'rule' }],
  },
  matches: [
    { nucleus: '13C' as const, observedIndex: 0, predictedIndexes: [0], deviation: 0.63, term: -1.2, remark: null },
    { nucleus: '13C' as const, observedIndex: 1, predictedIndexes: [1], deviation: 6.04, term: -6.1, remark: 'far off' },
    { nucleus: '13C' as const, observedIndex: 2, predictedIndexes: [2], deviation: -0.16, term: -1.1, remark: null },
    { nucleus: '13C' as const, observedIndex: 3, predictedIndexes: [], deviation: null, term: -8, remark: 'no carbon left for it' },
    { nucleus: '13C' as const, observedIndex: null, predictedIndexes: [3], deviation: null, term: -7, remark: 'not observed' },
    { nucleus: '1H' as const, observedIndex: 0, predictedIndexes: [0], deviation: -0.01, term: -0.4, remark: null },
  ],
};
const carbonRows = signalRows(candidate, evidence, '13C');

describe('the rows of a comparison', () => {
  it('are those of their nucleus, with the evidence on one side and the prediction on the other', () => {
    expect(carbonRows).toHaveLength(5);
    expect(carbonRows[1].observed?.shift).toBe(67.64);
    expect(carbonRows[1].predicted[0].kind).toBe('CH');
    expect(carbonRows[1].atoms).toEqual([4]);
    expect(signalRows(candidate, evidence, '1H')).toHaveLength(1);
  });

  it('measure a misfit in standard deviations of the prediction', () => {
    expect(carbonRows[1].misfit).toBeCloseTo(3.02);
    expect(carbonRows[3].misfit).toBeNull();
  });

  it('start with what fits worst, missing signals weighed against misfits', () => {
    expect(sortRows(carbonRows, 'misfit').map((row) => row.term)).toEqual([-8, -7, -6.1, -1.2, -1.1]);
    const mild = carbonRows.map((row) => (row.misfit === null ? { ...row, term: -1 } : row));
    expect(sortRows(mild, 'misfit')[0].misfit).toBeCloseTo(3.02);
  });

  it('do not mistake a wide prediction for a misfit', () => {
    // The density of a wide prediction is low even where it is met: its term is the lower one of the two.
    const [narrow, wide] = [
      { ...carbonRows[0], misfit: 1.5, term: -1.4 },
      { ...carbonRows[2], misfit: 0.1, term: -3 },
    ];
    expect(sortRows([wide, narrow], 'misfit')).toEqual([narrow, wide]);
  });

  it('can be read from high to low shift, a missing observed one in the place of its prediction', () => {
    expect(sortRows(carbonRows, 'shift').map((row) => row.observed?.shift ?? row.predicted[0].shift)).toEqual([
      170.63, 67.64, 21.84, 21.42, 20.9,
    ]);
  });

  it('name the matched signal that fits worst', () => {
    expect(worstRow(carbonRows)?.observed?.shift).toBe(67.64);
    expect(worstRow([])).toBeNull();
  });
});

describe('the sticks of the plot', () => {
  const { observed, predicted, links } = plotSticks(carbonRows);

  it('show every signal of either side once and join the matched ones', () => {
    expect(observed.map((stick) => stick.shift)).toEqual([170.63, 67.64, 21.84, 21.42]);
    expect(predicted.map((stick) => stick.shift)).toEqual([170, 61.6, 22, 20.9]);
    expect(links).toHaveLength(3);
  });

  it('are as tall as the carbons under them; an observed one without a count takes that of its match', () => {
    expect(predicted[2].nuclei).toBe(2);
    expect(observed[2].nuclei).toBe(2);
    expect(observed[3].nuclei).toBe(1);
  });

  it('belong to the row that lights them up', () => {
    const keys = new Set([...observed, ...predicted].map((stick) => stick.key));
    for (const row of carbonRows) {
      expect(stickKeys(row).length).toBeGreaterThan(0);
      for (const key of stickKeys(row)) expect(keys).toContain(key);
    }
  });

  it('lose nothing when one observed signal lies on several predicted ones', () => {
    fc.assert(
      fc.property(fc.uniqueArray(fc.integer({ min: 0, max: 3 }), { minLength: 1 }), (predictedIndexes) => {
        const rows = signalRows({ ...candidate, matches: [{ ...candidate.matches[0], predictedIndexes }] }, evidence, '13C');
        const plot = plotSticks(rows);
        expect(plot.predicted).toHaveLength(predictedIndexes.length);
        expect(plot.links).toHaveLength(predictedIndexes.length);
        expect(plot.observed).toHaveLength(1);
      }),
    );
  });
});
