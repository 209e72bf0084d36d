import { afterAll, afterEach, beforeAll, describe, expect, it } from 'vitest';
import type { RunEvent, RunQueue } from '../../../server/compute/queue.js';
import { Candidate } from '../../../server/models/candidate.js';
import { Quota } from '../../../server/models/quota.js';
import { Run } from '../../../server/models/run.js';
import { RunShard } from '../../../server/models/run-shard.js';
import { UsageEntry } from '../../../server/models/usage-entry.js';
import { createTestDatabase, type TestDatabase } from '../../support/database.js';
import { createFakeCompute, type FakeCompute, fakeShardResult, until } from '../../support/fake-compute.js';
import { createLaboratory, createQueuedRun, createUnknownWithEvidence, type Laboratory } from '../../support/laboratory.js';
import { createEmbeddedBench, createRedisBench, type OpenQueue, type QueueBench } from '../../support/queue-benches.js';
import { hasRedis } from '../../support/test-redis.js';

/** What every queue has to do, with jobs that do as the test says. */
const implementations: readonly [string, () => Promise<QueueBench>, boolean][] = [
  ['the embedded queue', createEmbeddedBench, true],
  ['the queue on Redis', createRedisBench, hasRedis],
];

describe.each(implementations)('%s', (_name, createBench, canRun) => {
  describe.runIf(canRun)('carries', () => {
    let database: TestDatabase;
    let bench: QueueBench;
    let laboratory: Laboratory;
    const open: OpenQueue[] = [];

    beforeAll(async () => {
      bench = await createBench();
      database = await createTestDatabase();
      laboratory = await createLaboratory();
    });
    afterEach(async () => {
      await Promise.all(open.splice(0).map((queue) => queue.close()));
      await Run.update({ status: 'cancelled' }, { where: { status: ['queued', 'running'] } });
      await RunShard.destroy({ where: {} });
    });
    afterAll(async () => {
      await database.drop();
      await bench.stop();
    });

    async function openQueue(compute: FakeCompute, hardStopMs = 5_000): Promise<RunQueue> {
      const opened = await bench.open({ compute, sequelize: database.sequelize, hardStopMs });
      open.push(opened);
      return opened.queue;
    }
    /** As when the process that has opened it ends in good order. */
    async function closeQueue(): Promise<void> {
      await Promise.all(open.splice(0).map((queue) => queue.close()));
    }
    const createRun = async (options: Parameters<typeof createQueuedRun>[2] = {}, formula = 'C4H10O') =>
      createQueuedRun(laboratory, await createUnknownWithEvidence(laboratory, { formula }), options);
    const usageOf = async (run: Run) => (await UsageEntry.findOne({ where: { runId: run.id }, rejectOnEmpty: true })).get();
    const rankingOf = async ({ id }: Run) =>
      (await Candidate.findAll({ where: { runId: id }, order: [['rank', 'ASC']] })).map(({ idcode, probability }) => ({
        idcode,
        probability,
      }));
    async function runToEnd(queue: RunQueue, run: Run): Promise<Run> {
      queue.submit(run.id);
      await queue.settled(run.id);
      return await run.reload();
    }

    describe('a run', () => {
      it('goes from queued to finished with counts, funnel, candidates and its CPU seconds charged', async () => {
        const run = await runToEnd(await openQueue(createFakeCompute({ shardCount: 6 })), await createRun());
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
          {
            stage: 'plausibility',
            entered: 6_000,
            passed: 60,
            rejections: [{ reason: 'peroxide', text: 'has an O–O bond', count: 5_940 }],
          },
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
        const run = await runToEnd(await openQueue(createFakeCompute({ shardCount: 0 })), await createRun());
        expect(run).toMatchObject({ status: 'finished', complete: true, constitutionCount: 0, keptCount: 0 });
      });

      it('does a shard again when its thread ended, and counts it once', async () => {
        const compute = createFakeCompute({
          shardCount: 4,
          onShard: (index, attempt) => (index === 2 && attempt < 3 ? 'crashes' : 'done'),
        });
        const run = await runToEnd(await openQueue(compute), await createRun());
        expect(compute.started.filter(({ index }) => index === 2)).toHaveLength(3);
        expect(run).toMatchObject({ status: 'finished', constitutionCount: 4_000 });
      });

      it('fails with a readable reason after three crashes of the same shard', async () => {
        const compute = createFakeCompute({ shardCount: 4, onShard: (index) => (index === 2 ? 'crashes' : 'done') });
        const run = await runToEnd(await openQueue(compute), await createRun());
        expect(compute.started.filter(({ index }) => index === 2)).toHaveLength(3);
        expect(run).toMatchObject({ status: 'failed', complete: false, keptCount: 0, failure: { code: 'workerCrashed' } });
        expect(run.failure?.message).toContain('ended 3 times at the same place (shard 2)');
        expect((await usageOf(run)).kind).toBe('settled');
      });

      it('fails with the reason when the engine refuses the evidence', async () => {
        const run = await runToEnd(
          await openQueue(createFakeCompute({ onShard: (index) => (index === 1 ? 'refuses' : 'waits') })),
          await createRun(),
        );
        expect(run).toMatchObject({
          status: 'failed',
          failure: { code: 'badInput', message: 'the search cannot be started (fragments.required: too symmetric)' },
        });
      });

      it('says that the fault is ours, without its inner details, when the engine fails', async () => {
        const run = await runToEnd(
          await openQueue(createFakeCompute({ onShard: (index) => (index === 1 ? 'fails' : 'waits') })),
          await createRun(),
        );
        expect(run).toMatchObject({ status: 'failed', failure: { code: 'internal' } });
        expect(run.failure?.message).not.toContain('lost a bond');
      });

      it('tries the ranking again when its thread ended', async () => {
        expect((await runToEnd(await openQueue(createFakeCompute({ finishCrashes: 2 })), await createRun())).status).toBe('finished');
        await closeQueue();
        expect((await runToEnd(await openQueue(createFakeCompute({ finishCrashes: 3 })), await createRun())).status).toBe('failed');
      });

      it('is cancelled within a second, keeps its counts and is charged by use', async () => {
        const compute = createFakeCompute({ shardCount: 6, onShard: (index) => (index < 2 ? 'done' : 'waits') });
        const queue = await openQueue(compute);
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
        const queue = await openQueue(compute);
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
        const queue = await openQueue(compute, 50);
        const run = await createRun();
        queue.submit(run.id);
        await until(() => compute.started.length === 2);
        await queue.cancel(run.id);
        expect((await run.reload()).status).toBe('cancelled');
      });

      it('stops at the time limit and ranks what it has by then', async () => {
        const compute = createFakeCompute({ shardCount: 8, onShard: (index) => (index < 3 ? 'done' : 'waits') });
        const run = await runToEnd(await openQueue(compute), await createRun({ settings: { keep: 10, maxSeconds: 1 } }));
        expect(run).toMatchObject({ status: 'stopped', complete: false, failure: { code: 'timeLimit' } });
        // Three whole shards, and what the two under way had seen.
        expect(run.constitutionCount).toBe(3_020);
        expect(run.keptCount).toBeGreaterThan(0);
        expect(await Candidate.count({ where: { runId: run.id } })).toBe(run.keptCount);
      });

      it('stops when it has found more than it may, and ranks what it has', async () => {
        const compute = createFakeCompute({ threadCount: 1, shardCount: 8 });
        const settings = { keep: 10, maxSeconds: null, maxConstitutions: 3_500 };
        const run = await runToEnd(await openQueue(compute), await createRun({ settings }));
        expect(run).toMatchObject({ status: 'stopped', complete: false, failure: { code: 'countLimit' }, constitutionCount: 3_500 });
        expect(compute.started.length).toBeLessThanOrEqual(5);
        expect(await Candidate.count({ where: { runId: run.id } })).toBe(10);
      });

      it('leaves out a shard that overruns the time limit until its thread is ended', async () => {
        const compute = createFakeCompute({ shardCount: 3, onShard: (index) => (index === 1 ? 'ignoresFlag' : 'done') });
        const run = await runToEnd(await openQueue(compute, 50), await createRun({ settings: { keep: 10, maxSeconds: 1 } }));
        expect(run).toMatchObject({ status: 'stopped', complete: false, constitutionCount: 2_000 });
        expect(compute.started.filter(({ index }) => index === 1)).toHaveLength(1);
      });

      it('stops when the CPU seconds of the month are used up', async () => {
        const { id: teamId } = laboratory.team;
        const spender = laboratory.people.lead;
        await Quota.create({ teamId, userId: spender.id, cpuSecondsPerMonth: 2, candidatesPerRun: null, runsAtOnce: null });
        const compute = createFakeCompute({ shardCount: 8, onShard: (index) => (index < 5 ? 'done' : 'waits') });
        const run = await runToEnd(await openQueue(compute), await createRun({ reservedCpuSeconds: 1, startedBy: spender }));
        expect(run).toMatchObject({ status: 'stopped', complete: false, failure: { code: 'quotaUsedUp' }, constitutionCount: 5_000 });
        expect(run.keptCount).toBeGreaterThan(0);
        await Quota.destroy({ where: { teamId } });
      });

      it('goes on beyond what was reserved as long as the quota has more', async () => {
        const compute = createFakeCompute({ shardCount: 8, onShard: (index) => (index < 5 ? 'done' : 'waits') });
        const queue = await openQueue(compute);
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
        const queue = await openQueue(compute);
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
        const queue = await openQueue(compute);
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

    describe('small runs', () => {
      it('do not wait for a large run of their team', async () => {
        const compute = createFakeCompute({
          threadCount: 1,
          shardCount: 12,
          onShard: () => 'waits',
          expectedSeconds: (formula) => (formula === 'C9H10O2' ? 3_600 : 0.5),
        });
        const queue = await openQueue(compute);
        const large = await createRun({}, 'C9H10O2');
        queue.submit(large.id);
        await until(() => compute.started.length === 1);
        const small = await createRun({}, 'C4H10O');
        queue.submit(small.id);
        const pump = setInterval(() => compute.release(), 20);
        await Promise.all([queue.settled(small.id), queue.settled(large.id)]);
        clearInterval(pump);
        const formulas = compute.started.map(({ formula }) => formula);
        const before = formulas.slice(0, formulas.lastIndexOf('C4H10O'));
        // One was under way, others may be taken before the sizes are known.
        expect(before.filter((formula) => formula === 'C9H10O2').length).toBeLessThanOrEqual(3);
        expect((await large.reload()).status).toBe('finished');
      });
    });

    describe('a restart', () => {
      it('goes on where the run was, with the same result as without', async () => {
        const first = createFakeCompute({ shardCount: 6, onShard: (index) => (index < 3 ? 'done' : 'waits') });
        const run = await createRun();
        (await openQueue(first)).submit(run.id);
        await until(async () => (await RunShard.count({ where: { runId: run.id, status: 'done' } })) === 3);
        await closeQueue();

        const second = createFakeCompute({ shardCount: 6 });
        const after = await openQueue(second);
        await after.settled(run.id);
        expect(second.started.map(({ index }) => index).sort()).toEqual([3, 4, 5]);
        const whole = await runToEnd(after, await createRun());
        await run.reload();
        expect(run).toMatchObject({ status: 'finished', complete: true, constitutionCount: 6_000, survivorCount: 60 });
        expect(run.logSumExp).toBe(whole.logSumExp);
        expect(run.funnel).toEqual(whole.funnel);
        expect(await rankingOf(run)).toEqual(await rankingOf(whole));
      });

      it('does not do a shard again whose result was written just before the end, and counts it once', async () => {
        const run = await createRun();
        (await openQueue(createFakeCompute({ shardCount: 4, onShard: (index) => (index < 1 ? 'done' : 'waits') }))).submit(run.id);
        await until(async () => (await RunShard.count({ where: { runId: run.id, status: 'done' } })) === 1);
        await closeQueue();
        await RunShard.update(
          { status: 'done', result: fakeShardResult(2), finishedAt: new Date() },
          { where: { runId: run.id, index: 2 } },
        );

        const compute = createFakeCompute({ shardCount: 4 });
        await (await openQueue(compute)).settled(run.id);
        expect(compute.started.map(({ index }) => index).sort()).toEqual([1, 3]);
        expect(await run.reload()).toMatchObject({ status: 'finished', constitutionCount: 4_000 });
      });

      it('starts a queued run from the beginning', async () => {
        const run = await createRun();
        const queue = await openQueue(createFakeCompute());
        await queue.settled(run.id);
        expect((await run.reload()).status).toBe('finished');
      });

      it('ends a run whose cancellation was asked for before', async () => {
        const run = await createRun();
        await run.update({ cancelRequestedAt: new Date() });
        const queue = await openQueue(createFakeCompute());
        await queue.settled(run.id);
        expect((await run.reload()).status).toBe('cancelled');
      });

      it('marks a run interrupted when its plan is of another version, or its evidence cannot be read any more', async () => {
        const outdated = await createRun();
        await outdated.update({ status: 'running', startedAt: new Date(), shardCount: 1 });
        await RunShard.create({ teamId: outdated.teamId, runId: outdated.id, index: 0, spec: { index: 0 } as RunShard['spec'] });
        const unreadable = await createRun();
        await unreadable.update({ status: 'running', evidence: { formula: 7 } as unknown as Run['evidence'] });
        const queue = await openQueue(createFakeCompute());
        await Promise.all([queue.settled(outdated.id), queue.settled(unreadable.id)]);
        expect(await outdated.reload()).toMatchObject({ status: 'interrupted', failure: { code: 'planOutdated' } });
        expect((await usageOf(outdated)).kind).toBe('settled');
        expect(await unreadable.reload()).toMatchObject({ status: 'interrupted', failure: { code: 'evidenceUnreadable' } });
      });
    });
  });
});
