import type {
  Funnel,
  JobContract,
  JobName,
  RankedCandidate,
  RunEstimate,
  ShardCandidate,
  ShardResult,
} from '../../shared/jobs/contract.js';
import { addToCounter, isCancelled } from '../../shared/jobs/counters.js';
import { ComputeFailure, type ComputeService, type JobOptions, WorkerCrash } from '../../server/compute/compute-service.js';

/**
 * What a shard does when it is started: give its result, wait for its flag, deadline or `release`, end its thread,
 * ignore its flag until its thread is ended, fail by a fault of its own, or refuse its input.
 */
export type ShardBehaviour = 'done' | 'waits' | 'crashes' | 'ignoresFlag' | 'fails' | 'refuses';

export interface FakeComputeOptions {
  readonly threadCount?: number;
  readonly shardCount?: number;
  /** @param attempt - from 1 */
  readonly onShard?: (index: number, attempt: number) => ShardBehaviour;
  /** Fails `finish` so often before it succeeds. */
  readonly finishCrashes?: number;
  /** Thread seconds a search is said to take, by its formula; without it nobody can tell. */
  readonly expectedSeconds?: (formula: string) => number;
}

export interface FakeCompute extends ComputeService {
  /** Shards started so far, in order. */
  readonly started: { readonly index: number; readonly formula: string }[];
  /** Lets the shards that wait give their result. */
  release(): void;
  /** Answers of the jobs that are not part of a run. */
  readonly answers: { [K in 'explain' | 'predict' | 'estimate']?: JobContract[K]['output'] };
}

/** Size of a run that is over at once. */
export const fakeEstimate: RunEstimate = {
  estimate: 4,
  low: 4,
  high: 4,
  isExact: true,
  survivors: { estimate: 2, low: 1, high: 3 },
  cpuSeconds: 0.1,
  cpuSecondsLow: 0.05,
  cpuSecondsHigh: 0.2,
  hints: [],
  probes: 20,
  seconds: 0.1,
};

const CANDIDATES_PER_SHARD = 3;
const SEEN_PER_SHARD = 1_000;

/** What shard `index` finds: the same every time. Scores of different shards interleave. */
export function fakeShardResult(index: number): ShardResult {
  const kept = Array.from({ length: CANDIDATES_PER_SHARD }, (_, rank): ShardCandidate => {
    const score = -(index % 7) - rank * 1.5;
    return { key: `key-${index}-${rank}`, packed: `C${index + 1}.${rank}`, score, terms: { carbon13: score } };
  });
  const funnel: Funnel = [
    { stage: 'constitutions', entered: SEEN_PER_SHARD, passed: SEEN_PER_SHARD, rejections: [] },
    {
      stage: 'plausibility',
      entered: SEEN_PER_SHARD,
      passed: 10,
      rejections: [{ reason: 'peroxide', text: 'has an O–O bond', count: SEEN_PER_SHARD - 10 }],
    },
  ];
  const logSumExp = Math.log(kept.reduce((sum, { score }) => sum + Math.exp(score), 0));
  return {
    index,
    constitutionCount: SEEN_PER_SHARD,
    multigraphCount: SEEN_PER_SHARD + 1,
    funnel,
    kept,
    logSumExp,
    cpuSeconds: 0.5,
    complete: true,
  };
}

function fakeCandidate(candidate: ShardCandidate, index: number, logSumExp: number | null): RankedCandidate {
  return {
    rank: index + 1,
    key: candidate.key,
    // As many carbons as make the SMILES unique.
    smiles: 'C'.repeat(1 + index),
    idcode: `id-${candidate.key}`,
    probability: logSumExp === null ? 0 : 0.9 * Math.exp(candidate.score - logSumExp),
    score: candidate.score,
    terms: candidate.terms,
    carbonDeviation: index,
    protonDeviation: null,
    spectra: { carbons: [{ atoms: [0], shift: 20 + index, sd: 2, hydrogens: 3, basis: 'alkane increments' }], protons: [] },
    matches: [{ nucleus: '13C', observedIndex: 0, predictedIndexes: [0], deviation: -index, term: -1, remark: null }],
    remarks: [],
  };
}

/** A compute service without threads, whose jobs behave as the test says. */
export function createFakeCompute(options: FakeComputeOptions = {}): FakeCompute {
  const { threadCount = 2, shardCount = 6, onShard = () => 'done' } = options;
  const attempts = new Map<string, number>();
  const started: { index: number; formula: string }[] = [];
  const waiting = new Set<() => void>();
  let finishCrashes = options.finishCrashes ?? 0;
  const answers: FakeCompute['answers'] = {};

  async function runShard(input: JobContract['shard']['input'], signal: AbortSignal | undefined): Promise<ShardResult> {
    const { shard, counters, deadlineEpochMs } = input;
    const id = `${input.evidence.formula}/${shard.index}`;
    const attempt = (attempts.get(id) ?? 0) + 1;
    attempts.set(id, attempt);
    started.push({ index: shard.index, formula: input.evidence.formula });
    const behaviour = onShard(shard.index, attempt);
    const result = fakeShardResult(shard.index);
    addToCounter(counters, 'constitutionsSeen', 10);
    if (behaviour === 'crashes') throw new WorkerCrash('worker exited with code: 1');
    if (behaviour === 'fails') throw new ComputeFailure({ code: 'internal', message: 'the engine lost a bond' });
    if (behaviour === 'refuses')
      throw new ComputeFailure({
        code: 'badInput',
        message: 'the search cannot be started',
        issues: [{ path: 'fragments.required', message: 'too symmetric' }],
      });
    const { maxConstitutions = null } = input;
    if (behaviour === 'done' && maxConstitutions !== null && maxConstitutions < result.constitutionCount) {
      return { ...result, constitutionCount: maxConstitutions, complete: false, stoppedBy: 'count' };
    }
    if (behaviour === 'done') return result;
    return await new Promise((resolve, reject) => {
      const finish = (action: () => void) => {
        clearInterval(watch);
        waiting.delete(release);
        action();
      };
      const release = () => finish(() => resolve(result));
      const cut = (): ShardResult => ({
        ...result,
        constitutionCount: 10,
        multigraphCount: 10,
        funnel: [{ stage: 'constitutions', entered: 10, passed: 10, rejections: [] }],
        complete: false,
      });
      const watch = setInterval(() => {
        if (behaviour === 'ignoresFlag') return;
        if (isCancelled(counters)) finish(() => reject(new ComputeFailure({ code: 'cancelled', message: 'cancelled' })));
        else if (deadlineEpochMs !== null && Date.now() >= deadlineEpochMs) finish(() => resolve(cut()));
      }, 5);
      signal?.addEventListener('abort', () => finish(() => reject(new WorkerCrash('The task has been aborted'))));
      waiting.add(release);
    });
  }

  const handlers: {
    [K in JobName]: (input: JobContract[K]['input'], signal: AbortSignal | undefined) => Promise<JobContract[K]['output']>;
  } = {
    plan: async () => ({
      shards: Array.from({ length: shardCount }, (_, index) => ({
        index,
        nodes: [{ firstDistribution: index, endDistribution: index + 1, prefix: [] }],
      })),
      notes: [],
    }),
    shard: runShard,
    finish: async ({ kept, logSumExp }) => {
      if (finishCrashes > 0) {
        finishCrashes -= 1;
        throw new WorkerCrash('worker exited with code: 1');
      }
      return { candidates: kept.map((candidate, index) => fakeCandidate(candidate, index, logSumExp)), noneOfTheseProbability: 0.1 };
    },
    explain: async () => answer('explain'),
    predict: async () => answer('predict'),
    estimate: async ({ evidence }) => {
      const cpuSeconds = options.expectedSeconds?.(evidence.formula);
      return cpuSeconds === undefined ? answer('estimate') : { ...fakeEstimate, cpuSeconds };
    },
    layout: async ({ smiles }) => ({
      structures: smiles.map((text) => ({
        idcode: `id-${text}`,
        atoms: [...text].map((symbol, index) => ({ symbol, charge: 0, x: index, y: 0 })),
        bonds: [...text].slice(1).map((_, index) => ({ from: index, to: index + 1, order: 1 })),
      })),
    }),
  };
  function answer<K extends keyof FakeCompute['answers']>(name: K): JobContract[K]['output'] {
    const given = answers[name];
    if (given === undefined)
      throw new ComputeFailure({ code: 'badInput', message: 'no answer', issues: [{ path: 'smiles', message: 'expected a structure' }] });
    return given;
  }

  return {
    threadCount,
    started,
    answers,
    release: () => [...waiting].forEach((release) => release()),
    runJob: <K extends JobName>(name: K, input: JobContract[K]['input'], { signal }: JobOptions = {}): Promise<JobContract[K]['output']> =>
      handlers[name](input, signal),
    close: async () => undefined,
  };
}

/** Waits until the condition holds; the test's own time limit ends it otherwise. */
export async function until(condition: () => boolean | Promise<boolean>): Promise<void> {
  while (!(await condition())) await new Promise((resolve) => setTimeout(resolve, 10));
}
