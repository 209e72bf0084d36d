import fc from 'fast-check';
import { beforeAll, describe, expect, it } from 'vitest';
import { evidenceDocument, type EvidenceInput } from '../../../shared/schemas/evidence.js';
import { constitutionKey } from '../../../workers/graph/constitution-key.js';
import { createEvaluator } from '../../../workers/ranking/evaluator.js';
import { minimumCycleBasisSizes } from '../../support/cycle-basis.js';
import { enumerateAll } from '../../support/enumerate.js';
import { loadRdkit, molfileOf } from '../../support/rdkit.js';

/** Excluded patterns and the SMARTS that says the same to RDKit, where an upper-case atom would mean aliphatic only. */
const PATTERNS = [
  ['OO', '[#8]-[#8]'],
  ['NN', '[#7]-[#7]'],
  ['NO', '[#7]-[#8]'],
  ['N=O', '[#7]=[#8]'],
  ['C#C', '[#6]#[#6]'],
  ['C=C=C', '[#6]=[#6]=[#6]'],
  ['C=O', '[#6]=[#8]'],
  ['C=N', '[#6]=[#7]'],
  ['CC(C)C', '[#6]-[#6](-[#6])-[#6]'],
  ['C1CC1', '[#6]1-[#6]-[#6]-1'],
  ['COC', '[#6]-[#8]-[#6]'],
  ['C(=O)O', '[#6](=[#8])-[#8]'],
] as const;

let rdkit: Awaited<ReturnType<typeof loadRdkit>>;
beforeAll(async () => {
  rdkit = await loadRdkit();
});

describe('limits on rings and excluded patterns', () => {
  it('leave what an independent matcher leaves of everything, though they cut while structures are built', () => {
    const limits = fc.record({
      formula: fc.constantFrom('C5H6O', 'C6H8', 'C5H7N', 'C4H4N2', 'C6H6', 'C4H6O2', 'C5H5N', 'C4H5NO', 'C7H8'),
      min: fc.integer({ min: 3, max: 6 }),
      max: fc.option(fc.integer({ min: 6, max: 7 })),
      excluded: fc.uniqueArray(fc.constantFrom(...PATTERNS), { maxLength: 3 }),
      required: fc.option(fc.constantFrom('*C', '*C=C*', '*C(*)*')),
    });
    let cut = 0;
    let kept = 0;
    fc.assert(
      fc.property(limits, ({ formula, min, max, excluded, required }) => {
        const plain: EvidenceInput = {
          formula,
          fragments: { required: required === null ? [] : [{ smiles: required }] },
          options: { plausibility: false },
        };
        const limited: EvidenceInput = {
          ...plain,
          fragments: { ...plain.fragments, excluded: excluded.map(([smiles]) => ({ smiles })) },
          options: { plausibility: false, ringSizes: { min, max } },
        };
        const all = enumerateAll(plain, { keep: true });
        const queries = excluded.map(([, smarts]) => rdkit.get_qmol(smarts));
        const expected = all.graphs.filter((graph) => {
          const sizes = minimumCycleBasisSizes(graph);
          if (sizes.some((size) => size < min || (max !== null && size > max))) return false;
          const molecule = rdkit.get_mol(molfileOf(graph))!;
          const holds = queries.some((query) => molecule.get_substruct_match(query!) !== '{}');
          molecule.delete();
          return !holds;
        });
        for (const query of queries) query!.delete();

        const built = enumerateAll(limited, { keep: true, shards: 3 });
        const evaluator = createEvaluator(evidenceDocument.parse(limited), { keep: 1, maxSeconds: null, mode: 'count' });
        const survivors = built.graphs.filter((graph) => evaluator.evaluate(graph).kind === 'scored');
        const keysOf = (graphs: typeof survivors) => graphs.map((graph) => constitutionKey(graph, true)).sort();
        expect(keysOf(survivors)).toEqual(keysOf(expected));
        cut += all.constitutions - built.constitutions;
        kept += built.constitutions - survivors.length;
      }),
      { numRuns: 40, seed: 33 },
    );
    // Nearly everything that goes is cut before it is finished.
    expect(cut).toBeGreaterThan(20 * kept);
  }, 60_000);

  it.each(['C8H6', 'C7H6', 'C8H8'])('keep the strained rings of %s out without losing another structure', (formula) => {
    const input: EvidenceInput = { formula, options: { plausibility: true } };
    const settings = { keep: 1, maxSeconds: null, mode: 'count' as const };
    const evaluator = createEvaluator(evidenceDocument.parse(input), settings);
    const survive = (given: EvidenceInput): string[] =>
      enumerateAll(given, { keep: true })
        .graphs.filter((graph) => evaluator.evaluate(graph).kind === 'scored')
        .map((graph) => constitutionKey(graph, true))
        .sort();
    expect(survive(input)).toEqual(survive({ formula, options: { plausibility: false } }));
  });
});
