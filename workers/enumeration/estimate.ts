import { createLayout } from './distributions.js';
import { fill } from './fill.js';
import { createLeafJudge } from './leaf-judge.js';
import { createPartialChecks } from './partial-checks.js';
import { rowEvents, type Search } from './search.js';

/** Size of a search with a 95 % interval from the spread of the probes. */
export interface SearchEstimate {
  readonly estimate: number;
  readonly low: number;
  readonly high: number;
  /** Thread seconds the whole enumeration would take at the speed seen while probing. */
  readonly cpuSeconds: number;
  readonly probes: number;
}

/** Student quantile of a two-sided 95 % interval at five degrees of freedom: a distribution gets only a handful of probes. */
const T_95 = 2.57;

/**
 * Estimates the number of constitutions by random probing: walk down the tree choosing one child at random, weigh what
 * is reached by the number of children passed (Knuth, Math. Comp. 1975, 29, 121). Distributions are drawn at random, in
 * proportion to their number; the first rounds cover each at least once where there is time.
 *
 * @param seed - of the generator; equal seeds give equal walks. @param clock - returns ms; ends the probing, never steers it.
 */
export function estimateSearch(search: Search, maxProbes: number, seed: number, maxSeconds: number, clock: () => number): SearchEstimate {
  const total = search.distributions.length;
  if (total === 0) return { estimate: 0, low: 0, high: 0, cpuSeconds: 0, probes: 0 };
  const random = createRandom(seed);
  const startedMs = clock();
  const order = shuffled(total, random);
  let probes = 0;
  let nodes = 0;
  let mean = 0;
  let squares = 0;
  const sumOf = new Map<number, { sum: number; squares: number; count: number }>();
  while (probes < maxProbes && (probes < 8 || (clock() - startedMs) / 1000 < maxSeconds)) {
    const d = order[probes % total];
    const { weight, visited } = probe(search, d, random);
    nodes += visited;
    probes++;
    const known = sumOf.get(d) ?? { sum: 0, squares: 0, count: 0 };
    known.sum += weight;
    known.squares += weight * weight;
    known.count++;
    sumOf.set(d, known);
    const delta = weight - mean;
    mean += delta / probes;
    squares += delta * (weight - mean);
  }
  const seconds = Math.max((clock() - startedMs) / 1000, 1e-6);
  let estimate: number;
  let deviation: number;
  if (sumOf.size === total && probes >= 2 * total) {
    // Every distribution was probed: add their means, which spreads less than probing the mixture.
    estimate = 0;
    let variance = 0;
    for (const { sum, squares: square, count } of sumOf.values()) {
      estimate += sum / count;
      if (count > 1) variance += Math.max(0, square / count - (sum / count) ** 2) / (count - 1);
    }
    deviation = Math.sqrt(variance);
  } else {
    estimate = total * mean;
    deviation = total * Math.sqrt(probes > 1 ? squares / (probes - 1) / probes : mean * mean);
  }
  // The spread of a few heavy-tailed walks understates the truth: the upper end is widened on the log scale.
  const relative = estimate > 0 ? deviation / estimate : 0;
  const factor = Math.exp(T_95 * Math.sqrt(Math.log(1 + relative * relative)));
  const perNode = seconds / Math.max(nodes, 1);
  return { estimate, low: estimate / factor, high: estimate * factor, cpuSeconds: estimate * perNode, probes };
}

/** One random walk; weight is an unbiased estimate of the constitutions below the distribution. */
function probe(search: Search, d: number, random: () => number): { weight: number; visited: number } {
  const layout = createLayout(search.problem, search.distributions[d]);
  const judge = createLeafJudge(search.problem, layout);
  const events = rowEvents(createPartialChecks(search.problem, layout), {});
  let prefix: number[] = [];
  let factor = 1;
  let weight = 0;
  let visited = 0;
  for (let rows = 1; ; rows++) {
    // Leaves above the stop row are met in full at this level: they count with the present factor.
    let children = 0;
    let chosen: number[] | null = null;
    fill(layout, prefix, rows, {
      ...events,
      onLeaf(filled) {
        visited++;
        weight += factor * judge(filled).graphs.length;
        return false;
      },
      onPrefix(child) {
        visited++;
        children++;
        // Reservoir of one: each child is chosen with equal chance without a list.
        if (random() * children < 1) chosen = child;
      },
      shouldStop: () => false,
    });
    if (chosen === null) return { weight, visited };
    factor *= children;
    prefix = chosen;
  }
}

/** Mulberry32, a small seeded generator; uniform in [0, 1). */
function createRandom(seed: number): () => number {
  let state = seed >>> 0;
  return () => {
    state = (state + 0x6d2b79f5) >>> 0;
    let t = Math.imul(state ^ (state >>> 15), state | 1);
    t ^= t + Math.imul(t ^ (t >>> 7), t | 61);
    return ((t ^ (t >>> 14)) >>> 0) / 4294967296;
  };
}

function shuffled(count: number, random: () => number): number[] {
  const list = Array.from({ length: count }, (_, i) => i);
  for (let i = count - 1; i > 0; i--) {
    const j = Math.floor(random() * (i + 1));
    [list[i], list[j]] = [list[j], list[i]];
  }
  return list;
}
