import { Queue } from 'bullmq';
import type { Redis } from 'ioredis';
import { pino } from 'pino';
import { afterAll, afterEach, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import { ComputeBusy } from '../../../server/compute/compute-service.js';
import type { RunQueue } from '../../../server/compute/queue.js';
import { createBullmqQueue } from '../../../server/compute/redis/bullmq-queue.js';
import { connectRedis, RedisUnreachable } from '../../../server/compute/redis/redis-connection.js';
import { frontOfLine, shardPriorities } from '../../../server/compute/redis/line.js';
import { finishId, KEY_PREFIX, planId, type QueueTiming, readJobId, RUN_QUEUE, shardId } from '../../../server/compute/redis/run-jobs.js';
import { startRunWorker } from '../../../server/compute/redis/run-worker.js';
import { findFreePort } from '../../../server/database/mariadb-process.js';
import { Run } from '../../../server/models/run.js';
import { RunShard } from '../../../server/models/run-shard.js';
import { createTestDatabase, type TestDatabase } from '../../support/database.js';
import { createFakeCompute, type FakeCompute, until } from '../../support/fake-compute.js';
import { createLaboratory, createQueuedRun, createUnknownWithEvidence, type Laboratory } from '../../support/laboratory.js';
import { QUICK } from '../../support/queue-benches.js';
import { hasRedis, startTestRedis, type TestRedis } from '../../support/test-redis.js';

const logger = pino({ level: 'silent' });

/** What only a queue with processes of its own has to cope with; each connection here stands for one of them. */
describe.runIf(hasRedis)('the queue on Redis', () => {
  let server: TestRedis;
  let database: TestDatabase;
  let laboratory: Laboratory;
  let admin: Redis;
  const closing: (() => Promise<unknown> | void)[] = [];

  beforeAll(async () => {
    server = await startTestRedis();
    database = await createTestDatabase();
    laboratory = await createLaboratory();
    admin = await connectRedis(server.url, logger);
  });
  beforeEach(() => admin.flushall());
  afterEach(async () => {
    for (const close of closing.splice(0).reverse()) await close();
    await Run.update({ status: 'cancelled' }, { where: { status: ['queued', 'running'] } });
    await RunShard.destroy({ where: {} });
  });
  afterAll(async () => {
    admin.disconnect();
    await database.drop();
    await server.stop();
  });

  async function openWorker(compute: FakeCompute, timing: Partial<QueueTiming> = {}): Promise<Redis> {
    const redis = await connectRedis(server.url, logger);
    const worker = await startRunWorker({
      redis,
      compute,
      sequelize: database.sequelize,
      logger,
      timing: { ...QUICK, ...timing },
      hardStopMs: 200,
    });
    closing.push(
      () => redis.disconnect(),
      () => worker.close(),
    );
    return redis;
  }
  async function openServer(): Promise<RunQueue> {
    const redis = await connectRedis(server.url, logger);
    const queue = createBullmqQueue({ redis, sequelize: database.sequelize, logger, timing: QUICK });
    closing.push(
      () => redis.disconnect(),
      () => queue.close(),
    );
    await queue.start();
    return queue;
  }
  const createRun = async () => createQueuedRun(laboratory, await createUnknownWithEvidence(laboratory));
  const doneShards = (run: Run) => RunShard.count({ where: { runId: run.id, status: 'done' } });

  it('gives the shard of a worker that fell silent to another one, and counts it once although both finish it', async () => {
    const queue = await openServer();
    const silent = createFakeCompute({ threadCount: 1, shardCount: 3, onShard: (index) => (index === 1 ? 'ignoresFlag' : 'done') });
    const connection = await openWorker(silent);
    const run = await createRun();
    queue.submit(run.id);
    await until(() => silent.started.some(({ index }) => index === 1));
    connection.disconnect(true);
    // ioredis would come back; a cut line does not.
    connection.options.retryStrategy = () => null;
    connection.disconnect();

    const other = createFakeCompute({ threadCount: 1, shardCount: 3 });
    await openWorker(other);
    await until(() => other.started.some(({ index }) => index === 1));
    silent.release();
    await queue.settled(run.id);
    expect(await run.reload()).toMatchObject({ status: 'finished', complete: true, constitutionCount: 3_000, survivorCount: 30 });
  });

  it('goes on while no server is there, and a later one finds the end', async () => {
    const run = await createRun();
    const compute = createFakeCompute({ shardCount: 4, onShard: () => 'waits' });
    const queue = await openServer();
    await openWorker(compute);
    queue.submit(run.id);
    await until(() => compute.started.length === 2);
    await queue.close();
    const pump = setInterval(() => compute.release(), 10);
    await until(async () => (await run.reload()).status === 'finished');
    clearInterval(pump);
    const later = await openServer();
    await later.settled(run.id);
    expect(later.progress(run.id)).toBeNull();
    expect(run.constitutionCount).toBe(4_000);
  });

  it('shows the progress of a run that another server has started', async () => {
    const compute = createFakeCompute({ shardCount: 4, onShard: (index) => (index < 2 ? 'done' : 'waits') });
    await openWorker(compute);
    const [first, second] = [await openServer(), await openServer()];
    const run = await createRun();
    first.submit(run.id);
    await until(() => second.progress(run.id)?.constitutionsSeen === 2_020);
    expect(second.progress(run.id)).toMatchObject({ stage: 'enumerating', shardsDone: 2, shardCount: 4, survivors: 20 });
    await second.cancel(run.id);
    await first.settled(run.id);
    expect((await run.reload()).status).toBe('cancelled');
  });

  it('takes up a run again when Redis has lost its jobs, without doing finished shards again', async () => {
    const compute = createFakeCompute({ threadCount: 1, shardCount: 4, onShard: (index) => (index === 2 ? 'waits' : 'done') });
    await openWorker(compute);
    const queue = await openServer();
    const run = await createRun();
    queue.submit(run.id);
    await until(() => compute.started.length === 3);
    await until(async () => (await doneShards(run)) === 2);
    await admin.flushall();
    const pump = setInterval(() => compute.release(), 10);
    await queue.settled(run.id);
    clearInterval(pump);
    expect(await run.reload()).toMatchObject({ status: 'finished', constitutionCount: 4_000 });
    expect(compute.started.filter(({ index }) => index < 2)).toHaveLength(2);
  });

  it('ends a run whose shard took every worker with it', async () => {
    const queue = await openServer();
    const run = await createRun();
    queue.submit(run.id);
    for (let life = 1; life <= 3; life++) {
      const compute = createFakeCompute({ threadCount: 1, shardCount: 1, onShard: () => 'ignoresFlag' });
      const connection = await openWorker(compute, { lockMs: 400 });
      await until(() => compute.started.length === 1);
      connection.options.retryStrategy = () => null;
      connection.disconnect();
    }
    await openWorker(createFakeCompute({ threadCount: 1, shardCount: 1, onShard: () => 'ignoresFlag' }), { lockMs: 400 });
    await queue.settled(run.id);
    expect(await run.reload()).toMatchObject({ status: 'failed', complete: false, failure: { code: 'workerCrashed' } });
    expect(run.failure?.message).toContain('ended 3 times at the same place');
  });

  it('waits longer before each further attempt', async () => {
    const times: number[] = [];
    const compute = createFakeCompute({
      shardCount: 1,
      onShard: (_index, attempt) => {
        times.push(performance.now());
        return attempt < 3 ? 'crashes' : 'done';
      },
    });
    await openWorker(compute, { backoffMs: 150 });
    const queue = await openServer();
    const run = await createRun();
    queue.submit(run.id);
    await queue.settled(run.id);
    expect((await run.reload()).status).toBe('finished');
    expect(times[1] - times[0]).toBeGreaterThanOrEqual(145);
    expect(times[2] - times[1]).toBeGreaterThanOrEqual(290);
  });

  it('slows down, and does not count it as a failure, when the threads are busy', async () => {
    const compute = createFakeCompute({ shardCount: 2 });
    let refusals = 5;
    const busy: FakeCompute = {
      ...compute,
      runJob: (name, input, options) => {
        if (name === 'shard' && refusals > 0) {
          refusals -= 1;
          return Promise.reject(new ComputeBusy('too many compute jobs are waiting'));
        }
        return compute.runJob(name, input, options);
      },
    };
    await openWorker(busy);
    const queue = await openServer();
    const run = await createRun();
    queue.submit(run.id);
    await queue.settled(run.id);
    expect(refusals).toBe(0);
    expect((await run.reload()).status).toBe('finished');
  });

  it('moves everybody up before the line ends, and keeps their order', async () => {
    const jobs = new Queue(RUN_QUEUE, { connection: admin, prefix: KEY_PREFIX });
    const far = 2 ** 20 + 7;
    for (const [name, priority] of Object.entries({ c: far + 50, a: far, b: far + 1 })) await jobs.add(name, {}, { priority });
    expect(await frontOfLine(jobs)).toBe(1);
    expect((await jobs.getPrioritized(0, -1)).map(({ name, priority }) => [name, priority])).toEqual([
      ['a', 1],
      ['b', 2],
      ['c', 51],
    ]);
    await jobs.close();
  });

  it('leaves nothing of a run behind in Redis', async () => {
    await openWorker(createFakeCompute({ shardCount: 5 }));
    const queue = await openServer();
    const [ended, cancelled] = [await createRun(), await createRun()];
    queue.submit(ended.id);
    await queue.settled(ended.id);
    queue.submit(cancelled.id);
    await queue.cancel(cancelled.id);
    const jobs = new Queue(RUN_QUEUE, { connection: admin, prefix: KEY_PREFIX });
    await until(async () => (await jobs.getJobCountByTypes()) === 0);
    expect(await admin.keys(`*${ended.id}*`)).toEqual([]);
    await until(async () => (await admin.keys(`*${cancelled.id}*`)).length === 0);
    await jobs.close();
  });

  it('says where it has looked when no Redis is there', async () => {
    const port = await findFreePort();
    const connecting = connectRedis(`redis://127.0.0.1:${port}`, logger);
    await expect(connecting).rejects.toThrow(RedisUnreachable);
    await expect(connecting).rejects.toThrow(`REDIS_URL: no Redis answers at 127.0.0.1:${port}`);
  });
});

describe('the jobs of a run', () => {
  it('are found by their ids', () => {
    const runId = '0f9c1c3a-8f0e-4a51-9d8b-2d0f6d2b7c11';
    expect(readJobId(planId(runId))).toEqual({ name: 'plan', runId, index: -1 });
    expect(readJobId(finishId(runId))).toEqual({ name: 'finish', runId, index: -1 });
    expect(readJobId(shardId(runId, 17))).toEqual({ name: 'shard', runId, index: 17 });
    expect(readJobId('repeat')).toBeNull();
  });

  it('stand on the line one spacing after the other, and never beyond its end', () => {
    expect(shardPriorities(5, 1, 3)).toEqual([5, 25, 45]);
    expect(shardPriorities(5, 0.01, 8)).toEqual([5, 5, 5, 6, 6, 6, 6, 6]);
    // Of BullMQ: priorities go up to 2^21 (its documentation), and 0 would come before all others.
    expect(Math.max(...shardPriorities(2 ** 21 - 10, 60, 200))).toBeLessThan(2 ** 21);
  });
});
