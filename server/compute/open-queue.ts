import type { Logger } from 'pino';
import type { Sequelize } from 'sequelize';
import type { Config } from '../config/config.js';
import type { Shutdown } from '../shutdown.js';
import type { ComputeService } from './compute-service.js';
import { createEmbeddedQueue } from './embedded-queue.js';
import type { RunQueue } from './queue.js';
import { createBullmqQueue } from './redis/bullmq-queue.js';
import { connectRedis } from './redis/redis-connection.js';
import { startRunWorker } from './redis/run-worker.js';

export interface QueueServices {
  readonly config: Pick<Config, 'redisUrl' | 'computeThreads' | 'jobLockSeconds'>;
  readonly compute: ComputeService;
  readonly sequelize: Sequelize;
  readonly logger: Logger;
  readonly shutdown: Shutdown;
}

/**
 * Opens the queue that the settings ask for and takes up the runs that are under way. With Redis the server works on
 * shards like any other worker, unless it has no threads for that.
 */
export async function openQueue({ config, compute, sequelize, logger, shutdown }: QueueServices): Promise<RunQueue> {
  if (config.redisUrl === null) {
    const queue = createEmbeddedQueue({ compute, sequelize, logger });
    shutdown.add('run queue', () => queue.close());
    await queue.start();
    return queue;
  }
  const redis = await connectRedis(config.redisUrl, logger);
  shutdown.add('Redis connection', () => redis.disconnect());
  const timing = { lockMs: config.jobLockSeconds * 1000 };
  const queue = createBullmqQueue({ redis, sequelize, logger, timing });
  shutdown.add('run queue', () => queue.close());
  if (config.computeThreads > 0) {
    const worker = await startRunWorker({ redis, compute, sequelize, logger, timing });
    shutdown.add('run worker', () => worker.close());
  }
  await queue.start();
  return queue;
}
