import { addToCounter, isCancelled } from '../../shared/jobs/counters.js';
import type { JobContract, ShardLimit, ShardResult } from '../../shared/jobs/contract.js';
import { enumerateShard } from '../enumeration/search.js';
import { BestCandidates } from './best-candidates.js';
import { FunnelCounter } from './funnel-counter.js';
import { createMemoryGuard } from './memory-guard.js';
import { evaluatorFor, searchFor } from './search-cache.js';

/** Constitutions between two looks at the clock; each can cost up to a millisecond with many fragments. */
const CONSTITUTIONS_BETWEEN_CHECKS = 64;
/** Milliseconds between two looks at the counters, the deadline and the memory. */
const MS_BETWEEN_LOOKS = 20;

/** Enumerates, filters, scores and keeps the best of one shard. Depends on nothing but its input. */
export function runShard(input: JobContract['shard']['input']): ShardResult {
  const { evidence, settings, shard, counters, deadlineEpochMs } = input;
  const startedMs = performance.now();
  const mostConstitutions = input.maxConstitutions ?? settings.maxConstitutions ?? Infinity;
  const isOutOfMemory = createMemoryGuard();
  const search = searchFor(evidence, settings.mode);
  const evaluator = evaluatorFor(evidence, settings);
  const funnel = new FunnelCounter();
  const cuts = new Map<string, { reason: string; text: string; count: number }>();
  const best = settings.mode === 'count' ? null : new BestCandidates(settings.keep, evidence.options.mergeResonanceForms);
  let constitutionCount = 0;
  let multigraphCount = 0;
  let survivors = 0;
  let reportedConstitutions = 0;
  let reportedSurvivors = 0;
  // Running log Σ exp(score), kept as the largest score and the sum relative to it.
  let highest = -Infinity;
  let relativeSum = 0;
  let mustStop = false;
  let stoppedBy: ShardLimit | null = null;
  let untilCheck = CONSTITUTIONS_BETWEEN_CHECKS;
  let nextLookMs = startedMs;

  const look = (): boolean => {
    addToCounter(counters, 'constitutionsSeen', constitutionCount - reportedConstitutions);
    addToCounter(counters, 'survivors', survivors - reportedSurvivors);
    reportedConstitutions = constitutionCount;
    reportedSurvivors = survivors;
    if (mustStop) return true;
    if (deadlineEpochMs !== null && Date.now() >= deadlineEpochMs) stoppedBy = 'time';
    else if (isOutOfMemory()) stoppedBy = 'memory';
    mustStop = stoppedBy !== null || isCancelled(counters);
    return mustStop;
  };
  /** Looks only when some time has passed: the counters are shared, and threads that write them often slow one another. */
  const lookInTime = (): boolean => {
    if (mustStop) return true;
    const nowMs = performance.now();
    if (nowMs < nextLookMs) return false;
    nextLookMs = nowMs + MS_BETWEEN_LOOKS;
    return look();
  };
  const isWhole = enumerateShard(search, shard, {
    onCut({ reason, text }, branches) {
      if (branches === 0) return;
      const cut = cuts.get(reason) ?? { reason, text, count: 0 };
      cut.count += branches;
      cuts.set(reason, cut);
    },
    onMultigraphs(count) {
      multigraphCount += count;
    },
    onConstitution(graph) {
      // One more than allowed shows that the search goes on: it is not counted, and the shard is incomplete.
      if (mustStop || constitutionCount >= mostConstitutions) {
        stoppedBy ??= 'count';
        mustStop = true;
        return;
      }
      constitutionCount++;
      funnel.arrive();
      if (--untilCheck === 0) {
        untilCheck = CONSTITUTIONS_BETWEEN_CHECKS;
        lookInTime();
      }
      const evaluation = evaluator.evaluate(graph);
      if (evaluation.kind === 'rejected') {
        funnel.reject(evaluation.stage, evaluation.reason);
        return;
      }
      survivors++;
      const { score } = evaluation;
      if (score > highest) {
        relativeSum = relativeSum * Math.exp(highest - score) + 1;
        highest = score;
      } else {
        relativeSum += Math.exp(score - highest);
      }
      best?.offer(graph, score, evaluation.terms);
    },
    shouldStop: lookInTime,
    stopRequested: () => mustStop,
  });
  look();
  // Sub-searches that did not fit into memory belong to no shard, so every shard says it.
  if (isWhole && search.isCurtailed) stoppedBy = 'memory';
  const complete = isWhole && !search.isCurtailed;
  return {
    index: shard.index,
    constitutionCount,
    multigraphCount,
    cuts: [...cuts.values()].sort((a, b) => b.count - a.count || (a.reason < b.reason ? -1 : 1)),
    funnel: funnel.funnel(),
    kept: best?.list() ?? [],
    logSumExp: survivors === 0 ? null : highest + Math.log(relativeSum),
    cpuSeconds: (performance.now() - startedMs) / 1000,
    complete,
    ...(complete || stoppedBy === null ? {} : { stoppedBy }),
  };
}
