import { type ChildProcess, spawn } from 'node:child_process';
import { once } from 'node:events';
import { mkdtemp, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join, resolve } from 'node:path';
import { QueueEvents } from 'bullmq';
import { pino } from 'pino';
import { afterAll, afterEach, beforeAll, describe, expect, it } from 'vitest';
import { createEmbeddedQueue } from '../../../server/compute/embedded-queue.js';
import { createComputePool } from '../../../server/compute/pool.js';
import { createBullmqQueue } from '../../../server/compute/redis/bullmq-queue.js';
import { connectRedis } from '../../../server/compute/redis/redis-connection.js';
import { KEY_PREFIX, RUN_QUEUE } from '../../../server/compute/redis/run-jobs.js';
import { findFreePort } from '../../../server/database/mariadb-process.js';
import { Candidate } from '../../../server/models/candidate.js';
import type { Run } from '../../../server/models/run.js';
import { RunShard } from '../../../server/models/run-shard.js';
import { createTestDatabase, type TestDatabase } from '../../support/database.js';
import { until } from '../../support/fake-compute.js';
import { createLaboratory, createQueuedRun, createUnknownWithEvidence, type Laboratory } from '../../support/laboratory.js';
import { hasRedis, startTestRedis } from '../../support/test-redis.js';

/**
 * Real processes with the real engine, killed while they work: nothing but the time it takes may differ from a run that
 * nobody disturbed. The shifts are invented; they only have to leave some work to do.
 */
const evidence = {
  formula: 'C7H12O2',
  carbonSignals: [166.7, 130.5, 128.3, 64.5, 30.8, 19.3, 13.7].map((shift) => ({ shift })),
};
const SETTINGS = { keep: 100, maxSeconds: null };
const root = resolve(import.meta.dirname, '../../..');
const logger = pino({ level: 'silent' });

let database: TestDatabase;
let laboratory: Laboratory;
let undisturbed: Record<string, unknown>;
const children: ChildProcess[] = [];

beforeAll(async () => {
  database = await createTestDatabase();
  laboratory = await createLaboratory();
  const compute = createComputePool({ threads: 2 });
  const queue = createEmbeddedQueue({ compute, sequelize: database.sequelize, logger });
  const run = await createRun();
  queue.submit(run.id);
  await queue.settled(run.id);
  await queue.close();
  await compute.close();
  undisturbed = await resultOf(run);
}, 120_000);
afterEach(async () => {
  for (const child of children.splice(0)) {
    if (child.exitCode !== null || child.signalCode !== null) continue;
    const exited = once(child, 'exit');
    child.kill('SIGKILL');
    await exited;
  }
});
afterAll(() => database.drop());

const createRun = async () => createQueuedRun(laboratory, await createUnknownWithEvidence(laboratory, evidence), { settings: SETTINGS });

/** Everything that people see of a result, down to the last digit. */
async function resultOf(run: Run): Promise<Record<string, unknown>> {
  const { status, complete, failure, constitutionCount, multigraphCount, survivorCount, keptCount, ...rest } = (await run.reload()).get();
  const { funnel, logSumExp, noneOfTheseProbability } = rest;
  const candidates = await Candidate.findAll({ where: { runId: run.id }, order: [['rank', 'ASC']], raw: true });
  return {
    ...{
      status,
      complete,
      failure,
      constitutionCount,
      multigraphCount,
      survivorCount,
      keptCount,
      funnel,
      logSumExp,
      noneOfTheseProbability,
    },
    candidates: candidates.map((candidate) => ({ ...candidate, id: null, runId: null })),
  };
}

/** Starts a program of the product from its sources. */
function start(program: string, environment: Readonly<Record<string, string>>): ChildProcess {
  const inherited = Object.fromEntries(Object.entries(process.env).filter(([name]) => /^(PATH|HOME|LANG|TZ|TMPDIR)$/.test(name)));
  const child = spawn(process.execPath, ['--import', 'tsx', join(root, program)], {
    cwd: root,
    env: { ...inherited, DATABASE_URL: database.url, COMPUTE_THREADS: '1', ...environment },
    stdio: ['ignore', 'pipe', 'inherit'],
  });
  children.push(child);
  return child;
}
async function printed(child: ChildProcess, text: string): Promise<void> {
  let output = '';
  child.stdout?.on('data', (chunk: Buffer) => (output += chunk.toString()));
  await until(() => {
    if (child.exitCode !== null) throw new Error(`ended with code ${child.exitCode}: ${output}`);
    return output.includes(text);
  });
}
async function killInMidRun(child: ChildProcess, run: Run): Promise<void> {
  const done = () => RunShard.count({ where: { runId: run.id, status: 'done' } });
  await until(async () => (await done()) >= 4);
  const exited = once(child, 'exit');
  child.kill('SIGKILL');
  await exited;
  await run.reload();
  expect(run.status).toBe('running');
  expect(await done()).toBeLessThan(run.shardCount);
}

describe('a process killed in the middle of a run', () => {
  it('is worth killing: the run finds a good number of structures and ranks some', () => {
    expect(undisturbed).toMatchObject({ status: 'finished', complete: true, failure: null });
    expect(undisturbed.constitutionCount).toBeGreaterThan(5_000);
    expect(undisturbed.candidates).toHaveLength(100);
  });

  it('changes nothing with the embedded queue: the next server goes on', { timeout: 90_000 }, async () => {
    const directory = await mkdtemp(join(tmpdir(), 'isoloom-killed-'));
    const environment = { ISOLOOM_DATA_DIR: directory, DEMO: 'false', ADMIN_EMAIL: 'admin@laboratory.test', LOG_LEVEL: 'error' };
    const startServer = async () => start('server/main.ts', { ...environment, PORT: String(await findFreePort()) });
    const run = await createRun();
    await killInMidRun(await startServer(), run);
    await startServer();
    await until(async () => (await run.reload()).finishedAt !== null);
    expect(await resultOf(run)).toEqual(undisturbed);
    await rm(directory, { recursive: true, force: true });
  });

  it.runIf(hasRedis)('changes nothing with the queue on Redis: another worker does its shard', { timeout: 90_000 }, async () => {
    const server = await startTestRedis();
    const redis = await connectRedis(server.url, logger);
    const events = new QueueEvents(RUN_QUEUE, { connection: redis, prefix: KEY_PREFIX });
    await events.waitUntilReady();
    const stalled: string[] = [];
    events.on('stalled', ({ jobId }) => stalled.push(jobId));
    const queue = createBullmqQueue({ redis, sequelize: database.sequelize, logger });
    await queue.start();
    const environment = { REDIS_URL: server.url, JOB_LOCK_SECONDS: '1' };
    const [killed, other] = [start('server/worker.ts', environment), start('server/worker.ts', environment)];
    await Promise.all([killed, other].map((worker) => printed(worker, 'Isoloom worker')));

    const run = await createRun();
    queue.submit(run.id);
    await killInMidRun(killed, run);
    await queue.settled(run.id);
    expect(stalled.length).toBeGreaterThanOrEqual(1);
    expect(await resultOf(run)).toEqual(undisturbed);

    const exited = once(other, 'exit');
    other.kill('SIGTERM');
    expect(await exited).toEqual([0, null]);
    await queue.close();
    await events.close();
    redis.disconnect();
    await server.stop();
  });
});
