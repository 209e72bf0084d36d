import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { parseSmiles } from '../../../shared/chemistry/smiles.js';
import type { MolecularGraph } from '../../../shared/types/molecular-graph.js';
import { findEquivalence } from '../../../workers/graph/equivalence.js';
import { permutationOf, randomMolecule, relabelGraph } from '../../support/random-molecules.js';

function graphOf(smiles: string): MolecularGraph {
  const parsed = parseSmiles(smiles);
  if (!parsed.ok) throw new Error(parsed.message);
  return parsed.graph;
}
const equivalenceOf = (smiles: string) => findEquivalence(graphOf(smiles));
function carbonClasses(smiles: string): number {
  const graph = graphOf(smiles);
  const { shiftClasses } = findEquivalence(graph);
  return new Set(Array.from(shiftClasses).filter((_, atom) => graph.atomicNumbers[atom] === 6)).size;
}

describe('topological equivalence', () => {
  // Carbon signal counts: SCIENCE.md 2.3 (toluene) and the lists of SCIENCE.md 11 (Babij et al. 2016).
  it.each([
    ['Cc1ccccc1', 5],
    ['Cc1ccccc1C', 4],
    ['Cc1cccc(C)c1', 5],
    ['Cc1ccc(C)cc1', 3],
    ['CCc1ccccc1', 6],
    ['CC(C)c1ccc(C)cc1', 7],
    ['CC(=O)OCCC(C)C', 6],
    ['CC(C)(C)OC', 3],
    ['CC1CCCO1', 5],
    ['O=C1CCCCC1', 4],
    ['CN1C=NC2=C1C(=O)N(C)C(=O)N2C', 8],
    ['c1ccncc1', 3],
    // Rotamer pair of dimethylformamide: two methyl signals.
    ['CN(C)C=O', 3],
  ])('finds the carbon classes of %s', (smiles, count) => {
    expect(carbonClasses(smiles)).toBe(count);
  });

  it('sees through atoms that refinement alone cannot tell apart', () => {
    // Decalin and bicyclopentyl have equal refined colours; within each, exact orbits by hand.
    expect(equivalenceOf('C1CCC2CCCCC2C1').orbitCount).toBe(3);
    expect(equivalenceOf('C1CCC(C1)C1CCCC1').orbitCount).toBe(3);
    // Cuneane: eight CH of degree 3 share one refined colour; C2v symmetry leaves three kinds (2 + 2 + 4 atoms).
    expect(equivalenceOf('C12C3C4C3C5C1C2C45').orbitCount).toBe(3);
  });

  it('gives both Kekulé forms the same classes', () => {
    const one = equivalenceOf('CC1=CC=CC=C1C');
    const other = equivalenceOf('CC=1C=CC=CC=1C');
    expect(other.shiftClasses).toEqual(one.shiftClasses);
    expect(one.orbitCount).toBe(4);
  });

  it('does not depend on how the atoms are numbered', () => {
    fc.assert(
      fc.property(fc.integer(), fc.integer(), (seed, order) => {
        const graph = randomMolecule(seed);
        const permutation = permutationOf(graph.atomCount, order);
        const before = findEquivalence(graph);
        const after = findEquivalence(relabelGraph(graph, permutation));
        const together = (classes: Uint8Array, a: number, b: number): boolean => classes[a] === classes[b];
        for (let a = 0; a < graph.atomCount; a++) {
          expect(after.hydrogenTopicity[permutation[a]]).toBe(before.hydrogenTopicity[a]);
          for (let b = 0; b < a; b++) {
            expect(together(after.orbits, permutation[a], permutation[b])).toBe(together(before.orbits, a, b));
            expect(together(after.shiftClasses, permutation[a], permutation[b])).toBe(together(before.shiftClasses, a, b));
          }
        }
        expect(after.stereocentres.length).toBe(before.stereocentres.length);
        expect(after.stereoDoubleBonds.length).toBe(before.stereoDoubleBonds.length);
      }),
      { numRuns: 150 },
    );
  });
});

describe('substitution test', () => {
  // SCIENCE.md 2.5, checks named there; the others by the same rule.
  it.each([
    ['ClCCl', 1, 'homotopic'],
    ['CCO', 1, 'enantiotopic'],
    ['CCC(C)O', 1, 'diastereotopic'],
    ['CC(OCC)OCC', 3, 'diastereotopic'],
    ['C=Cc1ccccc1', 0, 'diastereotopic'],
    ['CCC', 1, 'homotopic'],
    ['C=C(C)C', 0, 'homotopic'],
    ['C=C=C', 0, 'homotopic'],
    ['C=C=CC', 0, 'enantiotopic'],
    ['CC(O)CC(C)O', 3, 'diastereotopic'],
    ['O=C1CCCCC1', 4, 'homotopic'],
    ['CC1CCCCC1', 4, 'diastereotopic'],
    ['CC1CCCO1', 3, 'diastereotopic'],
    ['C1CC2CCC1C2', 6, 'homotopic'],
    ['C1CC2CCC1C2', 0, 'diastereotopic'],
  ])('%s, atom %i: %s', (smiles, atom, expected) => {
    expect(equivalenceOf(smiles).hydrogenTopicity[atom]).toBe(expected);
  });

  it('splits the methyls of an isopropyl group next to a stereocentre and keeps them otherwise', () => {
    const beside = equivalenceOf('CC(C)C(C)O').shiftClasses;
    expect(beside[0]).not.toBe(beside[2]);
    const away = equivalenceOf('CC(C)CO').shiftClasses;
    expect(away[0]).toBe(away[2]);
    // 2-methyl-2-butene: E and Z methyls (17.3 and 25.7 ppm, from memory).
    const alkene = equivalenceOf('CC=C(C)C').shiftClasses;
    expect(alkene[3]).not.toBe(alkene[4]);
  });
});

describe('stereo counts', () => {
  // Textbook counts, from memory: 2-butanol 1, tartaric acid 2, 1,4-dimethylcyclohexane 2 (cis/trans), camphor 2,
  // menthol 3, 2-butene one E/Z bond, 2-methyl-2-butene none.
  it.each([
    ['CCC(C)O', 1, 0],
    ['OC(C(O)C(=O)O)C(=O)O', 2, 0],
    ['CC1CCC(C)CC1', 2, 0],
    ['CC1CCCCC1', 0, 0],
    ['CC1(C)C2CCC1(C)C(=O)C2', 2, 0],
    ['CC1CCC(C(C)C)C(O)C1', 3, 0],
    ['CC=CC', 0, 1],
    ['CC=C(C)C', 0, 0],
    ['CC(O)C(O)C(C)O', 3, 0],
    ['CC(C)(C)O', 0, 0],
    ['CS(=O)CC', 1, 0],
    ['CC=NO', 0, 1],
  ])('%s has %i stereocentres and %i stereo double bonds', (smiles, centres, bonds) => {
    const { stereocentres, stereoDoubleBonds } = equivalenceOf(smiles);
    expect([stereocentres.length, stereoDoubleBonds.length]).toEqual([centres, bonds]);
  });
});
