import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { ELECTRON_MASS, ELEMENTS, ADDUCT_ELEMENTS } from '../../../shared/chemistry/elements.js';
import {
  averageMass,
  checkFormula,
  degreeOfUnsaturation,
  formatHill,
  formulaCounts,
  formulaParts,
  heavyAtomCount,
  isotopePattern,
  monoisotopicMass,
  nitrogenRuleHint,
  parseFormula,
  type FormulaCounts,
} from '../../../shared/chemistry/formula.js';

function countsOf(text: string): FormulaCounts {
  const parsed = parseFormula(text);
  if (!parsed.ok) throw new Error(`${text}: ${parsed.message}`);
  return parsed.counts;
}
const symbols = ELEMENTS.map(({ symbol }) => symbol);
const anyCounts = fc
  .dictionary(fc.constantFrom(...symbols), fc.integer({ min: 1, max: 60 }), { minKeys: 1, maxKeys: 6 })
  .map((entries) => formulaCounts(Object.entries(entries)));

describe('elements', () => {
  it.each([
    // SCIENCE.md 1.1: NIST/IUPAC isotopic masses, CIAAW abridged weights (both read there).
    ['H', 1.00782503223, 1.008],
    ['C', 12, 12.011],
    ['N', 14.00307400443, 14.007],
    ['O', 15.99491461957, 15.999],
    ['F', 18.99840316273, 18.998403162],
    ['Si', 27.97692653465, 28.085],
    ['P', 30.97376199842, 30.973761998],
    ['S', 31.9720711744, 32.06],
    ['Cl', 34.968852682, 35.45],
    ['Br', 78.9183376, 79.904],
    ['I', 126.9044719, 126.90447],
    ['B', 11.00930536, 10.81],
  ])('has the published masses of %s', (symbol, mono, weight) => {
    const element = [...ELEMENTS, ...ADDUCT_ELEMENTS].find((entry) => entry.symbol === symbol);
    expect(element?.monoisotopicMass).toBe(mono);
    expect(element?.standardWeight).toBe(weight);
  });

  it('has the masses of adduct ions', () => {
    // NIST, quoted in SCIENCE.md 1.1.
    expect(ADDUCT_ELEMENTS.find(({ symbol }) => symbol === 'Na')?.monoisotopicMass).toBe(22.989769282);
    expect(ADDUCT_ELEMENTS.find(({ symbol }) => symbol === 'K')?.monoisotopicMass).toBe(38.9637064864);
    expect(ELECTRON_MASS).toBe(0.000548579909);
  });
});

describe('masses and unsaturation', () => {
  it.each([
    // SCIENCE.md 1.4, computed there from NIST and CIAAW; unsaturation follows from the structures.
    ['acetone', 'C3H6O', 58.04186, 58.08, 3.35, 0.24, 1],
    ['ethyl acetate', 'C4H8O2', 88.05243, 88.106, 4.49, 0.49, 1],
    ['toluene', 'C7H8', 92.0626, 92.141, 7.66, 0.25, 4],
    ['DMSO', 'C2H6OS', 78.01394, 78.129, 3.06, 4.71, 0],
    ['dichloromethane', 'CH2Cl2', 83.95336, 84.927, 1.1, 63.99, 0],
    ['bromobenzene', 'C6H5Br', 155.95746, 157.01, 6.55, 97.46, 4],
    ['vanillin', 'C8H8O3', 152.04734, 152.149, 8.86, 0.96, 5],
    ['caffeine', 'C8H10N4O2', 194.08038, 194.194, 10.31, 0.89, 6],
    ['glucose', 'C6H12O6', 180.06339, 180.156, 6.86, 1.43, 1],
    ['sucrose', 'C12H22O11', 342.11621, 342.297, 13.65, 3.12, 2],
    ['tetramethylsilane', 'C4H12Si', 88.07083, 88.225, 9.54, 3.66, 0],
  ])('agrees with the table for %s', (_name, formula, mono, average, mPlus1, mPlus2, unsaturation) => {
    const counts = countsOf(formula);
    const [, first, second] = isotopePattern(counts, 3);
    expect(monoisotopicMass(counts)).toBeCloseTo(mono, 5);
    expect(averageMass(counts)).toBeCloseTo(average, 3);
    expect(Math.abs(first - mPlus1)).toBeLessThan(0.0051);
    expect(Math.abs(second - mPlus2)).toBeLessThan(0.0051);
    expect(degreeOfUnsaturation(counts)).toBe(unsaturation);
  });

  it('gives the patterns of several halogens', () => {
    // SCIENCE.md 1.3 (calculated there): Cl2 100:64:10.2, Cl3 100:96:30.7:3.3, Br 100:97.3.
    const evenPeaks = (formula: string): number[] => isotopePattern(countsOf(formula), 7).filter((_, i) => i % 2 === 0);
    expect(evenPeaks('Cl2').map((height) => Number(height.toFixed(1)))).toEqual([100, 64, 10.2, 0]);
    expect(evenPeaks('Cl3').map((height) => Number(height.toFixed(1)))).toEqual([100, 96, 30.7, 3.3]);
    expect(evenPeaks('Br')[1]).toBeCloseTo(97.3, 1);
  });

  it('separates molecules of one nominal mass', () => {
    // SCIENCE.md 1.4: CO 27.99491, N2 28.00615, C2H4 28.03130.
    expect(['CO', 'N2', 'C2H4'].map((formula) => monoisotopicMass(countsOf(formula)).toFixed(5))).toEqual([
      '27.99491',
      '28.00615',
      '28.03130',
    ]);
  });

  it('states the nitrogen rule', () => {
    expect(nitrogenRuleHint(countsOf('C5H5N'))).toMatch(/79 is odd.*nitrogens \(1\)/);
    expect(nitrogenRuleHint(countsOf('C8H10N4O2'))).toMatch(/194 is even.*nitrogens \(4\)/);
    expect(nitrogenRuleHint(countsOf('C5H6N'))).toMatch(/not a closed-shell molecule/);
  });
});

describe('parseFormula', () => {
  it('gives back any counts that were written in Hill order', () => {
    fc.assert(
      fc.property(anyCounts, (counts) => {
        expect([...countsOf(formatHill(counts))]).toEqual([...counts]);
      }),
    );
  });

  it('reads subscripts and spaces like plain digits', () => {
    fc.assert(
      fc.property(anyCounts, (counts) => {
        const text = formulaParts(counts)
          .map(
            ({ symbol, count }) =>
              `${symbol}${count === 1 ? '' : String(count).replace(/\d/g, (digit) => String.fromCharCode(0x2080 + Number(digit)))}`,
          )
          .join(' ');
        expect([...countsOf(text)]).toEqual([...counts]);
      }),
    );
  });

  it('adds up in any order and inside parentheses', () => {
    expect(formatHill(countsOf('(CH3)2CHOH'))).toBe('C3H8O');
    expect(formatHill(countsOf('Si(CH3)3(C6H4(OCH3))'))).toBe('C10H16OSi');
    expect(formatHill(countsOf('[C(CH3)3]2O'))).toBe('C8H18O');
    expect(formatHill(countsOf('O2H10C9'))).toBe('C9H10O2');
  });

  it('writes Hill order, with and without carbon', () => {
    // Hill, J. Am. Chem. Soc. 1900, 22, 478 (from memory).
    expect(formatHill(countsOf('BrClCHI'))).toBe('CHBrClI');
    expect(formatHill(countsOf('SiH4'))).toBe('H4Si');
    expect(formatHill(countsOf('ClH'))).toBe('ClH');
    expect(formulaParts(countsOf('C9H10O2'))).toEqual([
      { symbol: 'C', count: 9 },
      { symbol: 'H', count: 10 },
      { symbol: 'O', count: 2 },
    ]);
  });

  it.each([
    ['', /expected a molecular formula/],
    ['C2H6Xx', /"Xx" is not supported; use/],
    ['C6H5B', /"B" is not supported/],
    ['C2D6', /isotopes are not supported; write H/],
    ['CH3+', /charges are not supported.*neutral/],
    ['C2H3O2⁻', /charges are not supported/],
    ['C6H12·H2O', /several components/],
    ['c6h6', /capital letter/],
    ['C6(H6', /add \)/],
    ['C6H6)', /closes nothing/],
    ['C()H', /empty/],
    ['C0H4', /count between 1 and 999/],
    ['C1000', /count between 1 and 999/],
    ['C6H6=', /not part of a formula/],
  ])('refuses %j with a cure', (text, cure) => {
    const parsed = parseFormula(text);
    expect(parsed.ok ? '' : parsed.message).toMatch(cure);
  });
});

describe('checkFormula', () => {
  it.each(['C9H10O2', 'CH4', 'H2O', 'C6H5NO2', 'C2H6OS', 'CHCl3', 'C40H82'])('accepts %s', (formula) => {
    expect(checkFormula(formula)).toEqual([]);
  });

  it.each([
    ['C9H10Xx', /not supported/],
    ['H2', /no heavy atom; expected at least one/],
    ['C3H10', /degree of unsaturation −1 is negative; expected at most H8/],
    ['CCl6', /too many halogens.*lower the halogens/],
    ['C9H11O2', /4.5 is not a whole number.*H10 or H12/],
    ['C2H7', /at most H6/],
    ['C41H84', /41 heavy atoms; expected at most 40/],
  ])('refuses %s, names the field and the cure', (formula, cure) => {
    const issues = checkFormula(formula);
    expect(issues).toHaveLength(1);
    expect(issues[0].path).toBe('formula');
    expect(issues[0].message).toMatch(cure);
  });

  it('proposes hydrogen counts that it accepts itself', () => {
    fc.assert(
      fc.property(anyCounts, (counts) => {
        fc.pre(heavyAtomCount(counts) > 0 && heavyAtomCount(counts) <= 40);
        for (const { message } of checkFormula(formatHill(counts))) {
          for (const [, hydrogens] of (message.split('expected')[1] ?? '').matchAll(/H(\d+)/g)) {
            expect(checkFormula(formatHill(formulaCounts([...counts, ['H', Number(hydrogens)]])))).toEqual([]);
          }
        }
      }),
      { numRuns: 500 },
    );
  });
});
