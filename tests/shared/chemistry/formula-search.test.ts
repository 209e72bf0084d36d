import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { mzOf, neutralMassOf, parseAdduct, type Adduct } from '../../../shared/chemistry/adducts.js';
import {
  checkFormula,
  formatHill,
  formulaCounts,
  isotopePattern,
  monoisotopicMass,
  parseFormula,
  type FormulaCounts,
} from '../../../shared/chemistry/formula.js';
import { findFormulas, type FormulaCandidate, type FormulaQuery } from '../../../shared/chemistry/formula-search.js';

function adductOf(text: string): Adduct {
  const read = parseAdduct(text);
  if (!read.ok) throw new Error(read.message);
  return read.adduct;
}
function countsOf(formula: string): FormulaCounts {
  const parsed = parseFormula(formula);
  if (!parsed.ok) throw new Error(parsed.message);
  return parsed.counts;
}
function search(query: FormulaQuery): readonly FormulaCandidate[] {
  const result = findFormulas(query);
  if (!result.ok) throw new Error(result.issues.map(({ message }) => message).join());
  return result.candidates;
}

describe('ions', () => {
  const caffeine = monoisotopicMass(countsOf('C8H10N4O2'));

  it.each([
    // SCIENCE.md 1.1: computed there from NIST masses for caffeine.
    ['[M+H]+', 195.08765],
    ['[M+NH4]+', 212.1142],
    ['[M+Na]+', 217.0696],
    ['[M+K]+', 233.04353],
    ['[M-H]-', 193.0731],
    ['[M−H]⁻', 193.0731],
    ['[M+Cl]-', 229.04978],
    ['[M+HCOO]-', 239.07858],
    ['[M]+.', 194.07983],
    ['M+•', 194.07983],
    ['M', 194.08038],
  ])('puts %s of caffeine at m/z %f', (ion, mz) => {
    expect(mzOf(caffeine, adductOf(ion))).toBeCloseTo(mz, 5);
    expect(neutralMassOf(mz, adductOf(ion))).toBeCloseTo(caffeine, 4);
  });

  it('counts charges and molecules', () => {
    const proton = mzOf(caffeine, adductOf('[M+H]+')) - caffeine;
    expect(mzOf(caffeine, adductOf('[M+2H]2+'))).toBeCloseTo(caffeine / 2 + proton, 6);
    expect(mzOf(caffeine, adductOf('[2M+H]+'))).toBeCloseTo(2 * caffeine + proton, 6);
    expect(mzOf(caffeine, adductOf('[M+H-H2O]+'))).toBeCloseTo(caffeine + proton - monoisotopicMass(countsOf('H2O')), 6);
  });

  it.each(['', 'M+H', '[M+X]+', '[M+H]', '[0M+H]+', '[M+H]9+', '(M+H)+'])('refuses %j and shows what to write', (text) => {
    const read = parseAdduct(text);
    expect(read.ok).toBe(false);
    expect(read.ok ? '' : read.message).toMatch(/expected/);
  });
});

describe('findFormulas', () => {
  it('finds what the reference table says for 194.08038', () => {
    // SCIENCE.md 1.4: CHNO gives 1 formula; of CHNOPS 3 have a whole unsaturation ≥ 0, 2 of them pass the common ratios.
    const query = { mz: 194.08038, adduct: 'M', ppm: 5 };
    expect(search({ ...query, elements: ['C', 'H', 'N', 'O'] }).map(({ formula }) => formula)).toEqual(['C8H10N4O2']);
    const chnops = search({ ...query, elements: ['C', 'H', 'N', 'O', 'P', 'S'] });
    expect(chnops).toHaveLength(3);
    expect(chnops.filter(({ remarks }) => remarks.length === 0).map(({ formula }) => formula)).toEqual(['C8H10N4O2', 'C8H18OS2']);
  });

  it('puts the formula of the design example first', () => {
    const [first] = search({ mz: 151.0754, adduct: '[M+H]+', ppm: 5, isotopes: [100, 9.9, 0.8] });
    expect(first.formula).toBe('C9H10O2');
    expect(first.unsaturation).toBe(5);
    expect(first.ppm).toBeCloseTo(0.3, 1);
  });

  it('misses nothing that trying every count finds', () => {
    const elements = ['C', 'H', 'N', 'O', 'S', 'Cl'] as const;
    fc.assert(
      fc.property(fc.integer({ min: 40, max: 130 }), fc.double({ min: 0, max: 0.25, noNaN: true }), (nominal, fraction) => {
        const mz = nominal + fraction;
        const ppm = 60;
        const expected = new Set<string>();
        for (let c = 0; c * 12 <= mz + 1; c++)
          for (let n = 0; 12 * c + 14 * n <= mz + 1; n++)
            for (let o = 0; 12 * c + 14 * n + 15.9 * o <= mz + 1; o++)
              for (let s = 0; 12 * c + 14 * n + 15.9 * o + 31.9 * s <= mz + 1; s++)
                for (let cl = 0; 12 * c + 14 * n + 15.9 * o + 31.9 * s + 34.9 * cl <= mz + 1; cl++)
                  for (let h = 0; h <= 2 * c + n + 2; h++) {
                    const counts = formulaCounts([
                      ['C', c],
                      ['H', h],
                      ['N', n],
                      ['O', o],
                      ['S', s],
                      ['Cl', cl],
                    ]);
                    const mass = monoisotopicMass(counts);
                    if (Math.abs(mz - mass) > 1e-6 * ppm * mass || checkFormula(formatHill(counts)).length > 0) continue;
                    expected.add(formatHill(counts));
                  }
        const found = search({ mz, adduct: 'M', ppm, elements, limit: 1000 }).map(({ formula }) => formula);
        expect(new Set(found)).toEqual(expected);
        expect(found).toHaveLength(expected.size);
      }),
      { numRuns: 40 },
    );
  });

  it('returns the same best formulas however many are asked for', () => {
    const query = { mz: 409.1234, adduct: '[M+Na]+', ppm: 10 };
    const many = search({ ...query, limit: 800 });
    expect(search({ ...query, limit: 25 })).toEqual(many.slice(0, 25));
    expect(many.map(({ score }) => score)).toEqual(many.map(({ score }) => score).sort((a, b) => b - a));
  });

  it('lets the isotope pattern overrule the prior', () => {
    const counts = countsOf('C12H16Cl2O3');
    const query = { mz: monoisotopicMass(counts) * (1 + 3e-6), adduct: 'M', ppm: 10 };
    const [m, m1, m2] = isotopePattern(counts, 3);
    expect(search(query)[0].formula).not.toBe('C12H16Cl2O3');
    expect(search({ ...query, isotopes: [m, 1.04 * m1, 0.97 * m2] })[0].formula).toBe('C12H16Cl2O3');
  });

  it('takes the atoms of the adduct into the pattern', () => {
    const counts = countsOf('C8H10N4O2');
    const adduct = adductOf('[M+Cl]-');
    const pattern = isotopePattern(formulaCounts([...counts, ['Cl', 1]]), 3);
    const [first] = search({ mz: mzOf(monoisotopicMass(counts), adduct), adduct: '[M+Cl]-', ppm: 5, isotopes: pattern });
    expect(first.formula).toBe('C8H10N4O2');
    expect(first.score).toBeGreaterThan(-1.5);
  });

  it.each([
    [{ mz: NaN, adduct: '[M+H]+', ppm: 5 }, 'mz'],
    [{ mz: 5000, adduct: '[M+H]+', ppm: 5 }, 'mz'],
    [{ mz: 1.5, adduct: '[M+H]+', ppm: 5 }, 'mz'],
    [{ mz: 151, adduct: '[M+H]+', ppm: 0 }, 'ppm'],
    [{ mz: 151, adduct: '[M+H]+', ppm: 500 }, 'ppm'],
    [{ mz: 151, adduct: 'ion', ppm: 5 }, 'adduct'],
    [{ mz: 151, adduct: 'M', ppm: 5, isotopes: [0, 1] }, 'isotopes'],
    [{ mz: 151, adduct: 'M', ppm: 5, isotopes: [100, NaN] }, 'isotopes'],
    [{ mz: 151, adduct: 'M', ppm: 5, elements: ['Fe'] }, 'elements'],
  ])('refuses %j with the field %s', (query, path) => {
    const result = findFormulas(query);
    expect(result.ok ? [] : result.issues.map((issue) => issue.path)).toEqual([path]);
    expect(result.ok ? '' : result.issues[0].message).toMatch(/expected|supported/);
  });
});
