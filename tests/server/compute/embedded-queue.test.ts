import { pino } from 'pino';
import { afterAll, afterEach, beforeAll, describe, expect, it } from 'vitest';
import { createEmbeddedQueue } from '../../../server/compute/embedded-queue.js';
import type { RunEvent, RunQueue } from '../../../server/compute/queue.js';
import { Candidate } from '../../../server/models/candidate.js';
import { Quota } from '../../../server/models/quota.js';
import { type Run } from '../../../server/models/run.js';
import { RunShard } from '../../../server/models/run-shard.js';
import { UsageEntry } from '../../../server/models/usage-entry.js';
import { createTestDatabase, type TestDatabase } from '../../support/database.js';
import { createFakeCompute, type FakeCompute, fakeShardResult, until } from '../../support/fake-compute.js';
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
const usageOf = async (run: Run) => (await UsageEntry.findOne({ where: { runId: run.id }, rejectOnEmpty: true })).get();
async function runToEnd(queue: RunQueue, run: Run): Promise<Run> {
  queue.submit(run.id);
  await queue.settled(run.id);
  return await run.reload();
}

describe('a run in the embedded queue', () => {
  it('goes from queued to finished with counts, funnel, candidates and its CPU seconds charged', async () => {
    const run = await runToEnd(createQueue(createFakeCompute({ shardCount: 6 })), await createRun());
    expect(run).toMatchObject({
      status: 'finished',
      complete: true,
      constitutionCount: 6_000,
      multigraphCount: 6_006,
      survivorCount: 60,
      keptCount: 10,
      noneOfTheseProbability: 0.1,
      failure: null,
      shardCount: 6,
    });
    expect(run.startedAt).not.toBeNull();
    expect(run.finishedAt).not.toBeNull();
    expect(run.funnel).toEqual([
      { stage: 'constitutions', entered: 6_000, passed: 6_000, rejections: [] },
      { stage: 'plausibility', entered: 6_000, passed: 60, rejections: [{ reason: 'peroxide', text: 'has an O–O bond', count: 5_940 }] },
    ]);
    const best = Array.from({ length: 6 }, (_, index) => fakeShardResult(index).kept)
      .flat()
      .sort((a, b) => b.score - a.score || (a.key < b.key ? -1 : 1))
      .slice(0, 10);
    const candidates = await Candidate.findAll({ where: { runId: run.id }, order: [['rank', 'ASC']] });
    expect(candidates.map(({ idcode }) => idcode)).toEqual(best.map(({ key }) => `id-${key}`));
    expect(run.cpuSeconds).toBeGreaterThanOrEqual(3);
    expect(await usageOf(run)).toMatchObject({ kind: 'settled', cpuSeconds: run.cpuSeconds });
    expect(await RunShard.count({ where: { runId: run.id } })).toBe(0);
  });

  it('ends well when there is nothing to search', async () => {
    const run = await runToEnd(createQueue(createFakeCompute({ shardCount: 0 })), await createRun());
    expect(run).toMatchObject({ status: 'finished', complete: true, constitutionCount: 0, keptCount: 0 });
  });

  it('does a shard again when its thread ended, and counts it once', async () => {
    const compute = createFakeCompute({ shardCount: 4, onShard: (index, attempt) => (index === 2 && attempt < 3 ? 'crashes' : 'done') });
    const run = await runToEnd(createQueue(compute), await createRun());
    expect(compute.started.filter(({ index }) => index === 2)).toHaveLength(3);
    expect(run).toMatchObject({ status: 'finished', constitutionCount: 4_000 });
  });

  it('fails with a readable reason after three crashes of the same shard', async () => {
    const compute = createFakeCompute({ shardCount: 4, onShard: (index) => (index === 2 ? 'crashes' : 'done') });
    const run = await runToEnd(createQueue(compute), await createRun());
    expect(compute.started.filter(({ index }) => index === 2)).toHaveLength(3);
    expect(run).toMatchObject({ status: 'failed', complete: false, keptCount: 0, failure: { code: 'workerCrashed' } });
    expect(run.failure?.message).toContain('ended 3 times at the same place (shard 2)');
    expect((await usageOf(run)).kind).toBe('settled');
  });

  it('fails with the reason when the engine refuses the evidence', async () => {
    const run = await runToEnd(
      createQueue(createFakeCompute({ onShard: (index) => (index === 1 ? 'refuses' : 'waits') })),
      await createRun(),
    );
    expect(run).toMatchObject({
      status: 'failed',
      failure: { code: 'badInput', message: 'the search cannot be started (fragments.required: too symmetric)' },
    });
  });

  it('says that the fault is ours, without its inner details, when the engine fails', async () => {
    const run = await runToEnd(
      createQueue(createFakeCompute({ onShard: (index) => (index === 1 ? 'fails' : 'waits') })),
      await createRun(),
    );
    expect(run).toMatchObject({ status: 'failed', failure: { code: 'internal' } });
    expect(run.failure?.message).not.toContain('lost a bond');
  });

  it('tries the ranking again when its thread ended', async () => {
    expect((await runToEnd(createQueue(createFakeCompute({ finishCrashes: 2 })), await createRun())).status).toBe('finished');
    expect((await runToEnd(createQueue(createFakeCompute({ finishCrashes: 3 })), await createRun())).status).toBe('failed');
  });

  it('is cancelled within a second, keeps its counts and is charged by use', async () => {
    const compute = createFakeCompute({ shardCount: 6, onShard: (index) => (index < 2 ? 'done' : 'waits') });
    const queue = createQueue(compute);
    const run = await createRun();
    queue.submit(run.id);
    await until(() => compute.started.length === 4);
    const asked = performance.now();
    await queue.cancel(run.id);
    expect(performance.now() - asked).toBeLessThan(1_000);
    await run.reload();
    expect(run).toMatchObject({ status: 'cancelled', complete: false, constitutionCount: 2_000, keptCount: 0, failure: null });
    expect(await Candidate.count({ where: { runId: run.id } })).toBe(0);
    expect(run.cpuSeconds).toBeGreaterThanOrEqual(1);
    expect(await usageOf(run)).toMatchObject({ kind: 'settled', cpuSeconds: run.cpuSeconds });
  });

  it('is cancelled at once while it waits for its turn', async () => {
    const compute = createFakeCompute({ threadCount: 1, onShard: () => 'waits' });
    const queue = createQueue(compute);
    const [first, second] = [await createRun(), await createRun()];
    queue.submit(first.id);
    await until(() => compute.started.length === 1);
    queue.submit(second.id);
    await queue.cancel(second.id);
    expect(await second.reload()).toMatchObject({ status: 'cancelled', constitutionCount: null, cpuSeconds: 0 });
    expect(compute.started).toHaveLength(1);
    await queue.cancel(first.id);
  });

  it('ends the thread of a shard that does not listen', async () => {
    const compute = createFakeCompute({ onShard: () => 'ignoresFlag' });
    const queue = createQueue(compute, 50);
    const run = await createRun();
    queue.submit(run.id);
    await until(() => compute.started.length === 2);
    await queue.cancel(run.id);
    expect((await run.reload()).status).toBe('cancelled');
  });

  it('stops at the time limit and ranks what it has by then', async () => {
    const compute = createFakeCompute({ shardCount: 8, onShard: (index) => (index < 3 ? 'done' : 'waits') });
    const run = await runToEnd(createQueue(compute), await createRun({ settings: { keep: 10, maxSeconds: 1 } }));
    expect(run).toMatchObject({ status: 'stopped', complete: false, failure: { code: 'timeLimit' } });
    // Three whole shards, and what the two under way had seen.
    expect(run.constitutionCount).toBe(3_020);
    expect(run.keptCount).toBeGreaterThan(0);
    expect(await Candidate.count({ where: { runId: run.id } })).toBe(run.keptCount);
  });

  it('leaves out a shard that overruns the time limit until its thread is ended', async () => {
    const compute = createFakeCompute({ shardCount: 3, onShard: (index) => (index === 1 ? 'ignoresFlag' : 'done') });
    const run = await runToEnd(createQueue(compute, 50), await createRun({ settings: { keep: 10, maxSeconds: 1 } }));
    expect(run).toMatchObject({ status: 'stopped', complete: false, constitutionCount: 2_000 });
    expect(compute.started.filter(({ index }) => index === 1)).toHaveLength(1);
  });

  it('stops when the CPU seconds of the month are used up', async () => {
    const { id: teamId } = laboratory.team;
    const spender = laboratory.people.lead;
    await Quota.create({ teamId, userId: spender.id, cpuSecondsPerMonth: 2, candidatesPerRun: null, runsAtOnce: null });
    const compute = createFakeCompute({ shardCount: 8, onShard: (index) => (index < 5 ? 'done' : 'waits') });
    const run = await runToEnd(createQueue(compute), await createRun({ reservedCpuSeconds: 1, startedBy: spender }));
    expect(run).toMatchObject({ status: 'stopped', complete: false, failure: { code: 'quotaUsedUp' }, constitutionCount: 5_000 });
    expect(run.keptCount).toBeGreaterThan(0);
    await Quota.destroy({ where: { teamId } });
  });

  it('goes on beyond what was reserved as long as the quota has more', async () => {
    const compute = createFakeCompute({ shardCount: 8, onShard: (index) => (index < 5 ? 'done' : 'waits') });
    const queue = createQueue(compute);
    const run = await createRun({ reservedCpuSeconds: 1 });
    queue.submit(run.id);
    await until(async () => (await usageOf(run)).cpuSeconds > 1);
    compute.release();
    await until(() => compute.started.length === 8);
    compute.release();
    await queue.settled(run.id);
    expect((await run.reload()).status).toBe('finished');
  });

  it('shares the threads between teams', async () => {
    const other = await createLaboratory();
    const compute = createFakeCompute({ threadCount: 1, shardCount: 5, onShard: () => 'waits' });
    const queue = createQueue(compute);
    const busy = await createQueuedRun(laboratory, await createUnknownWithEvidence(laboratory, { formula: 'C6H12O' }));
    queue.submit(busy.id);
    await until(() => compute.started.length === 1);
    const late = await createQueuedRun(other, await createUnknownWithEvidence(other, { formula: 'C5H10O' }));
    queue.submit(late.id);
    const pump = setInterval(() => compute.release(), 10);
    await Promise.all([queue.settled(busy.id), queue.settled(late.id)]);
    clearInterval(pump);
    const order = compute.started.map(({ formula }) => formula);
    expect(order.lastIndexOf('C5H10O')).toBeGreaterThan(order.indexOf('C5H10O'));
    // The late run has had all its shards when the busy one, which was first, has only just had its last.
    expect(order.slice(0, 7).filter((formula) => formula === 'C5H10O').length).toBeGreaterThanOrEqual(2);
  });

  it('tells progress at least once a second, and every change of status', async () => {
    const compute = createFakeCompute({ shardCount: 4, onShard: (index) => (index < 2 ? 'done' : 'waits') });
    const queue = createQueue(compute);
    const run = await createRun();
    const events: { readonly event: RunEvent; readonly at: number }[] = [];
    queue.subscribe(run.id, (event) => events.push({ event, at: performance.now() }));
    queue.submit(run.id);
    await new Promise((resolve) => setTimeout(resolve, 2_200));
    const progress = queue.progress(run.id);
    expect(progress).toMatchObject({ stage: 'enumerating', shardsDone: 2, shardCount: 4, constitutionsSeen: 2_020, survivors: 20 });
    expect(progress?.ratePerSecond).toBeGreaterThan(0);
    expect(progress?.secondsLeft).toBeGreaterThan(0);
    compute.release();
    await queue.settled(run.id);
    const times = events.filter(({ event }) => event.kind === 'progress').map(({ at }) => at);
    for (let i = 1; i < times.length; i++) expect(times[i] - times[i - 1]).toBeLessThan(1_000);
    expect(events.filter(({ event }) => event.kind === 'changed')).toHaveLength(2);
    expect(queue.progress(run.id)).toBeNull();
  });
});

describe('a restart', () => {
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

  it('starts a queued run from the beginning', async () => {
    const run = await createRun();
    const queue = createQueue(createFakeCompute());
    await queue.start();
    await queue.settled(run.id);
    expect((await run.reload()).status).toBe('finished');
  });

  it('ends a run whose cancellation was asked for before the server went down', async () => {
    const run = await createRun();
    await run.update({ cancelRequestedAt: new Date() });
    const queue = createQueue(createFakeCompute());
    await queue.start();
    await queue.settled(run.id);
    expect((await run.reload()).status).toBe('cancelled');
  });

  it('marks a run interrupted when its plan is of another version', async () => {
    const run = await createRun();
    await run.update({ status: 'running', startedAt: new Date(), shardCount: 1 });
    await RunShard.create({ teamId: run.teamId, runId: run.id, index: 0, spec: { index: 0 } as RunShard['spec'] });
    await createQueue(createFakeCompute()).start();
    expect(await run.reload()).toMatchObject({ status: 'interrupted', failure: { code: 'planOutdated' } });
    expect((await usageOf(run)).kind).toBe('settled');
  });

  it('marks a run interrupted when its evidence cannot be read any more', async () => {
    const run = await createRun();
    await run.update({ status: 'running', evidence: { formula: 7 } as unknown as Run['evidence'] });
    await createQueue(createFakeCompute()).start();
    expect(await run.reload()).toMatchObject({ status: 'interrupted', failure: { code: 'evidenceUnreadable' } });
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
