import { pino } from 'pino';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { ComputeService } from '../../../server/compute/compute-service.js';
import { createEmbeddedQueue } from '../../../server/compute/embedded-queue.js';
import { createComputePool } from '../../../server/compute/pool.js';
import type { RunQueue } from '../../../server/compute/queue.js';
import { createLaboratory, createUnknownWithEvidence, type Laboratory } from '../../support/laboratory.js';
import { createTestApp, type TestApp, type TestClient } from '../../support/test-app.js';

/** Limits with the real compute threads: what was found is kept, and nothing that shows it hides that it is not all. */
let testApp: TestApp;
let laboratory: Laboratory;
let chemist: TestClient;
const open: { queue: RunQueue; compute: ComputeService }[] = [];

beforeAll(async () => {
  testApp = await createTestApp();
  laboratory = await createLaboratory();
  chemist = await testApp.as(laboratory.people.chemist);
}, 120_000);
afterAll(async () => {
  for (const { queue, compute } of open) {
    await queue.close();
    await compute.close();
  }
  await testApp.close();
});

async function useThreads(shardHeapMegabytes?: number): Promise<RunQueue> {
  const compute = createComputePool({ threads: 2, ...(shardHeapMegabytes === undefined ? {} : { shardHeapMegabytes }) });
  const queue = createEmbeddedQueue({ compute, sequelize: testApp.context.sequelize, logger: pino({ level: 'silent' }) });
  Object.assign(testApp.context, { compute, queue });
  open.push({ queue, compute });
  return queue;
}
async function run(queue: RunQueue, unknownId: string, limits: object) {
  const { body } = await chemist.post(`/unknowns/${unknownId}/runs`, { keep: 20, ...limits });
  await queue.settled(body.id);
  return (await chemist.get(`/runs/${body.id}`)).body;
}

describe('a run that is stopped by its number of constitutions', () => {
  it('keeps what it has and is marked incomplete wherever it is shown', async () => {
    const queue = await useThreads();
    const unknown = await createUnknownWithEvidence(laboratory, {
      formula: 'C8H14O',
      options: { ringSizes: { min: 5 }, valenceGroups: [] },
    });
    const ended = await run(queue, unknown.id, { maxConstitutions: 300 });
    expect(ended).toMatchObject({
      status: 'stopped',
      complete: false,
      failure: { code: 'countLimit' },
      settings: { maxConstitutions: 300 },
    });
    expect(ended.keptCount).toBeGreaterThan(0);
    // Threads that were under way together may each find as many as were left when they began.
    expect(ended.constitutionCount).toBeGreaterThanOrEqual(300);
    expect(ended.constitutionCount).toBeLessThan(3 * 300);

    const { body: page } = await chemist.get(`/runs/${ended.id}/candidates`);
    expect(page.runComplete).toBe(false);
    const { body: candidate } = await chemist.get(`/candidates/${page.rows[0].id}`);
    expect(candidate.runComplete).toBe(false);
    const { body: item } = await chemist.post(`/unknowns/${unknown.id}/shortlist`, { candidateId: candidate.id });
    expect(item.snapshot.runComplete).toBe(false);
    const { text } = await chemist.get(`/runs/${ended.id}/export?format=csv`);
    expect(
      text
        .trim()
        .split('\r\n')
        .slice(1)
        .every((row: string) => row.endsWith(',no')),
    ).toBe(true);
    const [listed] = (await chemist.get(`/unknowns/${unknown.id}/runs`)).body.runs;
    expect(listed).toMatchObject({ complete: false, status: 'stopped' });
  }, 60_000);

  it('is complete when there are not more', async () => {
    const queue = await useThreads();
    const unknown = await createUnknownWithEvidence(laboratory, { formula: 'C5H12O', options: { valenceGroups: [] } });
    // SCIENCE.md 2.6: 8 alcohols and 6 ethers.
    expect(await run(queue, unknown.id, { maxConstitutions: 14 })).toMatchObject({ complete: true, constitutionCount: 14, failure: null });
  }, 60_000);

  it('says which branches were cut while building', async () => {
    const queue = await useThreads();
    const unknown = await createUnknownWithEvidence(laboratory, {
      formula: 'C7H12O',
      options: { ringSizes: { min: 5 }, valenceGroups: [] },
    });
    const { cuts, complete } = await run(queue, unknown.id, {});
    expect(complete).toBe(true);
    expect(cuts.length).toBeGreaterThan(0);
    for (const { reason, text, count } of cuts) expect([typeof reason, text.length > 10, count > 0]).toEqual(['string', true, true]);
  }, 60_000);
});

describe('a run whose parts need too much memory', () => {
  it('ends with what they have found', async () => {
    // A heap of one megabyte is passed by the engine alone.
    const queue = await useThreads(1);
    const unknown = await createUnknownWithEvidence(laboratory, { formula: 'C8H14O', options: { valenceGroups: [] } });
    expect(await run(queue, unknown.id, {})).toMatchObject({ status: 'stopped', complete: false, failure: { code: 'memoryLimit' } });
  }, 60_000);
});
