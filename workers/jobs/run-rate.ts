import type { RunSettings, ShardCandidate } from '../../shared/jobs/contract.js';
import type { EvidenceDocument } from '../../shared/schemas/evidence.js';
import type { ProbeSample } from '../enumeration/estimate.js';
import { fill } from '../enumeration/fill.js';
import { openBranch, type OpenBranch } from '../enumeration/open-branch.js';
import { createRandom } from '../enumeration/random-descent.js';
import type { Search } from '../enumeration/search.js';
import { constitutionKey } from '../graph/constitution-key.js';
import { packGraph, unpackGraph } from '../graph/pack.js';
import type { Evaluator } from '../ranking/evaluator.js';
import { finishRanking } from '../ranking/finish.js';

/** What a run costs on one thread. */
export interface RunRate {
  /** Building, filtering and scoring. */
  readonly secondsPerConstitution: number;
  readonly relativeDeviation: number;
  /** A survivor that enters the list of a shard's best: its key and packed form. */
  readonly secondsPerEntry: number;
  /** A candidate that is kept in the end: its spectra, assignment and remarks. */
  readonly secondsPerDescribed: number;
}

/** A slice of the search is run for so long at most. */
const SLICE_MS = 12;
/** A slice that is over sooner is taken larger: its own setting up would weigh too much. */
const SHORTEST_SLICE_MS = 2;
const ROWS_ABOVE_LEAF = 3;
/** The first slices warm the compiled code up. */
const WARM_UP_SHARE = 1 / 3;
const KEYING_MS = 15;
const DESCRIBING_MS = 90;
/** Measured in 2026-12 on one core of a small server, at ten heavy atoms. */
const TYPICAL_ENTRY_SECONDS = 4e-5;
const TYPICAL_DESCRIBING_SECONDS = 3e-3;
const MOST_SLICES = 400;
/** Stands for "none was finished" where a relative deviation is needed: a factor of about twenty either way. */
const LEAST_BUILT = 0.1;

interface Task {
  readonly evidence: EvidenceDocument;
  readonly settings: RunSettings;
  /** Some constitutions that pass the filters. */
  readonly survivors: readonly ShardCandidate[];
  readonly seed: number;
}

/**
 * Measures the rate of a run by really running slices of it: pieces of the tree around constitutions drawn in proportion to
 * what they stand for, built, filtered and scored as a shard does it.
 *
 * @param isSliced - ends the slices, before `shouldStop` ends the rest.
 */
export function measureRate(
  search: Search,
  evaluator: Evaluator,
  samples: ReadonlyArray<ProbeSample<unknown>>,
  task: Task,
  isSliced: () => boolean,
  shouldStop: () => boolean,
): RunRate {
  const random = createRandom(task.seed + 1);
  const reached = new Float64Array(samples.length);
  let total = 0;
  samples.forEach(({ weight }, k) => (reached[k] = total += weight));
  const open = new Map<number, OpenBranch>();
  const slices: Slice[] = [];
  while (total > 0 && slices.length < MOST_SLICES && (slices.length === 0 || !isSliced())) {
    const sample = samples[firstAtLeast(reached, random() * total)];
    let branch = open.get(sample.branch);
    if (branch === undefined) open.set(sample.branch, (branch = openBranch(search.branches[sample.branch])));
    slices.push(runSlice(branch, evaluator, sample.path));
  }
  const keeping = measureKeeping(task, shouldStop);
  const warm = slices.slice(Math.floor(slices.length * WARM_UP_SHARE));
  const built = warm.reduce((sum, { count }) => sum + count, 0);
  const seconds = warm.reduce((sum, slice) => sum + slice.seconds, 0);
  if (warm.length === 0) return { secondsPerConstitution: 0, relativeDeviation: 0, ...keeping };
  // Of the whole, not the mean of the slices' rates: one slice held up by another process would count for all.
  const rate = seconds / Math.max(1, built);
  const squares = warm.reduce((sum, slice) => sum + (slice.seconds - rate * slice.count) ** 2, 0);
  const spread = warm.length < 2 ? 1 : Math.sqrt((squares * warm.length) / (warm.length - 1)) / seconds;
  // Where slices end with few constitutions, or none, their number is uncertain like any rare count, whatever the spread says.
  const relativeDeviation = Math.sqrt(spread ** 2 + 1 / Math.max(built, LEAST_BUILT));
  return { secondsPerConstitution: rate, relativeDeviation, ...keeping };
}

/** A piece of the search that was really run. */
interface Slice {
  readonly count: number;
  readonly seconds: number;
}

/** Runs the piece of the tree around one constitution. */
function runSlice({ layout, events, judge }: OpenBranch, evaluator: Evaluator, path: ReadonlyArray<readonly number[]>): Slice {
  for (let level = Math.max(0, path.length - ROWS_ABOVE_LEAF); ; level = Math.max(0, level - 2)) {
    const startedMs = performance.now();
    const isOver = (): boolean => performance.now() - startedMs >= SLICE_MS;
    let count = 0;
    fill(layout, level === 0 ? [] : path[level - 1], 0, {
      ...events,
      onLeaf(filled, molecule, mayHaveOtherForms) {
        for (const graph of judge(filled, molecule, mayHaveOtherForms).graphs) {
          count++;
          evaluator.evaluate(graph);
        }
        return (count & 15) === 0 && isOver();
      },
      shouldStop: isOver,
    });
    const elapsedMs = performance.now() - startedMs;
    if (level === 0 || elapsedMs >= SHORTEST_SLICE_MS) return { count, seconds: elapsedMs / 1000 };
  }
}

/** What survivors cost beside being scored. */
function measureKeeping(
  { evidence, settings, survivors }: Task,
  shouldStop: () => boolean,
): Pick<RunRate, 'secondsPerEntry' | 'secondsPerDescribed'> {
  if (survivors.length === 0 || settings.mode === 'count') return { secondsPerEntry: 0, secondsPerDescribed: 0 };
  const graphs = survivors.map(({ packed }) => unpackGraph(packed));
  const { mergeResonanceForms } = evidence.options;
  return {
    secondsPerEntry: typicalSeconds(graphs, TYPICAL_ENTRY_SECONDS, KEYING_MS, shouldStop, (graph) => {
      constitutionKey(graph, mergeResonanceForms);
      packGraph(graph);
    }),
    secondsPerDescribed: typicalSeconds(survivors, TYPICAL_DESCRIBING_SECONDS, DESCRIBING_MS, shouldStop, (survivor) => {
      finishRanking({ evidence, settings, kept: [survivor], logSumExp: 0, funnel: [] });
    }),
  };
}

/**
 * Does a piece of work on one item after the other for a while. The first time does not count: it loads what is needed.
 * @param otherwise - seconds, where the time is over before anything could be measured.
 * @returns seconds an item takes: the quartile on the quick side, for the first ones warm the compiled code up, and some are
 *   held up by other processes
 */
function typicalSeconds<T>(
  items: readonly T[],
  otherwise: number,
  forMs: number,
  shouldStop: () => boolean,
  work: (item: T) => void,
): number {
  if (shouldStop()) return otherwise;
  work(items[0]);
  const times: number[] = [];
  const startedMs = performance.now();
  for (let nowMs = startedMs; nowMs - startedMs < forMs && !shouldStop();) {
    work(items[times.length % items.length]);
    const thenMs = performance.now();
    times.push(thenMs - nowMs);
    nowMs = thenMs;
  }
  if (times.length === 0) return otherwise;
  times.sort((a, b) => a - b);
  return times[times.length >> 2] / 1000;
}

/** Index of the first entry of an ascending list that is not below a value. */
function firstAtLeast(ascending: Float64Array, value: number): number {
  let low = 0;
  let high = ascending.length - 1;
  while (low < high) {
    const middle = (low + high) >> 1;
    if (ascending[middle] < value) low = middle + 1;
    else high = middle;
  }
  return low;
}
