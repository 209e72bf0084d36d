import { describe, expect, it } from 'vitest';
import { ProblemError } from '../../../workers/enumeration/problem.js';
import { enumerateAll } from '../../support/enumerate.js';

/**
 * Connected valence multigraphs (C4 N3 O2 S2 halogen 1, bond order at most 3), Kekulé forms apart.
 * Source: SCIENCE.md 2.6, calculated there by an independent exhaustive method; alkanes also OEIS A000602 (from memory).
 */
const MULTIGRAPHS: ReadonlyArray<readonly [string, readonly string[], readonly number[]]> = [
  ['alkanes', ['C4H10', 'C5H12', 'C6H14', 'C7H16', 'C8H18', 'C9H20', 'C10H22'], [2, 3, 5, 9, 18, 35, 75]],
  ['alkenes and cycloalkanes', ['C3H6', 'C4H8', 'C5H10', 'C6H12', 'C7H14', 'C8H16'], [2, 5, 10, 25, 56, 139]],
  ['hydrogen-poor hydrocarbons', ['C4H6', 'C5H8', 'C6H10', 'C6H8', 'C6H6', 'C7H8'], [9, 26, 77, 159, 217, 1031]],
  ['saturated O1', ['C2H6O', 'C3H8O', 'C4H10O', 'C5H12O', 'C6H14O', 'C7H16O'], [2, 3, 7, 14, 32, 72]],
  ['CnH2nO', ['C2H4O', 'C3H6O', 'C4H8O', 'C5H10O', 'C6H12O', 'C7H14O'], [3, 9, 26, 74, 211, 596]],
  ['CnH2nO2', ['C2H4O2', 'C3H6O2', 'C4H8O2', 'C5H10O2', 'C6H12O2', 'C7H14O2'], [10, 34, 122, 400, 1313, 4177]],
  ['CnH2nO3', ['C3H6O3', 'C4H8O3', 'C5H10O3'], [102, 425, 1656]],
  ['CnH2n-2O and O2', ['C4H6O', 'C5H8O', 'C6H10O', 'C4H6O2', 'C5H8O2'], [55, 205, 747, 263, 1168]],
  ['saturated O2', ['C3H8O2', 'C4H10O2'], [11, 28]],
  ['nitrogen', ['C3H9N', 'C4H11N', 'C2H5NO', 'C3H7NO', 'C2H5NO2', 'C3H7NO2', 'C4H9NO2'], [4, 8, 22, 84, 84, 391, 1640]],
  ['halogen and sulfur', ['C3H7Cl', 'C4H9Br', 'C3H6Cl2', 'C2H6S', 'C4H10S', 'C4H4S', 'C4H4O', 'C5H5N'], [2, 4, 4, 2, 7, 62, 62, 685]],
];

describe('counts of valence multigraphs', () => {
  for (const [family, formulas, counts] of MULTIGRAPHS) {
    it(`equals the published series of ${family}`, () => {
      const found = formulas.map((formula) => enumerateAll({ formula, options: { mergeResonanceForms: false } }).constitutions);
      expect(found).toEqual(counts);
    });
  }

  it('adds up over all hydrogen counts to the connected multigraphs of degree at most four (OEIS A134818 as quoted in SCIENCE.md 2.6)', () => {
    const sum = (carbons: number): number => {
      let total = 0;
      for (let h = 0; h <= 2 * carbons + 2; h += 2)
        total += enumerateAll({
          formula: h === 0 ? `C${carbons}` : `C${carbons}H${h}`,
          options: { mergeResonanceForms: false },
        }).constitutions;
      return total;
    };
    expect([sum(5), sum(6), sum(7)]).toEqual([146, 772, 4449]);
  });
});

/** Raw count and count after merging alternating six-membered rings. Source: SCIENCE.md 2.6. */
const MERGED: ReadonlyArray<readonly [string, number, number]> = [
  ['C8H10', 4679, 4678],
  ['C7H8O', 13177, 13175],
  ['C6H6O2', 15066, 15065],
  ['C6H7N', 4378, 4376],
  ['C9H12', 19983, 19980],
];

describe('counts with resonance forms merged', () => {
  it.each(MERGED)('merges the Kekulé forms of %s', (formula, raw, merged) => {
    const result = enumerateAll({ formula });
    expect([result.multigraphs, result.constitutions]).toEqual([raw, merged]);
  });

  /** Benzenoid constitutions, merged. Source: SCIENCE.md 2.6; alkylbenzenes also OEIS A000639 as quoted there. */
  const BENZENOID: ReadonlyArray<readonly [string, number]> = [
    ['C7H7Cl', 4],
    ['C6H4Cl2', 3],
    ['C7H8O', 5],
    ['C7H8', 1],
    ['C8H10', 4],
    ['C9H12', 8],
    ['C10H14', 22],
    ['C11H16', 51],
    ['C12H18', 136],
  ];
  const PATTERNS = [
    '*c1ccccc1',
    '*c1ccccc1*',
    '*c1cccc(*)c1',
    '*c1ccc(*)cc1',
    '*c1cccc(*)c1*',
    '*c1ccc(*)c(*)c1',
    '*c1cc(*)cc(*)c1',
  ].concat(['*c1ccc(*)c(*)c1*', '*c1cc(*)c(*)c(*)c1', '*c1cc(*)c(*)cc1*', '*c1cc(*)c(*)c(*)c1*', '*c1c(*)c(*)c(*)c(*)c1*']);
  it.each(BENZENOID)('finds every benzene derivative of %s over all substitution patterns', (formula, count) => {
    let total = 0;
    for (const smiles of PATTERNS) {
      try {
        total += enumerateAll({ formula, fragments: { required: [{ smiles }] } }).constitutions;
      } catch (error) {
        // A pattern with more ring hydrogens than the formula has is no part of the molecule.
        if (!(error instanceof ProblemError)) throw error;
      }
    }
    expect(total).toBe(count);
  });
});

describe('edges of what a formula can be', () => {
  it.each([
    ['CH4', 1],
    ['H2O', 1],
    ['CH2', 0],
    ['C2', 0],
    ['C2H8', 0],
    ['N2', 1],
    ['CO2', 1],
  ])('counts %s as %i', (formula, count) => {
    expect(enumerateAll({ formula }).constitutions).toBe(count);
  });
});
