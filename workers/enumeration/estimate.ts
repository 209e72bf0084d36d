import type { MolecularGraph } from '../../shared/types/molecular-graph.js';
import { fill } from './fill.js';
import { openBranch, type OpenBranch } from './open-branch.js';
import { createRandom, descend, type Descent } from './random-descent.js';
import type { Search } from './search.js';

/** A constitution met by chance, with how many constitutions of the search it stands for. */
export interface ProbeSample<T> {
  readonly branch: number;
  readonly weight: number;
  readonly observation: T;
  /** Prefixes from the root of its branch down to it: see Descent. */
  readonly path: ReadonlyArray<readonly number[]>;
}

/** Size of a search with a 95 % interval from the spread of the probes. */
export interface SearchEstimate<T> {
  readonly estimate: number;
  readonly low: number;
  readonly high: number;
  readonly probes: number;
  /** Estimate of each branch and the variance of that; NaN where no probe came. */
  readonly branchSizes: Float64Array;
  readonly branchVariances: Float64Array;
  readonly samples: ReadonlyArray<ProbeSample<T>>;
}

export interface ProbeOptions<T> {
  /** Of the generator; equal seeds give equal probes, of which the clock may end the later ones. */
  readonly seed: number;
  readonly maxProbes: number;
  /** The clock: ends the probing, never steers it. Also asked within a probe. */
  readonly shouldStop: () => boolean;
  /** What is to be remembered of a constitution that was met; the graph is a copy. */
  readonly observe: (graph: MolecularGraph) => T;
}

/** Descents are this many walkers wide where branches are few; with many branches each gets narrow ones, but gets one. */
const MOST_WALKERS = 16;
const WALKERS_FOR_ALL_BRANCHES = 1_500;
/** Descents of a round beside the one that each branch gets. */
const CHOSEN_PER_BRANCH = 2;
const LEAST_CHOSEN = 24;
/** A branch in which nothing was found so far may still hold this share of an average one. */
const EMPTY_BRANCH_SHARE = 0.05;

/** What is known of one branch. */
interface BranchProbes {
  /** Running mean and spread of all its probes: they only choose where to probe. */
  count: number;
  mean: number;
  squares: number;
  visited: number;
  /** Largest weight a leaf of the branch had or would have had. */
  leafWeight: number;
  /** Sums over rounds, weighed by the size of the round: means of the branch, and 1/probes for their variance. */
  size: number;
  inverseProbes: number;
}

/**
 * Estimates the number of constitutions by random descents, stratified over the branches of the search. The first round makes
 * one descent in each; every further round one in each and more where size and spread of the earlier ones are large
 * (Neyman, J. R. Stat. Soc. 1934, 97, 558, for the allocation). A round adds up its own means only, so that it is free of
 * bias whatever the earlier rounds chose, and so is the mean of the rounds.
 */
export function estimateSearch<T>(search: Search, options: ProbeOptions<T>): SearchEstimate<T> {
  const { maxProbes, shouldStop, observe } = options;
  const total = search.branches.length;
  const random = createRandom(options.seed);
  const walkers = Math.max(1, Math.min(MOST_WALKERS, Math.floor(WALKERS_FOR_ALL_BRANCHES / Math.max(1, total))));
  const order = shuffled(total, random);
  const open = new Map<number, OpenBranch>();
  const branches = Array.from({ length: total }, (): BranchProbes => ({
    count: 0,
    mean: 0,
    squares: 0,
    visited: 0,
    leafWeight: 0,
    size: 0,
    inverseProbes: 0,
  }));
  const samples: ProbeSample<T>[] = [];
  let probes = 0;
  let roundWeights = 0;

  // One descent is made however late it is: without any there is nothing to say.
  const isOver = (): boolean => probes > 0 && shouldStop();
  const probe = (d: number): Descent | null => {
    if (probes >= maxProbes || isOver()) return null;
    let branch = open.get(d);
    if (branch === undefined) open.set(d, (branch = openBranch(search.branches[d])));
    const found = descend(branch, walkers, random, isOver);
    if (found === null) return null;
    probes++;
    const known = branches[d];
    known.count++;
    known.visited += found.visited;
    known.leafWeight = Math.max(known.leafWeight, found.leafWeight);
    const delta = found.weight - known.mean;
    known.mean += delta / known.count;
    known.squares += delta * (found.weight - known.mean);
    return found;
  };
  /** @returns false when it was not finished: then it does not count, except for a first one that sampled the branches. */
  const makeRound = (chosen: readonly number[]): boolean => {
    const found: { d: number; descent: Descent }[] = [];
    for (const d of chosen) {
      const descent = probe(d);
      if (descent === null) break;
      found.push({ d, descent });
    }
    const isFinished = found.length === chosen.length;
    if (!isFinished && roundWeights > 0) return false;
    // Known before the round begins, so that it cannot favour rounds that turned out large or small.
    const weight = chosen.length;
    roundWeights += weight;
    const countOf = new Map<number, number>();
    for (const { d } of found) countOf.set(d, (countOf.get(d) ?? 0) + 1);
    for (const [d, count] of countOf) branches[d].inverseProbes += weight ** 2 / count;
    for (const { d, descent } of found) {
      const share = (weight * descent.weight) / countOf.get(d)!;
      branches[d].size += share;
      if (descent.leaf !== null) samples.push({ branch: d, weight: share, observation: observe(descent.leaf), path: descent.path });
    }
    return isFinished;
  };

  if (total > 0 && makeRound(order)) {
    const chosenCount = Math.max(LEAST_CHOSEN, CHOSEN_PER_BRANCH * total);
    while (makeRound([...order, ...chooseBranches(branches, chosenCount, random)]));
  }

  const deviations = deviationsOf(branches);
  const covered = branches.filter(({ count }) => count > 0).length;
  const isCovered = covered === total;
  const scale = covered === 0 ? 0 : total / covered / roundWeights;
  const branchSizes = Float64Array.from(branches, ({ count, size }) => (count === 0 ? NaN : size / roundWeights));
  const branchVariances = Float64Array.from(branches, ({ count, inverseProbes }, d) =>
    count === 0 ? NaN : deviations[d] ** 2 * (inverseProbes / roundWeights ** 2),
  );
  const scaled = samples.map((sample) => ({ ...sample, weight: scale * sample.weight }));
  const estimate = branches.reduce((total, { size }) => total + scale * size, 0);
  const common = { probes, branchSizes, branchVariances, samples: scaled };
  if (estimate === 0) {
    // Every walk died. One leaf in place of a dead end would have counted so much.
    const unseen = branches.reduce((most, { leafWeight, count }) => most + (count === 0 ? 0 : leafWeight / count), 0);
    return { estimate, low: 0, high: total === 0 ? 0 : Math.max(1, (unseen * total) / Math.max(1, covered)), ...common };
  }
  const variance = isCovered ? sum(branchVariances) : varianceOfSampledBranches(branches, total);
  const factor = intervalFactor(Math.sqrt(variance) / estimate, effectiveCount(scaled));
  return { estimate, low: Math.max(1, estimate / factor), high: estimate * factor, ...common };
}

/**
 * Counts the whole search, as long as the clock lets it.
 * @returns constitutions of each branch; null when the clock ended it.
 */
export function countExactly(search: Search, shouldStop: () => boolean): Float64Array | null {
  const sizes = new Float64Array(search.branches.length);
  for (let d = 0; d < sizes.length; d++) {
    if (shouldStop()) return null;
    const { layout, events, judge } = openBranch(search.branches[d]);
    let size = 0;
    const isComplete = fill(layout, [], 0, {
      ...events,
      onLeaf(filled, molecule, mayHaveOtherForms) {
        size += judge(filled, molecule, mayHaveOtherForms).graphs.length;
        return false;
      },
      shouldStop,
    });
    if (!isComplete) return null;
    sizes[d] = size;
  }
  return sizes;
}

/** Draws branches in proportion to what another probe of them takes off the variance for its cost. */
function chooseBranches(branches: readonly BranchProbes[], count: number, random: () => number): number[] {
  const deviations = deviationsOf(branches);
  const merits = branches.map(({ count: probes, visited }, d) => deviations[d] / Math.sqrt(visited / probes + 1));
  const total = sum(merits);
  if (total === 0) return [];
  // Systematic sampling: a branch with merit for two and a half probes gets two or three.
  const chosen: number[] = [];
  let reached = 0;
  let next = random();
  merits.forEach((merit, d) => {
    reached += (merit / total) * count;
    for (; next < reached; next++) chosen.push(d);
  });
  return chosen;
}

/**
 * Standard deviation of one probe in each branch. A handful of probes says little of the spread, so each branch is counted
 * as if it had one more with the relative spread of all branches together.
 */
function deviationsOf(branches: readonly BranchProbes[]): Float64Array {
  let squares = 0;
  let scale = 0;
  let size = 0;
  let seen = 0;
  for (const { count, mean, squares: own } of branches) {
    if (count === 0) continue;
    seen++;
    size += mean;
    squares += own;
    scale += (count - 1) * mean * mean;
  }
  const commonSquare = scale > 0 ? Math.max(0.01, squares / scale) : 1;
  const least = seen === 0 ? 0 : (EMPTY_BRANCH_SHARE * size) / seen;
  return Float64Array.from(branches, ({ count, mean, squares: own }) =>
    count === 0 ? 0 : Math.sqrt((own + commonSquare * Math.max(mean, least) ** 2) / count),
  );
}

/** Variance of the sum when only some branches, drawn at random, were probed. */
function varianceOfSampledBranches(branches: readonly BranchProbes[], total: number): number {
  const means = branches.flatMap(({ count, mean }) => (count === 0 ? [] : [mean]));
  const mean = sum(means) / means.length;
  if (means.length < 2) return (total * mean) ** 2;
  const spread = means.reduce((squares, value) => squares + (value - mean) ** 2, 0) / (means.length - 1);
  return (total * total * spread) / means.length;
}

/** How many equally heavy probes would spread as these do (Kish, Survey Sampling, 1965). */
function effectiveCount(samples: ReadonlyArray<{ readonly weight: number }>): number {
  const weights = samples.reduce((total, { weight }) => total + weight, 0);
  const squares = samples.reduce((total, { weight }) => total + weight * weight, 0);
  return squares === 0 ? 0 : (weights * weights) / squares;
}

/**
 * By how much the ends of a 95 % interval lie above and below an estimate: log-normal, because weights are products, and
 * with the quantile of Student's distribution, because a few heavy probes hide what others of their kind would add.
 */
function intervalFactor(relativeDeviation: number, effective: number): number {
  const freedom = Math.max(2, effective - 1);
  // Within 4 % of the tabulated two-sided quantiles from three degrees of freedom on.
  const quantile = 1.96 + 2.4 / freedom + 3.5 / freedom ** 2;
  return Math.exp(quantile * Math.sqrt(Math.log1p(relativeDeviation ** 2)));
}

function shuffled(count: number, random: () => number): number[] {
  const list = Array.from({ length: count }, (_, i) => i);
  for (let i = count - 1; i > 0; i--) {
    const j = Math.floor(random() * (i + 1));
    [list[i], list[j]] = [list[j], list[i]];
  }
  return list;
}

function sum(values: ArrayLike<number>): number {
  let total = 0;
  for (let i = 0; i < values.length; i++) total += values[i];
  return total;
}
