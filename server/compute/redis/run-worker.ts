import { FlowProducer, type Job, Queue, Worker } from 'bullmq';
import type { Redis } from 'ioredis';
import type { Logger } from 'pino';
import type { Sequelize } from 'sequelize';
import type { ComputeService } from '../compute-service.js';
import { MAX_CRASHES } from '../run-failure.js';
import { RunStore } from '../run-store.js';
import { HARD_STOP_MS, TARGET_SHARDS } from '../shard-limits.js';
import { finishRun } from './finish-run.js';
import { JobsUnderWay } from './jobs-under-way.js';
import { planRun } from './plan-run.js';
import { DEFAULT_TIMING, type FinishJob, KEY_PREFIX, type PlanJob, type QueueTiming, RUN_QUEUE, type ShardJob } from './run-jobs.js';
import { RunInputs, type RunJobsContext } from './run-jobs-context.js';
import { runShard } from './run-shard.js';

/** Pause before work is asked for again after the connection was lost. */
const RECONNECT_MS = 1_000;

export interface RunWorkerOptions {
  /** Its connection is shared; closing the worker leaves it open. */
  readonly redis: Redis;
  readonly compute: ComputeService;
  readonly sequelize: Sequelize;
  readonly logger: Logger;
  readonly timing?: Partial<QueueTiming>;
  readonly targetShards?: number;
  readonly hardStopMs?: number;
}

export interface RunWorker {
  /** Stops working; what is under way goes back into the queue. */
  close(): Promise<void>;
}

/** Takes jobs of runs from Redis, as many at a time as there are threads. Any number of them may run, on any number of hosts. */
export async function startRunWorker(options: RunWorkerOptions): Promise<RunWorker> {
  const { redis, compute, sequelize, logger } = options;
  const timing = { ...DEFAULT_TIMING, ...options.timing };
  const base = { connection: redis, prefix: KEY_PREFIX };
  const store = new RunStore(sequelize);
  const queue = new Queue(RUN_QUEUE, base);
  const flows = new FlowProducer(base);
  let isClosing = false;
  const underWay = new JobsUnderWay({
    store,
    logger,
    timing,
    hardStopMs: options.hardStopMs ?? HARD_STOP_MS,
    endThread: (jobId) => worker.cancelJob(jobId),
  });
  const context: RunJobsContext = {
    compute,
    store,
    logger,
    queue,
    flows,
    underWay,
    timing,
    inputs: new RunInputs(),
    targetShards: options.targetShards ?? TARGET_SHARDS,
    isClosing: () => isClosing,
  };
  const worker: Worker = new Worker(
    RUN_QUEUE,
    async (job: Job, token?: string, signal?: AbortSignal) => {
      if (job.name === 'plan') return await planRun(context, job as PlanJob, token, signal);
      if (job.name === 'shard') return await runShard(context, job as ShardJob, token, signal);
      return await finishRun(context, job as FinishJob, token, signal);
    },
    {
      ...base,
      concurrency: compute.threadCount,
      lockDuration: timing.lockMs,
      stalledInterval: Math.ceil(timing.lockMs / 2),
      maxStalledCount: MAX_CRASHES - 1,
      runRetryDelay: RECONNECT_MS,
    },
  );
  const onError = (error: Error) => logger.warn({ err: error }, 'the queue on Redis has a fault');
  queue.on('error', onError);
  flows.on('error', onError);
  worker.on('error', onError);
  worker.on('stalled', (jobId) => logger.warn({ jobId }, 'a worker has gone; its job goes to another one'));
  // Somebody else may have the job by now: what we find of it would come second.
  worker.on('lockRenewalFailed', (jobIds) => underWay.abandon(jobIds));
  await worker.waitUntilReady();

  return {
    close: async () => {
      isClosing = true;
      const closed = worker.close();
      underWay.close();
      await closed;
      await Promise.all([queue.close(), flows.close()]);
    },
  };
}
