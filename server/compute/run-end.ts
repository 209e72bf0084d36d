import type { RankedCandidate } from '../../shared/jobs/contract.js';
import type { MergedShards } from './merge-shards.js';
import type { RunEnd } from './run-store.js';
import type { RunFailure, Stop } from './run-stop.js';

export interface EndDescription {
  readonly merged: MergedShards;
  /** Without a plan there are no counts either. */
  readonly isPlanned: boolean;
  readonly stop: Stop | null;
  readonly candidates: readonly RankedCandidate[];
  readonly noneOfTheseProbability: number | null;
  /** CPU seconds beside the merged shards: planning, finishing, attempts that came to nothing. */
  readonly otherCpuSeconds: number;
}

/** How a run ends by what its shards found and by what stopped it. */
export function describeEnd({ merged, isPlanned, stop, candidates, noneOfTheseProbability, otherCpuSeconds }: EndDescription): RunEnd {
  const isCut = stop !== null || !merged.complete;
  return {
    status: stop === null || stop.kind === 'limit' ? (isCut ? 'stopped' : 'finished') : stop.kind,
    complete: !isCut,
    constitutionCount: isPlanned ? merged.constitutionCount : null,
    multigraphCount: isPlanned ? merged.multigraphCount : null,
    survivorCount: isPlanned ? merged.survivorCount : null,
    funnel: isPlanned ? merged.funnel : null,
    cuts: isPlanned ? merged.cuts : null,
    logSumExp: merged.logSumExp,
    noneOfTheseProbability,
    candidates,
    cpuSeconds: merged.cpuSeconds + otherCpuSeconds,
    failure: stop !== null && 'code' in stop ? { code: stop.code, message: stop.message } : null,
  };
}

/** The end of a run that nobody can go on with. */
export function endWithoutResult(status: 'interrupted' | 'failed', failure: RunFailure, cpuSeconds: number): RunEnd {
  return {
    status,
    complete: false,
    constitutionCount: null,
    multigraphCount: null,
    survivorCount: null,
    funnel: null,
    cuts: null,
    logSumExp: null,
    noneOfTheseProbability: null,
    candidates: [],
    failure,
    cpuSeconds,
  };
}
