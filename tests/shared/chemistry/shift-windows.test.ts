import { describe, expect, it } from 'vitest';
import { parseFormula, type FormulaCounts } from '../../../shared/chemistry/formula.js';
import { deriveWindow, windowOf } from '../../../shared/chemistry/shift-windows.js';
import { compositionOf } from '../../../shared/chemistry/smiles.js';
import { readNmrData } from '../../support/nmr-data.js';
import { matchWindows } from '../../support/window-matcher.js';

function counts(formula: string): FormulaCounts {
  const parsed = parseFormula(formula);
  if (!parsed.ok) throw new Error(parsed.message);
  return parsed.counts;
}

describe('deriveWindow', () => {
  // Middles of the ranges in SCIENCE.md 4.1 (common practice): the kind of carbon must lie in its window.
  it.each<[string, number, number, string, 'sp3' | 'sp2' | 'sp', number]>([
    ['methyl', 20, 3, 'C5H10O2', 'sp3', 0],
    ['OCH3', 55, 3, 'C5H10O2', 'sp3', 1],
    ['NCH3', 35, 3, 'C5H11N', 'sp3', 1],
    ['CH2', 30, 2, 'C8H16O', 'sp3', 0],
    ['OCH', 70, 1, 'C8H16O', 'sp3', 1],
    ['O-C-O', 100, 1, 'C8H16O2', 'sp3', 2],
    ['alkyne', 80, 0, 'C8H10', 'sp', 0],
    ['nitrile', 118, 0, 'C8H9N', 'sp', 1],
    ['alkene', 125, 1, 'C8H14', 'sp2', 0],
    ['allene centre', 208, 0, 'C8H14', 'sp', 0],
    ['arene C-O', 155, 0, 'C8H10O', 'sp2', 1],
    ['saturated ketone', 210, 0, 'C8H16O', 'sp2', 1],
    ['aldehyde', 200, 1, 'C8H16O', 'sp2', 1],
    ['ester', 171, 0, 'C8H16O2', 'sp2', 2],
    ['urea', 158, 0, 'C3H8N2O', 'sp2', 3],
  ])('holds a %s carbon at %d ppm', (_, shift, hydrogens, formula, hybridisation, hetero) => {
    for (const known of [hydrogens, undefined]) {
      const window = deriveWindow(shift, known, counts(formula));
      expect(window.hybridisations).toContain(hybridisation);
      expect(window.heteroNeighbours.min).toBeLessThanOrEqual(hetero);
      expect(window.heteroNeighbours.max).toBeGreaterThanOrEqual(hetero);
    }
  });

  it.each<[string, number, number | undefined, string, 'sp3' | 'sp2' | 'sp']>([
    ['a CH at 128 ppm of a hydrocarbon is not sp3', 128, 1, 'C8H10', 'sp3'],
    ['a carbon at 205 ppm is not sp3', 205, undefined, 'C8H16O', 'sp3'],
    ['a CH2 at 25 ppm is not sp2', 25, 2, 'C8H16O', 'sp2'],
    ['a CH at 30 ppm of a hydrocarbon is not sp', 30, 1, 'C8H14', 'sp'],
  ])('rules out: %s', (_, shift, hydrogens, formula, hybridisation) => {
    expect(deriveWindow(shift, hydrogens, counts(formula)).hybridisations).not.toContain(hybridisation);
  });

  it('knows no heteroatoms that the formula has not', () => {
    expect(deriveWindow(100, 0, counts('C8H14')).heteroNeighbours).toEqual({ min: 0, max: 0 });
    expect(deriveWindow(100, 0, counts('C8H14O')).heteroNeighbours.max).toBe(1);
  });

  it('restricts nothing at a shift where no carbon was ever seen', () => {
    expect(deriveWindow(299, 3, counts('C8H14'))).toEqual({ hybridisations: ['sp3', 'sp2', 'sp'], heteroNeighbours: { min: 0, max: 4 } });
  });

  it('wrongly excludes less than 0.5 % of compounds on which it was not fitted', (context) => {
    const records = readNmrData('cases-train.jsonl.gz');
    if (records === null) return context.skip('the open NMR data are not beside the checkout');
    let structures = 0;
    let excluded = 0;
    for (const { fold, graph, carbons, carbonsComplete } of records) {
      if (fold !== 0 || carbons === null || carbonsComplete !== true || carbons.some(({ hydrogens }) => hydrogens === null)) continue;
      const composition = compositionOf(graph);
      const signals = carbons.map(({ shift, hydrogens }) => ({
        hydrogens: hydrogens!,
        count: 1,
        window: deriveWindow(shift, hydrogens!, composition),
      }));
      structures++;
      if (!matchWindows(graph, signals, true)) excluded++;
    }
    expect(structures).toBeGreaterThan(1000);
    expect(excluded / structures).toBeLessThan(0.005);
  });
});

describe('windowOf', () => {
  const own = { hybridisations: ['sp2' as const], heteroNeighbours: { min: 0, max: 4 } };
  it('prefers the window that people gave, none included, to the derived one', () => {
    const formula = counts('C8H14O');
    expect(windowOf({ shift: 30, hydrogens: 2, window: own }, { shiftWindows: true }, formula)).toEqual(own);
    expect(windowOf({ shift: 30, hydrogens: 2, window: null }, { shiftWindows: true }, formula)).toBeNull();
    expect(windowOf({ shift: 30, hydrogens: 2 }, { shiftWindows: true }, formula)).toEqual(deriveWindow(30, 2, formula));
    expect(windowOf({ shift: 30, hydrogens: 2 }, { shiftWindows: false }, formula)).toBeNull();
    expect(windowOf({ shift: 30, hydrogens: 2 }, {}, formula)).toBeNull();
  });
});
