import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { MolecularGraph } from '../../../shared/types/molecular-graph.js';
import { cutOut, outsideOrders } from '../../support/cut-out.js';
import { enumerateAll } from '../../support/enumerate.js';
import { loadRdkit, molfileOf } from '../../support/rdkit.js';

const FORMULAS = ['C5H8O', 'C4H7NO', 'C5H6', 'C4H6O2', 'C3H5ClO2', 'C4H8OS', 'C6H12', 'C3H6N2'] as const;
const families = new Map(
  FORMULAS.map((formula) => [formula, enumerateAll({ formula, options: { mergeResonanceForms: false } }, { keep: true })]),
);

describe('required fragments', () => {
  it('keep exactly what generating everything and matching with RDKit keeps', async () => {
    const rdkit = await loadRdkit();
    const asWritten = JSON.stringify({ kekulize: false, setAromaticity: false });
    fc.assert(
      fc.property(
        fc.constantFrom(...FORMULAS),
        fc.nat(1e6),
        fc.array(fc.nat(1e6), { minLength: 5, maxLength: 5 }),
        fc.integer({ min: 1, max: 4 }),
        fc.integer({ min: 1, max: 2 }),
        (formula, which, picks, wanted, count) => {
          const family = families.get(formula)!;
          const cut = cutOut(family.graphs[which % family.graphs.length], picks, wanted);
          fc.pre(cut.smiles.includes('*'));
          const query = rdkit.get_qmol(cut.smarts)!;
          /** Matches whose atoms have the cut's bonds to the outside and no further bond among themselves. */
          const placements = (graph: MolecularGraph): number[][] => {
            const molecule = rdkit.get_mol(molfileOf(graph), asWritten)!;
            const found = JSON.parse(molecule.get_substruct_matches(query)) as { atoms: number[] }[];
            molecule.delete();
            return (Array.isArray(found) ? found : [])
              .map((match) => match.atoms)
              .filter((atoms) => atoms.every((atom, k) => outsideOrders(graph, atom, atoms) === cut.quotas[k]));
          };
          const expected = family.keys.filter((_, k) => {
            const sets = placements(family.graphs[k]);
            if (count === 1) return sets.length > 0;
            return sets.some((first) => sets.some((second) => !second.some((atom) => first.includes(atom))));
          });
          query.delete();
          let found: string[] = [];
          try {
            const input = { formula, fragments: { required: [{ smiles: cut.smiles, count }] }, options: { mergeResonanceForms: false } };
            found = enumerateAll(input, { keep: true, shards: 3 }).keys;
          } catch (error) {
            expect(String(error)).toContain('needs more');
          }
          if (count === 1) expect(found.length).toBeGreaterThan(0);
          expect(found.sort()).toEqual(expected.sort());
        },
      ),
      { numRuns: 80 },
    );
  }, 120_000);
});
