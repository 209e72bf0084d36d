import {
  type BranchCut,
  FUNNEL_STAGES,
  type Funnel,
  type FunnelStage,
  type ShardCandidate,
  type ShardLimit,
  type ShardResult,
} from '../../shared/jobs/contract.js';

/** What the shards of a run say together. */
export interface MergedShards {
  readonly constitutionCount: number;
  readonly multigraphCount: number;
  readonly funnel: Funnel;
  /** Branches cut while building, most frequent reason first. */
  readonly cuts: readonly BranchCut[];
  /** Best first; ties by key. */
  readonly kept: readonly ShardCandidate[];
  readonly logSumExp: number | null;
  readonly cpuSeconds: number;
  readonly survivorCount: number;
  /** False as soon as one shard was cut short. */
  readonly complete: boolean;
  /** A limit that cut a shard short; null when none did, or a cancellation. */
  readonly stoppedBy: ShardLimit | null;
}

/** Total order of candidates: higher score first, then by key, so that no order of arrival shows in a ranking. */
export function compareCandidates(a: Pick<ShardCandidate, 'score' | 'key'>, b: Pick<ShardCandidate, 'score' | 'key'>): number {
  if (a.score !== b.score) return b.score - a.score;
  return a.key < b.key ? -1 : a.key > b.key ? 1 : 0;
}

/**
 * Gathers the results of a run's shards in whatever order they arrive. A shard counts once, however often it
 * ran: a second result for the same index is ignored. Counts and lists do not depend on the order, down to the
 * last bit of the log-sum-exp.
 */
export class ShardMerger {
  readonly #keep: number;
  readonly #seen = new Set<number>();
  readonly #steps = new Map<FunnelStage, { entered: number; passed: number; rejections: Map<string, { text: string; count: number }> }>();
  readonly #logSumExpByShard = new Map<number, number>();
  #kept: ShardCandidate[] = [];
  #constitutionCount = 0;
  #multigraphCount = 0;
  #survivorCount = 0;
  #cpuByShard = new Map<number, number>();
  #complete = true;
  #stoppedBy: ShardLimit | null = null;
  readonly #cuts = new Map<string, { text: string; count: number }>();

  /** @param keep - how many candidates stay, at least 1 */
  constructor(keep: number) {
    this.#keep = keep;
  }

  get shardCount(): number {
    return this.#seen.size;
  }
  get constitutionCount(): number {
    return this.#constitutionCount;
  }
  get survivorCount(): number {
    return this.#survivorCount;
  }
  get cpuSeconds(): number {
    return sumInOrder(this.#cpuByShard);
  }

  has(shardIndex: number): boolean {
    return this.#seen.has(shardIndex);
  }

  /** Tells which of a shard's candidates can still be among the best `keep`; the others need not be stored. */
  contenders(candidates: readonly ShardCandidate[]): ShardCandidate[] {
    const last = this.#kept.length >= this.#keep ? this.#kept[this.#keep - 1] : undefined;
    return last === undefined ? [...candidates] : candidates.filter((candidate) => compareCandidates(candidate, last) < 0);
  }

  /** @returns false when this shard was counted before */
  add(result: ShardResult): boolean {
    if (this.#seen.has(result.index)) return false;
    this.#seen.add(result.index);
    this.#constitutionCount += result.constitutionCount;
    this.#multigraphCount += result.multigraphCount;
    this.#survivorCount += countSurvivors(result.funnel, result.constitutionCount);
    this.#cpuByShard.set(result.index, result.cpuSeconds);
    this.#complete &&= result.complete;
    this.#stoppedBy ??= result.stoppedBy ?? null;
    for (const { reason, text, count } of result.cuts ?? []) {
      const cut = this.#cuts.get(reason);
      if (cut) cut.count += count;
      else this.#cuts.set(reason, { text, count });
    }
    if (result.logSumExp !== null) this.#logSumExpByShard.set(result.index, result.logSumExp);
    this.#addFunnel(result.funnel);
    this.#kept = mergeSorted(this.#kept, [...this.contenders(result.kept)].sort(compareCandidates), this.#keep);
    return true;
  }

  merged(): MergedShards {
    return {
      constitutionCount: this.#constitutionCount,
      multigraphCount: this.#multigraphCount,
      funnel: this.#funnel(),
      cuts: listByCount(this.#cuts),
      kept: this.#kept,
      logSumExp: logSumExpInOrder(this.#logSumExpByShard),
      cpuSeconds: this.cpuSeconds,
      survivorCount: this.#survivorCount,
      complete: this.#complete,
      stoppedBy: this.#stoppedBy,
    };
  }

  #addFunnel(funnel: Funnel): void {
    for (const step of funnel) {
      const total = this.#steps.get(step.stage) ?? { entered: 0, passed: 0, rejections: new Map() };
      this.#steps.set(step.stage, total);
      total.entered += step.entered;
      total.passed += step.passed;
      for (const { reason, text, count } of step.rejections) {
        const rejection = total.rejections.get(reason);
        if (rejection) rejection.count += count;
        else total.rejections.set(reason, { text, count });
      }
    }
  }

  #funnel(): Funnel {
    return FUNNEL_STAGES.flatMap((stage) => {
      const step = this.#steps.get(stage);
      if (!step) return [];
      return [{ stage, entered: step.entered, passed: step.passed, rejections: listByCount(step.rejections) }];
    });
  }
}

/** Counts by reason as a list, most frequent first. */
function listByCount(countByReason: ReadonlyMap<string, { text: string; count: number }>): BranchCut[] {
  return [...countByReason]
    .map(([reason, { text, count }]) => ({ reason, text, count }))
    .sort((a, b) => b.count - a.count || (a.reason < b.reason ? -1 : 1));
}

/** Survivors are what the last stage of a funnel let through. */
export function countSurvivors(funnel: Funnel, constitutionCount: number): number {
  return funnel.at(-1)?.passed ?? constitutionCount;
}

/** Merges two lists ordered by `compareCandidates` and keeps the first `keep`. */
function mergeSorted(a: readonly ShardCandidate[], b: readonly ShardCandidate[], keep: number): ShardCandidate[] {
  const merged: ShardCandidate[] = [];
  let i = 0;
  let j = 0;
  while (merged.length < keep) {
    const left = a[i];
    const right = b[j];
    if (left !== undefined && (right === undefined || compareCandidates(left, right) <= 0)) {
      merged.push(left);
      i += 1;
    } else if (right !== undefined) {
      merged.push(right);
      j += 1;
    } else break;
  }
  return merged;
}

// Floating-point addition depends on the order; going by shard index makes it the same on one worker or forty.
function inShardOrder(valueByShard: ReadonlyMap<number, number>): number[] {
  return [...valueByShard].sort(([a], [b]) => a - b).map(([, value]) => value);
}
function sumInOrder(valueByShard: ReadonlyMap<number, number>): number {
  return inShardOrder(valueByShard).reduce((sum, value) => sum + value, 0);
}
/** log Σ exp(value), shifted by the largest value so that nothing overflows; null without values. */
function logSumExpInOrder(valueByShard: ReadonlyMap<number, number>): number | null {
  const values = inShardOrder(valueByShard);
  if (values.length === 0) return null;
  const largest = values.reduce((max, value) => Math.max(max, value), -Infinity);
  return largest + Math.log(values.reduce((sum, value) => sum + Math.exp(value - largest), 0));
}
