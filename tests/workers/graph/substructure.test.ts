import { Molecule, SSSearcher } from 'openchemlib';
import { describe, expect, it } from 'vitest';
import { parseExcludedPattern } from '../../../shared/chemistry/excluded-pattern.js';
import { evidenceDocument } from '../../../shared/schemas/evidence.js';
import { analyseStructure } from '../../../workers/graph/analysis.js';
import { moleculeFromGraph } from '../../../workers/graph/openchemlib.js';
import { compileExcludedFragments } from '../../../workers/ranking/excluded-fragments.js';
import { SubstructureMatcher } from '../../../workers/graph/substructure.js';
import { graphOf } from '../../support/graph-of.js';
import { randomMolecule } from '../../support/random-molecules.js';

function matcherFor(pattern: string): SubstructureMatcher {
  const parsed = parseExcludedPattern(pattern);
  if (parsed.kind !== 'query') throw new Error(`${pattern}: ${parsed.kind}`);
  return new SubstructureMatcher(parsed.query);
}

describe('SubstructureMatcher', () => {
  it.each<[string, string, readonly number[] | null]>([
    ['OO', 'COOC', [1, 2]],
    ['OO', 'COCOC', null],
    ['C=O', 'CC(C)=O', [1, 3]],
    ['[OH]', 'CCOC', null],
    ['[OH]', 'CCO', [2]],
    ['C1CC1', 'CC1CC1', [1, 2, 3]],
    ['C1CC1', 'C1CCC1', null],
    ['c1ccccc1', 'CC1=CC=CC=C1', [1, 2, 3, 4, 5, 6]],
    ['C1=CC=CC=C1', 'Cc1ccccc1', [1, 2, 3, 4, 5, 6]],
    ['C=C', 'c1ccccc1', null],
    ['N~O', 'CN=O', [1, 2]],
    ['*#N', 'CC#N', [1, 2]],
    ['[N+](=O)[O-]', 'C[N+](=O)[O-]', [1, 2, 3]],
    ['CC(C)(C)C', 'CC(C)CC', null],
  ])('%s in %s', (pattern, smiles, atoms) => {
    const found = matcherFor(pattern).findIn(analyseStructure(graphOf(smiles)));
    if (atoms === null) expect(found).toBeNull();
    else expect([...found!].sort((a, b) => a - b)).toEqual([...atoms].sort((a, b) => a - b));
  });

  it('agrees with the substructure search of openchemlib on random molecules', () => {
    // Patterns without aromatic or double-bond subtleties on which the two define things differently.
    for (const pattern of ['CO', 'CN', 'C#N', 'OCO', 'CCC', 'CC(C)C', 'NCCO', 'C1CC1', 'FC(F)', 'SC', 'CCCCC']) {
      const matcher = matcherFor(pattern);
      const fragment = Molecule.fromSmiles(pattern, { noCoordinates: true });
      fragment.setFragment(true);
      const searcher = new SSSearcher();
      searcher.setFragment(fragment);
      let agreed = 0;
      for (let seed = 0; seed < 400; seed++) {
        const structure = analyseStructure(randomMolecule(seed));
        // In openchemlib an atom without a charge matches none with a charge, and aromaticity is defined otherwise.
        const molecule = moleculeFromGraph(structure.graph);
        molecule.ensureHelperArrays(Molecule.cHelperRings);
        const isAromatic = Array.from({ length: molecule.getAllBonds() }, (_, bond) => molecule.isAromaticBond(bond)).includes(true);
        const hasAromaticAtoms = structure.aromaticAtoms.subarray(0, structure.graph.atomCount).includes(1);
        if (isAromatic || hasAromaticAtoms || structure.graph.charges.some((charge) => charge !== 0)) continue;
        searcher.setMolecule(molecule);
        expect(matcher.occursIn(structure), `${pattern} in seed ${seed}`).toBe(searcher.isFragmentInMolecule());
        agreed++;
      }
      expect(agreed).toBeGreaterThan(100);
    }
  });
});

describe('compileExcludedFragments', () => {
  it('takes plain patterns and SMARTS, each with a reason that names it', () => {
    const evidence = evidenceDocument.parse({ formula: 'C2H5Br', fragments: { excluded: [{ smiles: '[CX4][Cl,Br]' }, { smiles: 'OO' }] } });
    const tests = compileExcludedFragments(evidence);
    expect(tests.map(({ reason }) => reason)).toEqual(['excludedFragment:OO', 'excludedFragment:[CX4][Cl,Br]']);
    const bromoethane = analyseStructure(graphOf('CCBr'));
    expect(tests.map((test) => test.occursIn(bromoethane))).toEqual([false, true]);
    expect(tests[1].findIn(bromoethane)).toEqual([1, 2]);
    expect(tests[1].findIn(analyseStructure(graphOf('c1ccccc1Br')))).toBeNull();
  });
});
