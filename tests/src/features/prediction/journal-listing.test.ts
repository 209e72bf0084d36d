import { describe, expect, it } from 'vitest';
import { journalListing } from '../../../../src/features/prediction/components/journal-listing.js';

const proton = (shift: number, count: number, multiplicity: string, couplings: number[], exchangeable = false) => ({
  atoms: [0],
  shift,
  sd: 0.1,
  count,
  multiplicity,
  couplings,
  exchangeable,
  basis: '',
});
const prediction = {
  carbons: [
    { atoms: [1], shift: 60.4, sd: 1, hydrogens: 2, basis: '' },
    { atoms: [4, 6], shift: 129.5, sd: 1, hydrogens: 1, basis: '' },
    { atoms: [2], shift: 166.9, sd: 1, hydrogens: 0, basis: '' },
  ],
  protons: [proton(1.38, 3, 't', [7.1]), proton(7.94, 2, 'dd', [8.1, 2]), proton(11.2, 1, 's', [], true)],
};

/** One peak of the tolerant grammar for journal listings: SCIENCE.md 9.3. */
const PEAK = /^−?\d+(\.\d+)? \((((s|d|t|q|dd|m)|J = \d+\.\d(, \d+\.\d)* Hz|\d+H|\d+C|CH?\d?|exch\.)(, )?)+\)$/;

describe('the listing of a predicted spectrum', () => {
  it('reads like one in a journal, from high to low shift', () => {
    expect(journalListing(prediction, '1H')).toBe(
      '¹H NMR (predicted, CDCl₃) δ 11.20 (s, 1H, exch.), 7.94 (dd, J = 8.1, 2.0 Hz, 2H), 1.38 (t, J = 7.1 Hz, 3H).',
    );
    expect(journalListing(prediction, '13C')).toBe('¹³C NMR (predicted, CDCl₃) δ 166.9 (C), 129.5 (2C, CH), 60.4 (CH2).');
  });

  it('follows the grammar that listings are read by', () => {
    for (const nucleus of ['13C', '1H'] as const) {
      const peaks = journalListing(prediction, nucleus)
        .replace(/^.*δ /, '')
        .replace(/\.$/, '')
        .split(/(?<=\)), /);
      expect(peaks).toHaveLength(3);
      for (const peak of peaks) expect(peak).toMatch(PEAK);
    }
  });

  it('is empty without signals', () => {
    expect(journalListing({ carbons: [], protons: [] }, '13C')).toBe('');
  });
});
