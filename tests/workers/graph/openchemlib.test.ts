import fc from 'fast-check';
import { Molecule } from 'openchemlib';
import { describe, expect, it } from 'vitest';
import { canonicalStructure, graphFromMolecule, moleculeFromGraph, reorderGraph } from '../../../workers/graph/openchemlib.js';

const graphOf = (smiles: string) => graphFromMolecule(Molecule.fromSmiles(smiles, { noCoordinates: true, noStereo: true }));

const STRUCTURES = [
  'Cc1ccccc1C(O)=O',
  'c1ccc2ccccc2c1',
  'O=[N+]([O-])c1ccccc1',
  'CS(C)(=O)=O',
  'CP(=O)(O)OC',
  'CN=[N+]=[N-]',
  'C[N+]#[C-]',
  'CC=CC(C)N',
  'C1=CC=CC=CC=C1',
  'Cn1cnc2c1c(=O)n(C)c(=O)n2C',
  'c1ccc2cc3c(cc2c1)C3',
  'C1CC2CC1CC2',
  'BrC(F)(Cl)I',
];

describe('canonicalStructure', () => {
  it('gives one SMILES and one id code however the atoms are numbered', () => {
    for (const smiles of STRUCTURES) {
      const graph = graphOf(smiles);
      const expected = canonicalStructure(graph);
      const atoms = Array.from({ length: graph.atomCount }, (_, i) => i);
      fc.assert(
        fc.property(fc.shuffledSubarray(atoms, { minLength: atoms.length }), (order) => {
          const found = canonicalStructure(reorderGraph(graph, order));
          expect(found.smiles).toBe(expected.smiles);
          expect(found.idcode).toBe(expected.idcode);
        }),
        { numRuns: 10 },
      );
    }
  });

  it('gives one SMILES and one id code for both Kekulé forms of an ortho-disubstituted ring', () => {
    const one = canonicalStructure(graphOf('CC1=CC=CC=C1C(O)=O'));
    const other = canonicalStructure(graphOf('CC1=C(C(O)=O)C=CC=C1'));
    expect(other).toMatchObject({ smiles: one.smiles, idcode: one.idcode });
  });

  it('tells which atom stands where in the SMILES', () => {
    for (const smiles of STRUCTURES) {
      const graph = graphOf(smiles);
      const n = graph.atomCount;
      const canonical = canonicalStructure(graph);
      const mapped = reorderGraph(graph, canonical.order);
      const written = graphOf(canonical.smiles);
      expect([...mapped.atomicNumbers]).toEqual([...written.atomicNumbers]);
      expect([...mapped.hydrogens]).toEqual([...written.hydrogens]);
      expect([...mapped.charges]).toEqual([...written.charges]);
      expect([...mapped.bondOrders].map((order) => order > 0)).toEqual([...written.bondOrders].map((order) => order > 0));
      expect(new Set(canonical.order).size).toBe(n);
    }
  });

  it('writes neither stereo centres nor double-bond geometry', () => {
    for (const smiles of ['CC=CC(C)N', 'CC(O)C(N)C(=O)O', 'CC(C)=NO'])
      expect(canonicalStructure(graphOf(smiles)).smiles).not.toMatch(/[@/\\]/);
  });
});

describe('moleculeFromGraph', () => {
  it('keeps hydrogen counts that the library would not guess', () => {
    // Trimethylphosphane read as a phosphorane PH2(CH3)3: valence 5 instead of 3.
    const graph = graphOf('CP(C)C');
    const changed = { ...graph, hydrogens: Uint8Array.from(graph.hydrogens, (h, a) => (a === 1 ? 2 : h)) };
    const back = graphFromMolecule(moleculeFromGraph(changed));
    expect([...back.hydrogens]).toEqual([...changed.hydrogens]);
  });
});
