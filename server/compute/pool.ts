import { availableParallelism } from 'node:os';
import { Piscina } from 'piscina';
import type { JobContract, JobName, JobResult } from '../../shared/jobs/contract.js';
import { ComputeBusy, type ComputeService, ComputeFailure, type JobOptions, WorkerCrash } from './compute-service.js';

export interface PoolOptions {
  /** Threads that work on shards. Default: one per core. */
  readonly threads?: number;
  /** Threads give way to the rest of the machine: for a server that answers people meanwhile. */
  readonly isYielding?: boolean;
  /** URL of the worker entry. Default: workers/main beside the server. */
  readonly workerUrl?: URL;
  /** Heap in which a shard ends itself, incomplete; MB. */
  readonly shardHeapMegabytes?: number;
  /** Called for faults of a thread that belong to no job, so that they reach the log. */
  readonly onFault?: (error: Error) => void;
}

/** Jobs that people wait for while looking at the screen. They have a thread of their own, so that a long run never holds them up. */
const INTERACTIVE_JOBS: ReadonlySet<JobName> = new Set(['explain', 'predict', 'estimate', 'layout']);
/** A shard keeps its memory flat; one that needs more than this has gone astray and ends itself with what it has found. */
const SHARD_HEAP_MEGABYTES = 512;
/** A thread that goes on past that is ended: it must not take the server with it. */
const THREAD_HEAP_RATIO = 1.5;
const MAX_WAITING_JOBS = 256;
const MAX_WAITING_INTERACTIVE_JOBS = 64;
const IDLE_THREAD_MS = 60_000;

/** Starts the threads of the built (or, in development, the TypeScript) workers. */
export function createComputePool(options: PoolOptions = {}): ComputeService {
  const threadCount = Math.max(1, options.threads ?? availableParallelism());
  const onFault = options.onFault ?? (() => undefined);
  const shardHeapMegabytes = options.shardHeapMegabytes ?? SHARD_HEAP_MEGABYTES;
  const shards = new JobThreads({
    isYielding: options.isYielding ?? false,
    workerUrl: options.workerUrl ?? defaultWorkerUrl(),
    threads: threadCount,
    maxQueue: MAX_WAITING_JOBS,
    shardHeapMegabytes,
    onFault,
  });
  const interactive = new JobThreads({
    isYielding: false,
    workerUrl: options.workerUrl ?? defaultWorkerUrl(),
    threads: 1,
    maxQueue: MAX_WAITING_INTERACTIVE_JOBS,
    shardHeapMegabytes,
    onFault,
  });

  return {
    threadCount,
    runJob: (name, input, jobOptions) => (INTERACTIVE_JOBS.has(name) ? interactive : shards).run(name, input, jobOptions),
    close: async () => {
      await Promise.all([shards.destroy(), interactive.destroy()]);
    },
  };
}

function defaultWorkerUrl(): URL {
  const extension = import.meta.url.endsWith('.ts') ? '.ts' : '.js';
  return new URL(`../../workers/main${extension}`, import.meta.url);
}

/** One piscina pool whose jobs always settle, also when a thread cannot even load its file. */
class JobThreads {
  readonly #piscina: Piscina;
  readonly #pending = new Set<(error: Error) => void>();

  constructor(options: {
    workerUrl: URL;
    threads: number;
    maxQueue: number;
    isYielding: boolean;
    shardHeapMegabytes: number;
    onFault: (error: Error) => void;
  }) {
    this.#piscina = new Piscina({
      filename: options.workerUrl.href,
      minThreads: 0,
      maxThreads: options.threads,
      maxQueue: options.maxQueue,
      idleTimeout: IDLE_THREAD_MS,
      resourceLimits: { maxOldGenerationSizeMb: Math.max(64, Math.ceil(options.shardHeapMegabytes * THREAD_HEAP_RATIO)) },
      // The built server needs no loader; from TypeScript sources every thread needs its own.
      env: {
        ...process.env,
        ISOLOOM_SHARD_HEAP_MB: String(options.shardHeapMegabytes),
        ...(options.isYielding ? { ISOLOOM_YIELDING_THREADS: '1' } : {}),
      },
      execArgv: options.workerUrl.pathname.endsWith('.ts') ? ['--import', new URL('./typescript-loader.mjs', import.meta.url).href] : [],
    });
    this.#piscina.on('error', (error: Error) => {
      options.onFault(error);
      // A thread that failed outside a job (mostly: while loading) leaves its jobs waiting for ever: hand them back.
      for (const reject of [...this.#pending]) reject(new WorkerCrash(`a compute thread failed: ${error.message}`));
    });
  }

  async run<K extends JobName>(name: K, input: JobContract[K]['input'], { signal }: JobOptions = {}): Promise<JobContract[K]['output']> {
    const result = await new Promise<JobResult<JobContract[K]['output']>>((resolve, reject) => {
      const settle = (action: () => void) => {
        this.#pending.delete(rejectPending);
        action();
      };
      const rejectPending = (error: Error) => settle(() => reject(error));
      this.#pending.add(rejectPending);
      this.#piscina.run(input, { name, ...(signal ? { signal } : {}) }).then(
        (value: JobResult<JobContract[K]['output']>) => settle(() => resolve(value)),
        (error: unknown) => settle(() => reject(translate(error))),
      );
    });
    if (!result.ok) throw new ComputeFailure(result.failure);
    return result.value;
  }

  destroy(): Promise<void> {
    return this.#piscina.destroy();
  }
}

/** Handlers answer failures as data, so whatever is thrown means that the thread or the pool gave up. */
function translate(error: unknown): Error {
  const message = error instanceof Error ? error.message : String(error);
  return message === 'Task queue is at limit' || message === 'No task queue available and all Workers are busy'
    ? new ComputeBusy('too many compute jobs are waiting; try again in a moment')
    : new WorkerCrash(message);
}
