import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { resolveOptions } from '../../../shared/chemistry/resolve-options.js';
import { PLAUSIBILITY_RULES } from '../../../shared/plausibility/rules.js';
import {
  type CarbonSignal,
  evidenceDocument,
  type EvidenceDocument,
  type EvidenceInput,
  HYBRIDISATIONS,
  VALENCE_GROUPS,
} from '../../../shared/schemas/evidence.js';
import type { MolecularGraph } from '../../../shared/types/molecular-graph.js';
import { ProblemError } from '../../../workers/enumeration/problem.js';
import { createSearch, enumerateShard, planShards } from '../../../workers/enumeration/search.js';
import { constitutionKey } from '../../../workers/graph/constitution-key.js';
import { createEvaluator } from '../../../workers/ranking/evaluator.js';
import { classesOf, correlationEvidenceOf } from '../../support/correlation-evidence.js';
import { copyGraph } from '../../support/enumerate.js';
import { createRandom } from '../../../workers/enumeration/random-descent.js';

const FORMULAS = [
  ...['C5H8O', 'C4H7NO', 'C4H6O2', 'C3H5NO2', 'C4H4N2', 'C4H5NO', 'C3H6N2O', 'C5H6O', 'C6H6', 'C5H5N', 'C6H8', 'C4H4O'],
  ...['C4H5N', 'C3H4N2', 'C4H4S', 'C3H3NS', 'C3H6OS', 'C2H6O2S', 'C3H8OS', 'C2H5NO2', 'C3H7NO2', 'C2H5N3', 'CH3N3', 'C2H4N2'],
  ...['C3H6N2', 'C2H4N2O2', 'C2H6N2O', 'C3H8O2S', 'C4H10OS', 'C3H7NOS', 'CH5NO2S', 'C6H14', 'C7H16', 'C6H12', 'C5H12O', 'C6H14O2'],
  ...['C5H11N', 'C4H9NO', 'C4H8O2', 'C5H10O2', 'C4H11NO2', 'C3H9NO', 'C4H9NO2', 'C2H3N', 'C3H3N', 'C2H2N2O', 'CH3NO2', 'C2H7NO3S'],
] as const;
const FRAGMENTS = [
  ...['C*', 'O*', 'O=*', 'N*', 'S*', '*C*', '*O*', '*N*', '*S*', '*C(*)*', '*C=*', 'C=*', '*N=*', '*C(*)=*', '*N(*)*', '*C#*', 'N#*'],
  ...['*CC*', '*C(*)C', '*C(C)C', '*CO', '*C=O', '*C(=O)*', '*C(=O)O', '*C(=O)O*', '*C(=O)N*', '*C=C*', '*C#N', '*=CC=*', '*OC', '*C1CC1'],
  ...['*c1ccoc1', '*c1ccccc1', '*c1cccc(*)c1', '*c1cc[nH]c1', '*c1c(*)sc(*)c1*', '*c1ncccc1', '*[N+](=O)[O-]', '*C[N+](=O)[O-]'],
  ...['*[N+](*)(*)[O-]', '*=[N+](*)[O-]', '*#[N+][O-]', '*=[N+]=[N-]', '*N=[N+]=[N-]', '*C=[N+]=[N-]', '*[N+]#[C-]', '*C[N+]#[C-]'],
  ...['*S(*)=O', '*S(C)=O', '*S(*)(=O)=O', '*S(=O)(=O)O*', '*[N+](C)(C)[O-]', '*C(*)=[N+](*)[O-]'],
] as const;
const PATTERNS = [
  ...[
    'OO',
    'NN',
    'NO',
    'N=O',
    'C#C',
    'C=C=C',
    'C=O',
    'C=N',
    'CC(C)C',
    'C1CC1',
    'COC',
    'C(=O)O',
    'S=O',
    'N#C',
    'C=C',
    'CO',
    'cc',
    'c1ccccc1',
  ],
  ...['[N+]=[N-]', '[N+][O-]', 'C~N', 'C*C', '[OH]', '[CH3]', 'N=N', 'C=CO', '[#6]=[#8]', '[CX4]O', '[$(C=O)]N'],
] as const;
/** Larger families take long and say no more. */
const MOST_CONSTITUTIONS = 1500;

type Random = () => number;
const chance = (random: Random, probability: number): boolean => random() < probability;
const pick = <T>(random: Random, list: readonly T[]): T => list[Math.floor(random() * list.length)];
const some = <T>(random: Random, list: readonly T[], share: number): T[] => list.filter(() => chance(random, share));

interface Found {
  readonly keys: string[];
  readonly graphs: MolecularGraph[];
}

/** @returns null with more constitutions than allowed. */
function enumerate(evidence: EvidenceDocument, shards: number, most = Infinity): Found[] | null {
  const search = createSearch(evidence);
  const parts: Found[] = [];
  let left = most;
  const planned = planShards(search, shards);
  // Backwards: no shard may lean on one before it.
  for (const shard of planned.reverse()) {
    const part: Found = { keys: [], graphs: [] };
    enumerateShard(search, shard, {
      onConstitution(graph) {
        left--;
        part.keys.push(constitutionKey(graph, evidence.options.mergeResonanceForms));
        part.graphs.push(copyGraph(graph));
      },
      onMultigraphs: () => undefined,
      shouldStop: () => left < 0,
      stopRequested: () => left < 0,
    });
    parts.push(part);
    if (left < 0) return null;
  }
  return parts;
}

const families = new Map<string, Found | null>();
/** Everything that formula, fragments and groups allow; null when that is nothing, too much or contradictory. */
function familyOf(plain: EvidenceInput): Found | null {
  const key = JSON.stringify(plain);
  const known = families.get(key);
  if (known !== undefined) return known;
  let found: Found | null = null;
  try {
    found = enumerate(resolveOptions(evidenceDocument.parse(plain), 'count'), 1, MOST_CONSTITUTIONS)?.[0] ?? null;
  } catch (error) {
    if (!(error instanceof ProblemError)) throw error;
  }
  if (found?.keys.length === 0) found = null;
  families.set(key, found);
  return found;
}

/** Groups or none, fragments or none, either way of counting resonance forms. */
function randomPlain(random: Random): EvidenceInput {
  const fragmentCount = pick(random, [0, 0, 0, 1, 1, 1, 2, 2, 3]);
  return {
    formula: pick(random, FORMULAS),
    fragments: {
      required: Array.from({ length: fragmentCount }, () => ({ smiles: pick(random, FRAGMENTS), count: pick(random, [1, 1, 1, 2]) })),
    },
    options: {
      plausibility: false,
      mergeResonanceForms: chance(random, 0.6),
      valenceGroups: chance(random, 0.4) ? [] : chance(random, 0.5) ? [...VALENCE_GROUPS] : some(random, VALENCE_GROUPS, 0.5),
    },
  };
}

type Signals = Pick<EvidenceInput, 'carbonSignals' | 'protonSignals' | 'correlations'>;
type TrueSignals = Omit<Signals, 'carbonSignals'> & { readonly carbonSignals: CarbonSignal[] };

/** What a structure shows, every statement true of it; parts left out by chance. */
function trueSignals(graph: MolecularGraph, random: Random): TrueSignals {
  const { carbonSignals, protonSignals, correlations } = correlationEvidenceOf(graph, { withCounts: chance(random, 0.7) });
  const n = graph.atomCount;
  const windowShare = pick(random, [0, 0.5, 1]);
  const hydrogenShare = pick(random, [0, 0.7, 1]);
  const stretch = pick(random, [1, 4]);
  // One signal a class of carbons, in the order of their first atoms.
  const windows = windowsOf(graph);
  const carbons = carbonSignals.map((signal, k): CarbonSignal => {
    const { hydrogens, ...rest } = signal;
    return {
      ...rest,
      shift: stretch * signal.shift,
      ...(hydrogens !== undefined && chance(random, hydrogenShare) ? { hydrogens } : {}),
      window: chance(random, windowShare) ? widened(windows[k], random) : null,
    };
  });
  const hasPairs = n > 1 && chance(random, 0.5);
  const share = hasPairs ? pick(random, [0.4, 1]) : 0;
  return {
    carbonSignals: carbons,
    protonSignals: chance(random, 0.6) || hasPairs ? protonSignals : [],
    correlations: {
      // A list with gaps may be read as whole, and carbons without a pair as quaternary.
      hsqc: some(random, correlations.hsqc, share > 0 && chance(random, 0.7) ? 1 : 0).map(([c, p]): [number, number] => [stretch * c, p]),
      hmbc: some(random, correlations.hmbc, share).map(([p, c]): [number, number] => [p, stretch * c]),
      cosy: some(random, correlations.cosy, share),
      exceptions: pick(random, [0, 0, 1, 2]),
    },
  };
}

type Window = NonNullable<CarbonSignal['window']>;

/** The narrowest true window of each class of carbons. */
function windowsOf(graph: MolecularGraph): Window[] {
  const { atomCount: n, atomicNumbers, bondOrders } = graph;
  return classesOf(graph).members.flatMap(([atom]): Window[] => {
    if (atomicNumbers[atom] !== 6) return [];
    const orders = [...bondOrders.subarray(atom * n, (atom + 1) * n)];
    const piBonds = orders.reduce((sum, order) => sum + Math.max(order - 1, 0), 0);
    const hetero = orders.filter((order, other) => order > 0 && atomicNumbers[other] !== 6).length;
    return [{ hybridisations: [HYBRIDISATIONS[Math.min(piBonds, 2)]], heteroNeighbours: { min: hetero, max: hetero } }];
  });
}

function widened({ hybridisations, heteroNeighbours: { min, max } }: Window, random: Random): Window {
  return {
    hybridisations: HYBRIDISATIONS.filter((one) => hybridisations.includes(one) || chance(random, 0.2)),
    heteroNeighbours: { min: chance(random, 0.4) ? Math.max(0, min - 1) : min, max: chance(random, 0.4) ? Math.min(4, max + 1) : max },
  };
}

/** Wrong, missing and doubled statements. */
function spoilt({ carbonSignals, protonSignals, correlations }: TrueSignals, random: Random): Signals {
  const faults = pick(random, [0.1, 0.3]);
  const carbons = carbonSignals
    .filter(() => !chance(random, faults))
    .map(({ window, count, ...signal }): CarbonSignal => {
      const isDerived = chance(random, faults);
      return {
        ...signal,
        ...(chance(random, faults) ? { hydrogens: pick(random, [0, 1, 2, 3]) } : {}),
        ...(chance(random, faults) ? { count: pick(random, [1, 2, 3]) } : count === undefined ? {} : { count }),
        ...(isDerived ? {} : { window: chance(random, faults) ? widened(pick(random, SOME_WINDOWS), random) : (window ?? null) }),
      };
    });
  const pairs = { ...correlations };
  const protons = (protonSignals ?? []).map((signal) =>
    chance(random, faults) ? { ...signal, count: pick(random, [1, 2, 3, 6]) } : signal,
  );
  if (protons.length > 0 && carbons.length > 0 && chance(random, faults))
    pairs.hmbc = [...(pairs.hmbc ?? []), [pick(random, protons).shift, pick(random, carbons).shift]];
  if (protons.length > 1 && chance(random, faults))
    pairs.cosy = [...(pairs.cosy ?? []), [pick(random, protons).shift, pick(random, protons).shift]];
  if (protons.length > 0 && carbons.length > 0 && chance(random, faults))
    pairs.hsqc = [...(pairs.hsqc ?? []), [pick(random, carbons).shift, pick(random, protons).shift]];
  return { carbonSignals: carbons, protonSignals: protons, correlations: pairs };
}
const SOME_WINDOWS: readonly Window[] = [
  { hybridisations: ['sp3'], heteroNeighbours: { min: 0, max: 0 } },
  { hybridisations: ['sp2'], heteroNeighbours: { min: 1, max: 1 } },
  { hybridisations: ['sp'], heteroNeighbours: { min: 0, max: 1 } },
];

/** Limits that do not come from spectra. */
function randomLimits(random: Random): { excluded: { smiles: string }[]; options: NonNullable<EvidenceInput['options']> } {
  const min = pick(random, [3, 3, 3, 4, 5, 6]);
  return {
    excluded: chance(random, 0.5) ? [] : Array.from({ length: pick(random, [1, 2]) }, () => ({ smiles: pick(random, PATTERNS) })),
    options: {
      plausibility: chance(random, 0.4),
      disabledRules: some(
        random,
        PLAUSIBILITY_RULES.map(({ id }) => id),
        0.3,
      ),
      ringSizes: { min, max: chance(random, 0.7) ? null : Math.max(min, pick(random, [3, 4, 5, 6])) },
    },
  };
}

const tally = { kept: 0, rejected: 0, cut: 0, truths: 0 };

/** Messages hold the whole evidence, so that a case can be run again by itself. */
function check(seed: number): void {
  const random = createRandom(seed);
  const plain = randomPlain(random);
  const family = familyOf(plain);
  fc.pre(family !== null);
  const all = family!;
  const which = Math.floor(random() * all.graphs.length);
  const truth = all.graphs[which];
  const mode = chance(random, 0.15) ? 'rank' : 'count';
  const carbonList = pick(random, ['complete', 'partial'] as const);
  const isTrue = chance(random, 0.5);
  const fromTruth = trueSignals(truth, random);
  const signals = chance(random, 0.15) ? {} : isTrue ? fromTruth : spoilt(fromTruth, random);
  const limits = chance(random, 0.6) ? randomLimits(random) : { excluded: [], options: { plausibility: false } };
  const input: EvidenceInput = {
    ...plain,
    ...signals,
    fragments: { ...plain.fragments, excluded: limits.excluded },
    options: { ...plain.options, ...limits.options, carbonList, shiftWindows: chance(random, 0.5) },
  };
  const evidence = resolveOptions(evidenceDocument.parse(input), mode);
  const evaluator = createEvaluator(evidence, { keep: 1, maxSeconds: null, mode });
  const survives = (graph: MolecularGraph): boolean => evaluator.evaluate(graph).kind === 'scored';

  const context = JSON.stringify(input);
  expect(new Set(all.keys).size, `duplicates in everything: ${context}`).toBe(all.keys.length);
  const expected = all.keys.filter((_, k) => survives(all.graphs[k])).sort();
  for (const shards of [1, 3, 7]) {
    const parts = enumerate(evidence, shards)!;
    const built = parts.flatMap(({ keys }) => keys);
    expect(new Set(built).size, `duplicates: ${context}`).toBe(built.length);
    const survivors = parts.flatMap(({ keys, graphs }) => keys.filter((_, k) => survives(graphs[k])));
    expect(survivors.sort(), `${shards} shards: ${context}`).toEqual(expected);
    if (shards !== 3) continue;
    expect(enumerate(evidence, shards)!.map(({ keys }) => keys)).toEqual(parts.map(({ keys }) => keys));
    if (built.length < all.keys.length) tally.cut++;
  }
  // Without limits that the structure may break, what is true of it cannot rule it out.
  if (isTrue && limits.excluded.length === 0 && limits.options.plausibility === false && limits.options.ringSizes === undefined) {
    expect(expected, `the structure behind the signals is lost: ${context}`).toContain(all.keys[which]);
    tally.truths++;
  }
  tally.kept += expected.length;
  tally.rejected += all.keys.length - expected.length;
}

describe('constraints of every kind together', () => {
  it('leave of everything that formula, fragments and groups allow exactly what the finished structure is tested for', () => {
    fc.assert(fc.property(fc.nat(), check), { numRuns: 110, seed: 418, endOnFailure: true });
    // The runs must say something: lists that shrink while they are built, structures of either kind.
    expect(tally.cut).toBeGreaterThan(70);
    expect(tally.truths).toBeGreaterThan(15);
    expect(tally.kept).toBeGreaterThan(1000);
    expect(tally.rejected).toBeGreaterThan(5000);
  }, 120_000);
});
