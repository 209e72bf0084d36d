import { pino } from 'pino';
import type { Sequelize } from 'sequelize';
import type { ComputeService } from '../../server/compute/compute-service.js';
import { createEmbeddedQueue } from '../../server/compute/embedded-queue.js';
import type { RunQueue } from '../../server/compute/queue.js';
import { createBullmqQueue } from '../../server/compute/redis/bullmq-queue.js';
import { connectRedis } from '../../server/compute/redis/redis-connection.js';
import type { QueueTiming } from '../../server/compute/redis/run-jobs.js';
import { startRunWorker } from '../../server/compute/redis/run-worker.js';
import { startTestRedis } from './test-redis.js';

export interface BenchOptions {
  readonly compute: ComputeService;
  readonly sequelize: Sequelize;
  readonly hardStopMs?: number;
}

/** A queue with everything that works for it in this process. */
export interface OpenQueue {
  readonly queue: RunQueue;
  /** As at the end of a server: what is under way is given back. */
  readonly close: () => Promise<void>;
}

export interface QueueBench {
  readonly open: (options: BenchOptions) => Promise<OpenQueue>;
  readonly stop: () => Promise<void>;
}

/** Everything that takes seconds in earnest takes a fraction of one here. */
export const QUICK: QueueTiming = { lockMs: 1_000, backoffMs: 20, progressMs: 400, lookMs: 100, upkeepMs: 1_000 };
const logger = pino({ level: 'silent' });

export async function createEmbeddedBench(): Promise<QueueBench> {
  return {
    open: async (options) => {
      const queue = createEmbeddedQueue({ ...options, logger });
      await queue.start();
      return { queue, close: () => queue.close() };
    },
    stop: async () => undefined,
  };
}

export async function createRedisBench(): Promise<QueueBench> {
  const server = await startTestRedis();
  return {
    open: async (options) => {
      const redis = await connectRedis(server.url, logger);
      const worker = await startRunWorker({ ...options, redis, logger, timing: QUICK });
      const queue = createBullmqQueue({ redis, sequelize: options.sequelize, logger, timing: QUICK });
      await queue.start();
      return {
        queue,
        close: async () => {
          await worker.close();
          await queue.close();
          redis.disconnect();
        },
      };
    },
    stop: server.stop,
  };
}
