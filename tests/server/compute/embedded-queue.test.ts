import { pino } from 'pino';
import { afterAll, afterEach, beforeAll, describe, expect, it } from 'vitest';
import { createEmbeddedQueue } from '../../../server/compute/embedded-queue.js';
import type { RunQueue } from '../../../server/compute/queue.js';
import { Candidate } from '../../../server/models/candidate.js';
import { type Run } from '../../../server/models/run.js';
import { RunShard } from '../../../server/models/run-shard.js';
import { createTestDatabase, type TestDatabase } from '../../support/database.js';
import { createFakeCompute, type FakeCompute, until } from '../../support/fake-compute.js';
import { createLaboratory, createQueuedRun, createUnknownWithEvidence, type Laboratory } from '../../support/laboratory.js';

let database: TestDatabase;
let laboratory: Laboratory;
const queues: RunQueue[] = [];

beforeAll(async () => {
  database = await createTestDatabase();
  laboratory = await createLaboratory();
});
afterEach(async () => {
  await Promise.all(queues.splice(0).map((queue) => queue.close()));
  await RunShard.destroy({ where: {} });
});
afterAll(() => database.drop());

function createQueue(compute: FakeCompute, hardStopMs = 5_000): RunQueue {
  const queue = createEmbeddedQueue({ compute, sequelize: database.sequelize, logger: pino({ level: 'silent' }), hardStopMs });
  queues.push(queue);
  return queue;
}
/** Stands for a killed process: it neither writes nor says anything more. */
function kill(queue: RunQueue): void {
  queues.splice(queues.indexOf(queue), 1);
}
const createRun = async (options: Parameters<typeof createQueuedRun>[2] = {}) =>
  createQueuedRun(laboratory, await createUnknownWithEvidence(laboratory), options);
async function runToEnd(queue: RunQueue, run: Run): Promise<Run> {
  queue.submit(run.id);
  await queue.settled(run.id);
  return await run.reload();
}

describe('a restart of the server with the embedded queue', () => {
  it('goes on with a run that was given back, without doing its finished shards again', async () => {
    const first = createFakeCompute({ shardCount: 6, onShard: (index) => (index < 3 ? 'done' : 'waits') });
    const before = createQueue(first);
    const run = await createRun();
    before.submit(run.id);
    await until(async () => (await RunShard.count({ where: { runId: run.id, status: 'done' } })) === 3);
    await before.close();
    expect((await run.reload()).status).toBe('queued');

    const second = createFakeCompute({ shardCount: 6 });
    const after = createQueue(second);
    await after.start();
    await after.settled(run.id);
    expect(second.started.map(({ index }) => index).sort()).toEqual([3, 4, 5]);
    const whole = await runToEnd(createQueue(createFakeCompute({ shardCount: 6 })), await createRun());
    await run.reload();
    expect(run).toMatchObject({ status: 'finished', complete: true, constitutionCount: 6_000 });
    expect(run.logSumExp).toBe(whole.logSumExp);
    const ranking = async ({ id }: Run) =>
      (await Candidate.findAll({ where: { runId: id }, order: [['rank', 'ASC']] })).map(({ idcode, probability }) => ({
        idcode,
        probability,
      }));
    expect(await ranking(run)).toEqual(await ranking(whole));
  });

  it('goes on with a run whose server was killed', async () => {
    const first = createFakeCompute({ shardCount: 5, onShard: (index) => (index < 2 ? 'done' : 'ignoresFlag') });
    const before = createQueue(first);
    const run = await createRun();
    before.submit(run.id);
    await until(async () => (await RunShard.count({ where: { runId: run.id, status: 'done' } })) === 2);
    kill(before);
    expect((await run.reload()).status).toBe('running');

    const second = createFakeCompute({ shardCount: 5 });
    const after = createQueue(second);
    await after.start();
    await after.settled(run.id);
    expect(second.started.map(({ index }) => index).sort()).toEqual([2, 3, 4]);
    expect(await run.reload()).toMatchObject({ status: 'finished', constitutionCount: 5_000 });
  });

  it('gives up a run that was under way every time the server was killed', async () => {
    const run = await createRun();
    for (let start = 1; start <= 3; start++) {
      const compute = createFakeCompute({ onShard: () => 'ignoresFlag' });
      const queue = createQueue(compute);
      await queue.start();
      await until(() => compute.started.length === 2);
      kill(queue);
    }
    const queue = createQueue(createFakeCompute());
    await queue.start();
    expect(await run.reload()).toMatchObject({ status: 'interrupted', failure: { code: 'interruptedTooOften' } });
  });

  it('does not count the time between two processes against the time limit', async () => {
    const run = await createRun({ settings: { keep: 10, maxSeconds: 5 } });
    const first = createFakeCompute({ shardCount: 3, onShard: (index) => (index === 0 ? 'done' : 'ignoresFlag') });
    const before = createQueue(first);
    before.submit(run.id);
    await until(async () => (await RunShard.count({ where: { runId: run.id, status: 'done' } })) === 1);
    kill(before);
    // As if the server had been down for an hour.
    await run.reload();
    await run.update({ startedAt: new Date(run.startedAt!.getTime() - 3_600_000) });
    await RunShard.update({ finishedAt: new Date(run.startedAt!.getTime() + 200) }, { where: { runId: run.id, status: 'done' } });
    const after = createQueue(createFakeCompute({ shardCount: 3 }));
    await after.start();
    await after.settled(run.id);
    expect(await run.reload()).toMatchObject({ status: 'finished', complete: true });
  });
});
