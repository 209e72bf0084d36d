import { pino } from 'pino';
import { ConnectionError } from 'sequelize';
import { createComputePool } from './compute/pool.js';
import { connectRedis } from './compute/redis/redis-connection.js';
import { startRunWorker } from './compute/redis/run-worker.js';
import type { WorkerConfig } from './config/worker-config.js';
import { connectDatabase } from './database/connect.js';
import { createMigrator } from './database/migrate.js';
import { initModels } from './models/init-models.js';
import type { Shutdown } from './shutdown.js';

/** The database is not there, or not that of this version. */
export class DatabaseNotReady extends Error {
  override readonly name = 'DatabaseNotReady';
}

/** A process that works on shards and nothing else: database, Redis, threads. */
export async function startWorker(config: WorkerConfig, shutdown: Shutdown): Promise<void> {
  const logger = pino({ level: config.logLevel });
  const sequelize = connectDatabase(config.databaseUrl);
  shutdown.add('database connections', () => sequelize.close());
  await requireSchema(sequelize);
  initModels(sequelize);
  const redis = await connectRedis(config.redisUrl, logger);
  shutdown.add('Redis connection', () => redis.disconnect());
  const compute = createComputePool({
    threads: config.computeThreads,
    shardHeapMegabytes: config.shardMemoryMegabytes,
    onFault: (error) => logger.error({ err: error }, 'compute thread failed'),
  });
  shutdown.add('compute threads', () => compute.close());
  const worker = await startRunWorker({ redis, compute, sequelize, logger, timing: { lockMs: config.jobLockSeconds * 1000 } });
  shutdown.add('run worker', () => worker.close());
}

/** The server alone changes the schema. */
async function requireSchema(sequelize: ReturnType<typeof connectDatabase>): Promise<void> {
  try {
    const pending = await createMigrator(sequelize).pending();
    if (pending.length > 0)
      throw new DatabaseNotReady('The database is not that of this version yet: start the server first, then the worker.');
  } catch (error) {
    if (error instanceof ConnectionError) throw new DatabaseNotReady(`DATABASE_URL: no database answers there (${error.message}).`);
    throw error;
  }
}
