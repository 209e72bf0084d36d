import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { checkEvidence, parseEvidence } from '../../../shared/chemistry/check-evidence.js';
import { elementOf } from '../../../shared/chemistry/elements.js';
import { formatHill, formulaCounts, parseFormula, type FormulaCounts } from '../../../shared/chemistry/formula.js';
import { fragmentBudget } from '../../../shared/chemistry/fragment-budget.js';
import { compositionOf } from '../../../shared/chemistry/smiles.js';
import { evidenceDocument, type EvidenceInput } from '../../../shared/schemas/evidence.js';
import type { MolecularGraph } from '../../../shared/types/molecular-graph.js';
import { FRAGMENT_LIBRARY } from '../../../shared/fragments/library.js';
import { writeExplicitSmiles } from '../../support/explicit-smiles.js';
import { createRandom } from '../../../workers/enumeration/random-descent.js';
import { randomMolecule } from '../../support/random-molecules.js';

/** Connected parts by random colours; a bond inside a part is never cut. */
function cutIntoParts({ atomCount: n, bondOrders }: MolecularGraph, seed: number): number[][] {
  const random = createRandom(seed + 1);
  const colours = Array.from({ length: n }, () => Math.floor(random() * 3));
  const isPlaced = new Set<number>();
  const parts: number[][] = [];
  for (let start = 0; start < n; start++) {
    if (isPlaced.has(start)) continue;
    const part = [start];
    isPlaced.add(start);
    for (let head = 0; head < part.length; head++) {
      for (let to = 0; to < n; to++) {
        if (bondOrders[part[head] * n + to] === 0 || isPlaced.has(to) || colours[to] !== colours[start]) continue;
        isPlaced.add(to);
        part.push(to);
      }
    }
    parts.push(part);
  }
  return parts;
}
const chargedNeighbours = ({ atomCount: n, bondOrders, charges }: MolecularGraph, atom: number): number[] =>
  Array.from({ length: n }, (_, to) => to).filter((to) => bondOrders[atom * n + to] > 0 && charges[to] !== 0);
function isOrdinary({ atomCount: n, atomicNumbers, hydrogens, charges, bondOrders }: MolecularGraph, atom: number): boolean {
  const used = bondOrders.slice(atom * n, (atom + 1) * n).reduce((sum, order) => sum + order, hydrogens[atom]);
  return charges[atom] === 0 && used === elementOf(atomicNumbers[atom]).defaultValence;
}

/** Issues as "path: message". */
function issuesOf(input: unknown): string[] {
  const read = parseEvidence(input);
  return read.ok ? [] : read.issues.map(({ path, message }) => `${path}: ${message}`);
}
const withFragments = (formula: string, ...required: (string | [string, number])[]): EvidenceInput => ({
  formula,
  fragments: { required: required.map((entry) => (typeof entry === 'string' ? { smiles: entry } : { smiles: entry[0], count: entry[1] })) },
});
function countsOf(formula: string): FormulaCounts {
  const parsed = parseFormula(formula);
  if (!parsed.ok) throw new Error(parsed.message);
  return parsed.counts;
}

describe('parseEvidence', () => {
  it('fills defaults and writes the formula in Hill order', () => {
    const read = parseEvidence({ formula: 'O2 H₁₀ C9' });
    if (!read.ok) throw new Error('refused');
    expect(read.document.formula).toBe('C9H10O2');
    expect(read.document.options.mergeResonanceForms).toBe(true);
    expect(read.document.carbonSignals).toEqual([]);
  });

  it('accepts the example of the design', () => {
    const example = {
      formula: 'C9H10O2',
      fragments: { required: [{ smiles: '*c1ccc(*)cc1', count: 1 }], excluded: [{ smiles: 'OO' }] },
      carbonSignals: [{ shift: 166.9, hydrogens: 0, count: 1 }],
      protonSignals: [{ shift: 7.21, count: 2, multiplicity: 'd', couplings: [8.1] }],
      infraredBands: [{ wavenumber: 1718, intensity: 'strong' }],
      massPeaks: [{ mz: 119.049, intensity: 100 }],
      correlations: { cosy: [[1.2, 2.6]], hsqc: [[60.8, 4.35]], hmbc: [[4.35, 166.9]] },
      options: {
        solvent: 'CDCl3',
        mergeResonanceForms: true,
        plausibility: true,
        ringSizes: { min: 3, max: null },
        keep: 1000,
        maxSeconds: null,
      },
    };
    expect(issuesOf(example)).toEqual([]);
  });

  // The lines of "bad input" in the specification, each with its field and its cure.
  it.each<[string, unknown, RegExp]>([
    ['an unknown element', { formula: 'C9H10Xx' }, /^formula: element "Xx" is not supported; use/],
    ['no heavy atom', { formula: 'H2' }, /^formula: no heavy atom; expected/],
    ['negative unsaturation', { formula: 'C3H10' }, /^formula: .*negative; expected at most H8/],
    ['fractional unsaturation', { formula: 'C9H11O2' }, /^formula: .*not a whole number.*H10 or H12/],
    ['more than 40 heavy atoms', { formula: 'C41H84' }, /^formula: 41 heavy atoms; expected at most 40/],
    [
      'a fragment with more atoms than the formula',
      withFragments('C9H10O2', '*c1ccc2ccccc2c1'),
      /^fragments\.required\[0\]\.smiles: .*C10 \(the formula has 9\)/,
    ],
    [
      'copies with more atoms than the formula',
      withFragments('C9H10O2', ['*c1ccc(*)cc1', 2]),
      /^fragments\.required\[0\]\.count: .*C12 \(the formula has 9\); lower the count/,
    ],
    [
      'fragments that together have too many atoms',
      withFragments('C9H10O2', '*c1ccccc1', '*CCCC'),
      /^fragments\.required: the fragments together need C10/,
    ],
    ['attachments with nothing to bond to', withFragments('C2H4O', '*OC=C'), /^fragments\.required/],
    ['no attachment on a part', withFragments('C7H8', 'c1ccccc1'), /^fragments\.required\[0\]\.smiles: no attachment point.*add \*/],
    ['hydrogens that nothing can carry', withFragments('CH4O', '*OC'), /^fragments\.required: 1 hydrogen left and no atom/],
    ['a double bond that the formula has no unsaturation for', withFragments('C3H8', '*=C'), /^fragments\.required: /],
    ['a double bond that no atom can take', withFragments('CH2F2', '*=C'), /^fragments\.required/],
    [
      'an unreadable SMILES',
      withFragments('C9H10O2', '*C('),
      /^fragments\.required\[0\]\.smiles: position 3: branch is not closed; add \)/,
    ],
    ['isotopes', withFragments('C9H10O2', '*[13CH3]'), /^fragments\.required\[0\]\.smiles: .*isotope labels are not supported; remove/],
    ['radicals', withFragments('C9H10O2', '*[CH]'), /^fragments\.required\[0\]\.smiles: .*radicals are not supported/],
    ['charges', withFragments('C9H11NO2', '*[NH3+]'), /^fragments\.required\[0\]\.smiles: .*opposite charge/],
    [
      'more carbon signals than carbons',
      { formula: 'C2H6O', carbonSignals: [{ shift: 58.3, count: 2 }, { shift: 18.4 }] },
      /^carbonSignals: signals for 3 carbons, the formula has 2/,
    ],
    [
      'more hydrogens on carbon than there are',
      { formula: 'C2H4O', carbonSignals: [{ shift: 20, hydrogens: 3, count: 2 }] },
      /^carbonSignals: attached hydrogens add up to 6, the formula has 4/,
    ],
    [
      'more hydrogens in signals than there are',
      { formula: 'C2H6O', protonSignals: [{ shift: 1.2, count: 7 }] },
      /^protonSignals: signals for 7 hydrogens, the formula has 6/,
    ],
    [
      'hydrogens on carbon and exchangeable ones that are too many together',
      {
        formula: 'C2H6O',
        carbonSignals: [{ shift: 20, hydrogens: 3, count: 2 }],
        protonSignals: [{ shift: 2, count: 1, exchangeable: true }],
      },
      /^protonSignals: 1 exchangeable/,
    ],
    [
      'text in a number field',
      { formula: 'C2H6O', carbonSignals: [{ shift: 10 }, { shift: 20 }].map((signal) => ({ shift: `${signal.shift}` })) },
      /^carbonSignals\[0\]\.shift: expected a number between -50 and 300 ppm/,
    ],
    [
      'a shift out of range',
      { formula: 'C2H6O', carbonSignals: [{ shift: 18 }, { shift: 900 }] },
      /^carbonSignals\[1\]\.shift: expected a number between -50 and 300 ppm/,
    ],
    [
      'an unknown multiplicity',
      { formula: 'C2H6O', protonSignals: [{ shift: 1, multiplicity: 'xyz' }] },
      /^protonSignals\[0\]\.multiplicity: expected the usual letters/,
    ],
    [
      'an unreadable excluded fragment',
      { formula: 'C2H6O', fragments: { excluded: [{ smiles: 'C1' }] } },
      /^fragments\.excluded\[0\]\.smiles: .*ring 1 is not closed/,
    ],
    [
      'excluding what is required',
      { formula: 'C9H10O2', fragments: { required: [{ smiles: '*c1ccc(*)cc1' }], excluded: [{ smiles: 'OO' }, { smiles: 'c1ccccc1' }] } },
      /^fragments\.excluded\[1\]\.smiles: excluded, but part of required fragment 1/,
    ],
    [
      'a required ring that is too large',
      { ...withFragments('C9H10O2', '*c1ccccc1'), options: { ringSizes: { max: 5 } } },
      /^options\.ringSizes\.max: .*ring of 6/,
    ],
    [
      'a required ring that is too small',
      { ...withFragments('C9H10O2', '*C1CC1'), options: { ringSizes: { min: 4 } } },
      /^options\.ringSizes\.min: .*ring of 3/,
    ],
    ['an unknown field', { formula: 'C2H6O', fragmentz: {} }, /^fragmentz: unknown field; remove it/],
    ['no formula', {}, /^formula: expected a molecular formula/],
  ])('refuses %s', (_what, input, expected) => {
    const issues = issuesOf(input);
    expect(issues.length).toBeGreaterThan(0);
    expect(issues[0]).toMatch(expected);
  });

  it('refuses what is no document at all', () => {
    for (const input of [null, 'C2H6O', 5, []])
      expect(issuesOf(input)).toEqual([': expected an evidence document, an object such as {"formula": "C9H10O2"}']);
  });

  it('reports everything that is wrong, not only the first', () => {
    const issues = issuesOf({
      formula: 'C2H7O',
      fragments: { required: [{ smiles: '*C(' }], excluded: [{ smiles: 'C1' }] },
      carbonSignals: [{ shift: 1, count: 5 }],
    });
    expect(issues.map((issue) => issue.split(':')[0])).toEqual([
      'formula',
      'fragments.required[0].smiles',
      'fragments.excluded[0].smiles',
      'carbonSignals',
    ]);
  });

  it('drops stereo with a visible note', () => {
    const read = parseEvidence(withFragments('C4H8', '*/C=C/*'));
    expect(read.ok && read.notes).toEqual(['Required fragment 1: stereo dropped']);
  });

  it('accepts charge-separated neutral groups and higher valences of fragments', () => {
    for (const evidence of [
      withFragments('C6H5NO2', '*[N+](=O)[O-]'),
      withFragments('C5H5NO', '[O-][n+]1ccccc1'),
      withFragments('C2H5N3', '*N=[N+]=[N-]'),
      withFragments('C3H5N', '*[N+]#[C-]'),
      withFragments('C3H6N2', '*C(*)=[N+]=[N-]'),
      withFragments('C2H6OS', '*S(*)=O'),
      withFragments('C2H6O2S', '*S(*)(=O)=O'),
      // By default valences this formula has an unsaturation of −2.
      withFragments('CF8S', '*S(F)(F)(F)(F)F'),
    ]) {
      expect(issuesOf(evidence), evidence.formula).toEqual([]);
    }
    expect(issuesOf({ formula: 'CF8S' })[0]).toMatch(/negative/);
  });

  it('accepts a whole molecule as its only fragment', () => {
    expect(issuesOf(withFragments('C6H6', 'c1ccccc1'))).toEqual([]);
  });

  it('does not take a bridged ring for a contradiction of the ring limit', () => {
    // Norbornane: a six-membered ring bridged by CH2 has smallest rings of five.
    expect(issuesOf({ ...withFragments('C7H12', '*C1CCC(*)CC1'), options: { ringSizes: { max: 5 } } })).toEqual([]);
  });
});

describe('fragmentBudget', () => {
  it('tells what is left', () => {
    const budget = fragmentBudget(countsOf('C9H10O2'), [
      { smiles: '*c1ccc(*)cc1', count: 1 },
      { smiles: '*C(=O)O*', count: 1 },
    ]);
    expect(formatHill(budget.remaining)).toBe('C2H6');
    expect(budget).toMatchObject({ hydrogens: 6, unsaturations: 0, fits: true, issues: [] });
  });

  it('tells while a formula is still being typed that attachments cannot be paired', () => {
    const budget = fragmentBudget(countsOf('C2H5'), [{ smiles: '*CC', count: 1 }]);
    expect(budget.issues.map(({ path }) => path)).toEqual(['fragments.required']);
    expect(budget.issues[0].message).toMatch(/1 attachment and no atoms left: an odd number cannot be paired; change/);
  });

  it('counts what a fragment needs beyond the formula as negative', () => {
    const budget = fragmentBudget(countsOf('C4H10O'), [{ smiles: '*c1ccccc1', count: 1 }]);
    expect(budget.remaining.get('C')).toBe(-2);
    expect(budget.fits).toBe(false);
  });

  it('never refuses fragments cut out of a real molecule', () => {
    let cutCount = 0;
    fc.assert(
      fc.property(fc.integer({ min: 0, max: 1_000_000 }), (seed) => {
        const molecule = randomMolecule(seed);
        const parts = cutIntoParts(molecule, seed);
        const isLeft = parts.map((_, index) => index % 3 === 2);
        // Only fragments may hold higher valences, and charges stay with their partner.
        fc.pre(parts.every((part, index) => part.every((atom) => !isLeft[index] || isOrdinary(molecule, atom))));
        fc.pre(
          parts.every((part) =>
            part.every((atom) => molecule.charges[atom] === 0 || chargedNeighbours(molecule, atom).every((to) => part.includes(to))),
          ),
        );
        const required = parts.flatMap((part, index) => (isLeft[index] ? [] : [{ smiles: writeExplicitSmiles(molecule, part), count: 1 }]));
        const formula = formulaCounts(compositionOf(molecule));
        expect(
          fragmentBudget(formula, required).issues,
          `${formatHill(formula)} ${required.map(({ smiles }) => smiles).join(' ')}`,
        ).toEqual([]);
        if (required.length > 1) cutCount++;
      }),
      { numRuns: 400 },
    );
    expect(cutCount).toBeGreaterThan(100);
  });

  it('checks as the whole document does', () => {
    for (const { smiles } of FRAGMENT_LIBRARY) {
      const required = [{ smiles, count: 1 }];
      const budget = fragmentBudget(countsOf('C12H16N2O3S'), required);
      const document = evidenceDocument.parse({ formula: 'C12H16N2O3S', fragments: { required } });
      expect(checkEvidence(document).issues, smiles).toEqual(budget.issues);
    }
  });
});
