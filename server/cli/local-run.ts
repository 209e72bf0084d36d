import type { BranchCut, Funnel, RankedCandidate, RunSettings, ShardSpec } from '../../shared/jobs/contract.js';
import { cancelRun, createCounters, readCounter } from '../../shared/jobs/counters.js';
import type { EvidenceDocument } from '../../shared/schemas/evidence.js';
import type { ComputeService } from '../compute/compute-service.js';
import { type MergedShards, ShardMerger } from '../compute/merge-shards.js';
import { InterruptedError } from './cli-error.js';
import type { Interrupt } from './interrupt.js';

/** Outcome of a run without a database. */
export interface LocalRun {
  /** Constitutions that passed every hard constraint. */
  readonly survivorCount: number;
  /** Valence multigraphs before resonance forms are merged and before any filter. */
  readonly multigraphCount: number;
  readonly funnel: Funnel;
  /** Branches cut while building, most frequent reason first. */
  readonly cuts: readonly BranchCut[];
  readonly candidates: readonly RankedCandidate[];
  /** Null when nothing was ranked. */
  readonly noneOfTheseProbability: number | null;
  /** False when a limit or Ctrl-C cut the enumeration short. */
  readonly isComplete: boolean;
  /** What the search left out and why, for people. */
  readonly notes: readonly string[];
  readonly seconds: number;
}

export interface LocalProgress {
  readonly constitutionsSeen: number;
  readonly survivors: number;
  readonly shardsDone: number;
  readonly shardCount: number;
  readonly seconds: number;
}

/** The plan is the same for any number of threads, so that counts and rankings are, too. */
const TARGET_SHARDS = 192;
const PROGRESS_MS = 500;
/** Structures of a list that are written out in one job. */
const LIST_PART = 400;

/**
 * Takes evidence through plan, shards and finish on the compute threads.
 *
 * @param describedCount - how many of the kept candidates to describe, best first
 * @param onProgress - called about twice a second while shards run
 * @throws ComputeFailure, WorkerCrash as the jobs do; InterruptedError when stopped before the plan was made
 */
export async function runLocally(
  compute: ComputeService,
  evidence: EvidenceDocument,
  settings: RunSettings,
  describedCount: number,
  interrupt: Interrupt,
  onProgress?: (progress: LocalProgress) => void,
): Promise<LocalRun> {
  const started = performance.now();
  const seconds = (): number => (performance.now() - started) / 1000;
  const deadlineEpochMs = settings.maxSeconds === null ? null : Date.now() + settings.maxSeconds * 1000;
  const { shards, notes } = await abortable(interrupt, (signal) =>
    compute.runJob('plan', { evidence, settings, targetShards: TARGET_SHARDS }, { signal }),
  );

  const counters = createCounters();
  const merger = new ShardMerger(settings.keep);
  const stopListening = interrupt.onRequest(() => cancelRun(counters));
  const ticker =
    onProgress === undefined
      ? undefined
      : setInterval(
          () =>
            onProgress({
              constitutionsSeen: readCounter(counters, 'constitutionsSeen'),
              survivors: readCounter(counters, 'survivors'),
              shardsDone: merger.shardCount,
              shardCount: shards.length,
              seconds: seconds(),
            }),
          PROGRESS_MS,
        );
  const { maxConstitutions = null } = settings;
  let hasPassedCount = false;
  const constitutionsLeft = (): number | null =>
    maxConstitutions === null ? null : Math.max(0, maxConstitutions - readCounter(counters, 'constitutionsSeen'));
  const isOver = (): boolean => interrupt.isRequested || hasPassedCount || (deadlineEpochMs !== null && Date.now() >= deadlineEpochMs);
  const open: Iterator<ShardSpec> = shards[Symbol.iterator]();
  const work = async (): Promise<void> => {
    for (let next = open.next(); next.done !== true && !isOver(); next = open.next()) {
      const result = await compute.runJob('shard', {
        evidence,
        settings,
        shard: next.value,
        counters,
        deadlineEpochMs,
        maxConstitutions: constitutionsLeft(),
      });
      hasPassedCount ||= result.stoppedBy === 'count';
      merger.add(result);
    }
  };
  try {
    await Promise.all(Array.from({ length: compute.threadCount }, work));
  } finally {
    clearInterval(ticker);
    stopListening();
  }

  const merged = merger.merged();
  const described = await describeBest(compute, evidence, settings, merged, describedCount);
  return {
    survivorCount: merged.survivorCount,
    multigraphCount: merged.multigraphCount,
    funnel: merged.funnel,
    cuts: merged.cuts,
    candidates: described.candidates,
    noneOfTheseProbability: described.noneOfTheseProbability,
    isComplete: merged.complete && merger.shardCount === shards.length,
    notes,
    seconds: seconds(),
  };
}

/**
 * Works out SMILES, spectra and probabilities of the best candidates: those of a ranking in one job, long lists in
 * pieces on all threads.
 */
async function describeBest(
  compute: ComputeService,
  evidence: EvidenceDocument,
  settings: RunSettings,
  { kept, logSumExp, funnel }: MergedShards,
  count: number,
): Promise<Pick<LocalRun, 'candidates' | 'noneOfTheseProbability'>> {
  if (settings.mode === 'count') return { candidates: [], noneOfTheseProbability: null };
  const best = kept.slice(0, count);
  const describe = (part: typeof best) => compute.runJob('finish', { evidence, settings, kept: part, logSumExp, funnel });
  if (settings.mode === 'rank') return describe(best);
  const parts: RankedCandidate[][] = [];
  let next = 0;
  const work = async (): Promise<void> => {
    for (let start = next; start < best.length; start = next) {
      next += LIST_PART;
      parts[start / LIST_PART] = [...(await describe(best.slice(start, start + LIST_PART))).candidates];
    }
  };
  await Promise.all(Array.from({ length: compute.threadCount }, work));
  return { candidates: parts.flat(), noneOfTheseProbability: null };
}

/** Runs a job that knows no flag to stop by: Ctrl-C ends its thread. */
export async function abortable<T>(interrupt: Interrupt, job: (signal: AbortSignal) => Promise<T>): Promise<T> {
  const abort = new AbortController();
  const stopListening = interrupt.onRequest(() => abort.abort());
  try {
    return await job(abort.signal);
  } catch (error) {
    if (interrupt.isRequested) throw new InterruptedError();
    throw error;
  } finally {
    stopListening();
  }
}
