import { resolveOptions } from '../../shared/chemistry/resolve-options.js';
import type { JobContract, ShardCandidate } from '../../shared/jobs/contract.js';
import type { MolecularGraph } from '../../shared/types/molecular-graph.js';
import { countExactly, estimateSearch, type ProbeSample, type SearchEstimate } from '../enumeration/estimate.js';
import { constitutionKey } from '../graph/constitution-key.js';
import { packGraph } from '../graph/pack.js';
import { listHints, type Observation, Observer } from './estimate-hints.js';
import { evaluatorFor, searchFor } from './search-cache.js';
import { measureRate, type RunRate } from './run-rate.js';

/** Ends of the parts as shares of the time: counting everything, in case it is little; probing; running slices; the rest. */
const COUNTING_SHARE = 0.2;
const PROBING_SHARE = 0.65;
const SLICING_SHARE = 0.88;
/** Even late on a busy machine, and after a long setting up, the probing gets so long. */
const LEAST_MS = 300;
/** Where everything was counted, probes only serve to meet constitutions. */
const PROBES_AFTER_COUNTING = 2_000;
/** Survivors of which the cost of being described is measured. */
const DESCRIBED = 6;
/** What a rate measured in a fraction of a second is off by on the whole run, beside its spread: relative deviation. */
const RATE_DEVIATION = 0.15;
/** Shards of a run, each of which keeps the best for itself: see the queues. */
const SHARDS = 192;

/**
 * Estimates size and cost of a run before it starts, by random probing; within its time whatever the size.
 *
 * @returns constitutions built, survivors of the filters and thread seconds of the whole run (building, filtering, scoring,
 *   describing what is kept), each with a 95 % interval; what further knowledge would help.
 */
export function estimateRun(input: JobContract['estimate']['input']): JobContract['estimate']['output'] {
  const startedMs = performance.now();
  const { evidence, mode, probes, seed, maxSeconds, deadlineEpochMs = null, keep = evidence.options.keep } = input;
  const untilDeadlineMs = deadlineEpochMs === null ? Infinity : deadlineEpochMs - Date.now();

  const settings = { keep, maxSeconds: null, mode };
  const search = searchFor(evidence, mode);
  const evaluator = evaluatorFor(evidence, settings);
  const readyMs = performance.now();
  const timeMs = Math.max(LEAST_MS, Math.min(1000 * maxSeconds, untilDeadlineMs) - (readyMs - startedMs));
  const until = (share: number) => () => performance.now() - readyMs >= share * timeMs;
  const observer = new Observer();
  const someSurvivors: ShardCandidate[] = [];
  const observe = (graph: MolecularGraph): Observation => {
    const evaluation = evaluator.evaluate(graph);
    if (evaluation.kind === 'scored' && someSurvivors.length < DESCRIBED) {
      const key = constitutionKey(graph, evidence.options.mergeResonanceForms);
      someSurvivors.push({ key, packed: packGraph(graph), score: evaluation.score, terms: { ...evaluation.terms } });
    }
    return { ...observer.observe(graph), survives: evaluation.kind === 'scored' };
  };

  const counted = countExactly(search, until(COUNTING_SHARE));
  const probed = estimateSearch(search, {
    seed,
    maxProbes: counted === null ? probes : Math.min(probes, PROBES_AFTER_COUNTING),
    shouldStop: until(PROBING_SHARE),
    observe,
  });
  const size = counted === null ? probed : withCounts(probed, counted);
  const rate = measureRate(
    search,
    evaluator,
    size.samples,
    { evidence, settings, survivors: someSurvivors, seed },
    until(SLICING_SHARE),
    until(1),
  );
  const survivors = estimateSurvivors(size);
  const cost = costOf(size, survivors.estimate, keep, mode, rate);
  return {
    estimate: size.estimate,
    low: size.low,
    high: size.high,
    isExact: counted !== null,
    survivors,
    ...cost,
    hints: mode === 'rank' && counted?.length !== 0 ? listHints(resolveOptions(evidence, mode), search, size) : [],
    probes: probed.probes,
    seconds: (performance.now() - startedMs) / 1000,
  };
}

/** Puts what was counted in the place of what was estimated; samples stand for their branch as before. */
function withCounts(probed: SearchEstimate<Observation>, counted: Float64Array): SearchEstimate<Observation> {
  const estimate = counted.reduce((sum, size) => sum + size, 0);
  const sampled = new Float64Array(counted.length);
  for (const { branch, weight } of probed.samples) sampled[branch] += weight;
  const samples = probed.samples.map((sample): ProbeSample<Observation> => {
    const { branch, weight } = sample;
    return { ...sample, weight: (weight * counted[branch]) / sampled[branch] };
  });
  return {
    ...probed,
    estimate,
    low: estimate,
    high: estimate,
    branchSizes: counted,
    branchVariances: new Float64Array(counted.length),
    samples,
  };
}

/** Constitutions that pass all filters, from the share of those met that did; Wilson's interval over equally heavy samples. */
function estimateSurvivors({ estimate, low, high, samples }: SearchEstimate<Observation>): { estimate: number; low: number; high: number } {
  let all = 0;
  let squares = 0;
  let passed = 0;
  for (const { weight, observation } of samples) {
    all += weight;
    squares += weight * weight;
    if (observation.survives) passed += weight;
  }
  if (all === 0) return { estimate, low: 0, high };
  const count = (all * all) / squares;
  const share = passed / all;
  // Wilson, J. Am. Stat. Assoc. 1927, 22, 209, at 95 %.
  const z = 1.96;
  const middle = (share + (z * z) / (2 * count)) / (1 + (z * z) / count);
  const half = (z * Math.sqrt((share * (1 - share)) / count + (z * z) / (4 * count * count))) / (1 + (z * z) / count);
  return { estimate: share * estimate, low: Math.max(0, middle - half) * low, high: Math.min(1, middle + half) * high };
}

/** Thread seconds of the whole run. */
function costOf(
  size: SearchEstimate<Observation>,
  survivorCount: number,
  keep: number,
  mode: JobContract['estimate']['input']['mode'],
  rate: RunRate,
): { cpuSeconds: number; cpuSecondsLow: number; cpuSecondsHigh: number } {
  const building = size.estimate * rate.secondsPerConstitution;
  // Each shard fills its own list of the best; once it is full, the k-th survivor has the chance keep/k to enter it.
  const perShard = survivorCount / SHARDS;
  const entries = perShard <= keep ? perShard : keep * (1 + Math.log(perShard / keep));
  const keeping = mode === 'count' ? 0 : SHARDS * entries * rate.secondsPerEntry + Math.min(keep, survivorCount) * rate.secondsPerDescribed;
  const cpuSeconds = building + keeping;
  const ofSize = size.estimate > 0 ? Math.log(Math.max(size.high, size.estimate) / size.estimate) : 0;
  const spread = Math.hypot(ofSize, 1.96 * Math.hypot(rate.relativeDeviation, RATE_DEVIATION));
  const factor = Math.exp(spread);
  if (size.estimate === 0) return { cpuSeconds, cpuSecondsLow: 0, cpuSecondsHigh: size.high * rate.secondsPerConstitution };
  return { cpuSeconds, cpuSecondsLow: cpuSeconds / factor, cpuSecondsHigh: cpuSeconds * factor };
}
