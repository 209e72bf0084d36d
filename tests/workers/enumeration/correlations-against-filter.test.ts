import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { evidenceDocument, type EvidenceDocument, type EvidenceInput } from '../../../shared/schemas/evidence.js';
import type { MolecularGraph } from '../../../shared/types/molecular-graph.js';
import { createEvaluator } from '../../../workers/ranking/evaluator.js';
import { constitutionKey } from '../../../workers/graph/constitution-key.js';
import { correlationEvidenceOf, meetsCorrelations } from '../../support/correlation-evidence.js';
import { enumerateAll } from '../../support/enumerate.js';
import { graphOf } from '../../support/graph-of.js';
import { createRandom } from '../../../workers/enumeration/random-descent.js';

const LIST = { keep: 1000, maxSeconds: null, mode: 'list' } as const;

/** What a run lists: enumerated with the checks of the fill, then filtered. */
function listed(input: EvidenceInput, shards: number): { keys: string[]; graphs: MolecularGraph[]; built: number } {
  const evidence = evidenceDocument.parse(input);
  const evaluator = createEvaluator(evidence, LIST);
  const { keys, graphs } = enumerateAll(input, { keep: true, shards });
  const kept = graphs.map((graph) => evaluator.evaluate(graph).kind === 'scored');
  return { keys: keys.filter((_, k) => kept[k]), graphs: graphs.filter((_, k) => kept[k]), built: keys.length };
}

const FORMULAS = ['C5H8O', 'C4H7NO', 'C5H10O', 'C4H6O2', 'C6H10', 'C5H9N', 'C6H8', 'C4H9NO'] as const;
const families = new Map(FORMULAS.map((formula) => [formula, enumerateAll({ formula }, { keep: true })]));

/** Spectra of a structure with gaps, overlap and pairs that do not belong. */
function spoiltEvidence(formula: string, graph: MolecularGraph, random: () => number, exceptions: number): EvidenceInput {
  const { carbonSignals, protonSignals, correlations } = correlationEvidenceOf(graph);
  const chance = (probability: number): boolean => random() < probability;
  const pick = <T>(list: readonly T[]): T => list[Math.floor(random() * list.length)];
  const dropsCounts = chance(0.5);
  const dropsHydrogens = chance(0.4);
  const overlaps = chance(0.3);
  const carbons = carbonSignals.map(({ shift, hydrogens, count }, k) => ({
    // Every other signal is moved beside its neighbour.
    shift: overlaps && k % 2 === 1 ? carbonSignals[k - 1].shift + 0.5 : shift,
    ...(dropsHydrogens && chance(0.6) ? {} : { hydrogens: hydrogens! }),
    ...(dropsCounts && chance(0.7) ? {} : { count: count! }),
  }));
  const movedCarbon = new Map(carbonSignals.map(({ shift }, k) => [shift, carbons[k].shift]));
  const overlapsProtons = chance(0.3);
  const protons = protonSignals.map(({ shift, count, exchangeable }, k) => ({
    shift: overlapsProtons && k % 2 === 1 ? Number((protonSignals[k - 1].shift + 0.04).toFixed(2)) : shift,
    ...(chance(0.5) ? { count: count! } : {}),
    ...(exchangeable === undefined || chance(0.5) ? {} : { exchangeable }),
  }));
  const movedProton = new Map(protonSignals.map(({ shift }, k) => [shift, protons[k].shift]));
  const c = (shift: number): number => movedCarbon.get(shift)!;
  const p = (shift: number): number => movedProton.get(shift)!;
  const some = <T>(list: readonly T[], share: number): T[] => list.filter(() => chance(share));
  const hmbc = some(correlations.hmbc, pick([0.3, 0.7, 1])).map(([a, b]): [number, number] => [p(a), c(b)]);
  const cosy = some(correlations.cosy, pick([0.3, 1])).map(([a, b]): [number, number] => [p(a), p(b)]);
  for (let k = Math.floor(random() * 3); k > 0 && carbons.length > 0 && protons.length > 0; k--) {
    hmbc.push([pick(protons).shift, pick(carbons).shift]);
    if (chance(0.4)) cosy.push([pick(protons).shift, pick(protons).shift]);
  }
  const hsqcShare = pick([0, 0.7, 1]);
  return {
    formula,
    carbonSignals: carbons,
    protonSignals: protons,
    correlations: {
      hsqc: some(correlations.hsqc, hsqcShare).map(([b, a]): [number, number] => [c(b), p(a)]),
      hmbc,
      cosy,
      hmbcBonds: pick([2, 3, 3, 4]),
      cosyBonds: pick([2, 3, 3, 4]),
      exceptions,
    },
    // "complete" would also say which carbons are quaternary; that is tested by itself.
    options: { carbonList: 'partial', plausibility: false },
  };
}

describe('COSY, HSQC and HMBC pairs', () => {
  it('keep exactly what trying every assignment on every constitution keeps, with 0, 1 and 2 exceptions, in any shards', () => {
    const tried = { kept: 0, rejected: 0 };
    let cut = 0;
    fc.assert(
      fc.property(
        fc.constantFrom(...FORMULAS),
        fc.nat(1e6),
        fc.nat(),
        fc.integer({ min: 0, max: 2 }),
        fc.integer({ min: 1, max: 5 }),
        // Atoms of units lie first in the matrix, with bonds of their own.
        fc.constantFrom([], [], ['*CC*'], ['C*'], ['*CC*', 'C*'], ['*C(*)C']),
        (formula, which, seed, exceptions, shards, smiles) => {
          const family = families.get(formula)!;
          const spoilt = spoiltEvidence(formula, family.graphs[which % family.graphs.length], createRandom(seed), exceptions);
          const input = { ...spoilt, fragments: { required: smiles.map((fragment) => ({ smiles: fragment })) } };
          const evidence: EvidenceDocument = evidenceDocument.parse(input);
          const hsqcOnly = listed({ ...input, correlations: { hsqc: evidence.correlations.hsqc } }, 1);
          const found = listed(input, shards);
          const keys = new Set(found.keys);
          expect(keys.size).toBe(found.keys.length);
          expect(hsqcOnly.keys).toEqual(expect.arrayContaining(found.keys));
          // A sample of large families, because trying every assignment takes its time.
          const step = Math.ceil(hsqcOnly.keys.length / 40);
          for (let k = seed % step; k < hsqcOnly.keys.length; k += step) {
            const expected = meetsCorrelations(hsqcOnly.graphs[k], evidence);
            if (expected === null) continue;
            expect([hsqcOnly.keys[k], keys.has(hsqcOnly.keys[k])]).toEqual([hsqcOnly.keys[k], expected]);
            tried[expected ? 'kept' : 'rejected']++;
          }
          // Branches are cut alike, however the search is split.
          expect(listed(input, 1).built).toBe(found.built);
          if (found.built < hsqcOnly.built) cut++;
        },
      ),
      { numRuns: 150 },
    );
    // The runs must say something: many structures of either kind, many lists that shrink while they are built.
    expect(tried.kept).toBeGreaterThan(300);
    expect(tried.rejected).toBeGreaterThan(300);
    expect(cut).toBeGreaterThan(30);
  }, 300_000);

  it('keep the structure that they were taken from, with and without counts, equivalent atoms included', () => {
    // Structures of every kind of symmetry; the pairs follow from the graph alone.
    const smiles = [
      'CCOC(=O)c1ccc(C)cc1',
      'COc1cc(C=O)ccc1O',
      'CC(C)(C)c1ccc(O)cc1',
      'Cc1cc(C)cc(C)c1',
      'C1CCCCC1',
      'CC(C)C(=O)C(C)C',
      'CCN(CC)C(=O)C',
      'O=C1c2ccccc2C(=O)c2ccccc21',
      'C1CC2CCC1CC2',
      'CCCCCCCC(=O)OCC',
      'CC1CCC(C(C)C)C(O)C1',
      'OCC(CO)(CO)CO',
      'c1ccc2ncccc2c1',
      'CN1CCCC1c1cccnc1',
      'O=C(O)C=Cc1ccc(O)cc1',
      'CC(N)C(=O)NCC(=O)O',
    ];
    for (const text of smiles) {
      const graph = graphOf(text);
      for (const withCounts of [true, false]) {
        const evidence = evidenceDocument.parse({
          formula: 'C2H6',
          ...correlationEvidenceOf(graph, { withCounts }),
          options: { plausibility: false },
        });
        expect([text, withCounts, createEvaluator(evidence, LIST).evaluate(graph).kind]).toEqual([text, withCounts, 'scored']);
      }
    }
  });

  it('shrink the list to few and cut while structures are built', () => {
    // 4-(Hydroxymethyl)phenyl acetate; signals and pairs follow from the graph, nothing was measured.
    const graph = graphOf('CC(=O)Oc1ccc(CO)cc1');
    const spectra = correlationEvidenceOf(graph);
    const input = (correlations: object): EvidenceInput => ({
      formula: 'C9H10O3',
      fragments: { required: [{ smiles: '*c1ccc(*)cc1', count: 1 }] },
      ...spectra,
      correlations,
      options: { plausibility: false },
    });
    const without = listed(input({}), 2);
    const found = listed(input(spectra.correlations), 2);
    expect(found.keys).toContain(constitutionKey(graph, true));
    expect(found.keys.length).toBeLessThan(without.keys.length / 5);
    expect(found.built).toBeLessThan(without.built);
    expect(without.keys).toEqual(expect.arrayContaining(found.keys));
  });
});
