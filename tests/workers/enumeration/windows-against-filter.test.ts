import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
  type CarbonWindow,
  evidenceDocument,
  type EvidenceInput,
  HYBRIDISATIONS,
  VALENCE_GROUPS,
} from '../../../shared/schemas/evidence.js';
import type { MolecularGraph } from '../../../shared/types/molecular-graph.js';
import { analyseStructure } from '../../../workers/graph/analysis.js';
import { Environments } from '../../../workers/ranking/environments.js';
import { SignalBounds } from '../../../workers/ranking/signal-bounds.js';
import { SignalCensus } from '../../../workers/ranking/signal-census.js';
import { enumerateAll } from '../../support/enumerate.js';
import { matchWindows } from '../../support/window-matcher.js';

type Signal = NonNullable<EvidenceInput['carbonSignals']>[number];

const FORMULAS = [
  'C5H8O',
  'C4H7NO',
  'C5H6',
  'C4H6O2',
  'C3H5ClO2',
  'C6H10',
  'C5H12O',
  'C4H5N',
  'C3H6N2',
  'C7H8',
  'C6H14',
  'C5H10S',
] as const;
const FRAGMENTED = [
  { formula: 'C6H10O2', required: [{ smiles: '*C(=O)O*' }] },
  { formula: 'C7H14O', required: [{ smiles: '*C(C)C', count: 2 }] },
  { formula: 'C8H10O', required: [{ smiles: '*c1cccc(*)c1' }] },
  { formula: 'C9H12', required: [{ smiles: '*c1ccccc1' }] },
  { formula: 'C6H8O', required: [{ smiles: '*=CC=*' }] },
  { formula: 'C5H8O2', required: [{ smiles: '*C=O' }, { smiles: '*C' }] },
  { formula: 'C6H9N', required: [{ smiles: '*C#N' }, { smiles: '*C*' }] },
] as const;
const GROUPED = ['C3H7NO2', 'C2H5N3', 'C3H8OS', 'C4H5N', 'C3H6N2'] as const;

const families = new Map<string, { keys: string[]; graphs: MolecularGraph[] }>();
function familyOf(input: EvidenceInput): { keys: string[]; graphs: MolecularGraph[] } {
  const key = JSON.stringify(input);
  let family = families.get(key);
  if (family === undefined) families.set(key, (family = enumerateAll(input, { keep: true })));
  return family;
}

function environmentsOf(graph: MolecularGraph): {
  structure: ReturnType<typeof analyseStructure>;
  environments: Environments;
  bounds: SignalBounds;
} {
  const structure = analyseStructure(graph);
  const environments = new Environments();
  environments.find(structure);
  const bounds = new SignalBounds();
  bounds.find(structure, environments);
  return { structure, environments, bounds };
}

/** Does the census of signals, which knows no windows then, keep the structure? */
function census(input: EvidenceInput): (graph: MolecularGraph) => boolean {
  const test = new SignalCensus(evidenceDocument.parse(input));
  return (graph) => {
    const { structure, environments, bounds } = environmentsOf(graph);
    return test.check(structure, environments, bounds) === null;
  };
}

/** How signals are made up from a structure: which environments show, and what of each is said. */
interface Draft {
  readonly omits: boolean;
  readonly saysHydrogens: boolean;
  readonly saysCount: boolean;
  readonly window: CarbonWindow | 'true' | null;
}
const windowArbitrary: fc.Arbitrary<CarbonWindow> = fc.record({
  hybridisations: fc.subarray([...HYBRIDISATIONS], { minLength: 1 }),
  heteroNeighbours: fc.tuple(fc.nat(2), fc.nat(3)).map(([min, more]) => ({ min, max: Math.min(4, min + more) })),
});
const draftArbitrary: fc.Arbitrary<Draft> = fc.record({
  omits: fc.integer({ min: 0, max: 5 }).map((value) => value === 0),
  saysHydrogens: fc.integer({ min: 0, max: 5 }).map((value) => value > 0),
  saysCount: fc.boolean(),
  window: fc.oneof(
    { weight: 4, arbitrary: fc.constant('true' as const) },
    { weight: 1, arbitrary: fc.constant(null) },
    { weight: 1, arbitrary: windowArbitrary },
  ),
});

/** The signals of a structure's carbons as the drafts tell them; windows hold the truth unless a draft has one of its own. */
function signalsOf(graph: MolecularGraph, drafts: readonly Draft[]): Signal[] {
  const { structure, environments } = environmentsOf(graph);
  const signals: Signal[] = [];
  for (let c = 0; c < environments.classCount; c++) {
    const atom = environments.first[c];
    if (graph.atomicNumbers[atom] !== 6) continue;
    const { omits, saysHydrogens, saysCount, window } = drafts[c % drafts.length];
    if (omits) continue;
    const orders = Array.from({ length: graph.atomCount }, (_, other) => graph.bondOrders[atom * graph.atomCount + other]);
    const piBonds = orders.reduce((sum, order) => sum + Math.max(order - 1, 0), 0);
    const hetero = orders.filter((order, other) => order > 0 && graph.atomicNumbers[other] !== 6).length;
    const own: CarbonWindow = {
      hybridisations: [HYBRIDISATIONS[Math.min(piBonds, 2)]],
      heteroNeighbours: { min: Math.max(0, hetero - (c % 2)), max: Math.min(4, hetero + (c % 3 === 0 ? 1 : 0)) },
    };
    signals.push({
      shift: 20 + 5 * c,
      ...(saysHydrogens ? { hydrogens: Math.min(structure.graph.hydrogens[atom], 3) } : {}),
      ...(saysCount ? { count: environments.size[c] } : {}),
      window: window === 'true' ? own : window,
    });
  }
  return signals;
}

function check(base: EvidenceInput, pick: number, drafts: readonly Draft[], carbonList: 'complete' | 'partial', shards: number): void {
  const family = familyOf(base);
  fc.pre(family.graphs.length > 0);
  const carbonSignals = signalsOf(family.graphs[pick % family.graphs.length], drafts);
  const withWindows: EvidenceInput = { ...base, carbonSignals, options: { ...base.options, carbonList } };
  const withoutWindows: EvidenceInput = {
    ...withWindows,
    carbonSignals: carbonSignals.map((signal) => ({ ...signal, window: null })),
  };
  const isComplete =
    carbonList === 'complete' && carbonSignals.length > 0 && carbonSignals.every(({ hydrogens }) => hydrogens !== undefined);
  const wanted = carbonSignals.map(({ hydrogens, count, window }) => ({
    hydrogens,
    count: count ?? 1,
    window: (window ?? null) as CarbonWindow | null,
  }));
  const keeps = census(withoutWindows);
  const expected = family.keys.filter((_, k) => {
    const graph = family.graphs[k];
    if (!keeps(graph)) return false;
    const { environments, bounds } = environmentsOf(graph);
    return matchWindows(graph, wanted, isComplete, { classOf: environments.classOf, most: bounds.carbonSignals });
  });
  const built = enumerateAll(withWindows, { keep: true, shards });
  const keepsWithWindows = census(withWindows);
  expect(built.keys.filter((_, k) => keepsWithWindows(built.graphs[k])).sort()).toEqual([...expected].sort());
  // Hybridisation, heteroatoms and counts are settled while building; only symmetry is left to the finished structure.
  for (const graph of built.graphs) expect(matchWindows(graph, wanted, isComplete)).toBe(true);
}

const common = [
  fc.nat(1e6),
  fc.array(draftArbitrary, { minLength: 12, maxLength: 12 }),
  fc.constantFrom('complete' as const, 'partial' as const),
  fc.constantFrom(1, 3, 20),
] as const;

describe('windows of 13C signals', () => {
  it('leave of a formula exactly what filtering all constitutions by them leaves', () => {
    fc.assert(
      fc.property(fc.constantFrom(...FORMULAS), fc.boolean(), ...common, (formula, mergeResonanceForms, pick, drafts, carbonList, shards) =>
        check({ formula, options: { mergeResonanceForms, plausibility: false } }, pick, drafts, carbonList, shards),
      ),
      { numRuns: 250 },
    );
  }, 120_000);

  it('leave of a formula with required fragments exactly what filtering leaves', () => {
    fc.assert(
      fc.property(
        fc.constantFrom(...FRAGMENTED),
        fc.boolean(),
        ...common,
        ({ formula, required }, mergeResonanceForms, pick, drafts, carbonList, shards) =>
          check(
            { formula, fragments: { required: [...required] }, options: { mergeResonanceForms, plausibility: false } },
            pick,
            drafts,
            carbonList,
            shards,
          ),
      ),
      { numRuns: 150 },
    );
  }, 120_000);

  it('leave of a formula with formed groups exactly what filtering leaves', () => {
    fc.assert(
      fc.property(fc.constantFrom(...GROUPED), ...common, (formula, pick, drafts, carbonList, shards) =>
        check({ formula, options: { plausibility: false, valenceGroups: [...VALENCE_GROUPS] } }, pick, drafts, carbonList, shards),
      ),
      { numRuns: 80 },
    );
  }, 120_000);
});
