import { afterAll, describe, expect, it } from 'vitest';
import { cancelRun, createCounters, readCounter } from '../../../shared/jobs/counters.js';
import { evidenceDocument } from '../../../shared/schemas/evidence.js';
import { ComputeFailure, WorkerCrash } from '../../../server/compute/compute-service.js';
import { createComputePool } from '../../../server/compute/pool.js';

const faults: Error[] = [];
const pool = createComputePool({
  threads: 1,
  workerUrl: new URL('./fixtures/jobs.ts', import.meta.url),
  onFault: (error) => faults.push(error),
});
const evidence = evidenceDocument.parse({ formula: 'C2H6O' });
const settings = { keep: 10, maxSeconds: null, mode: 'rank' } as const;
const shardInput = (counters: SharedArrayBuffer) => ({
  evidence,
  settings,
  shard: { index: 0, nodes: [{ firstDistribution: 0, endDistribution: 1, prefix: [] }] },
  counters,
  deadlineEpochMs: null,
});
const until = async (condition: () => boolean) => {
  while (!condition()) await new Promise((resolve) => setTimeout(resolve, 5));
};

afterAll(() => pool.close());

describe('the compute pool', () => {
  it('returns what the job answers', async () => {
    expect(await pool.runJob('predict', { smiles: 'CCO', solvent: 'CDCl3' })).toEqual({
      carbons: [],
      protons: [],
      smiles: 'CCO',
      notes: [],
    });
  });

  it('keeps code and issues of a failure across the thread boundary', async () => {
    const failed = await pool.runJob('predict', { smiles: 'bad', solvent: 'CDCl3' }).catch((error: unknown) => error);
    expect(failed).toBeInstanceOf(ComputeFailure);
    expect((failed as ComputeFailure).failure).toMatchObject({ code: 'badInput', issues: [{ path: 'smiles' }] });
  });

  it('says so when the thread dies under the job, and goes on with the next', async () => {
    await expect(pool.runJob('plan', { evidence, settings, targetShards: 4 })).rejects.toBeInstanceOf(WorkerCrash);
    expect(await pool.runJob('predict', { smiles: 'C', solvent: 'CDCl3' })).toMatchObject({ smiles: 'C' });
  });

  it('survives a job that eats all memory of its thread', async () => {
    await expect(pool.runJob('estimate', { evidence, mode: 'count', probes: 1, seed: 1, maxSeconds: 1 })).rejects.toBeInstanceOf(
      WorkerCrash,
    );
    expect(await pool.runJob('predict', { smiles: 'C', solvent: 'CDCl3' })).toMatchObject({ smiles: 'C' });
  }, 30_000);

  it('stops a busy shard by the flag in its counters within a second', async () => {
    const counters = createCounters();
    const running = pool.runJob('shard', shardInput(counters)).catch((error: unknown) => error);
    await until(() => readCounter(counters, 'constitutionsSeen') === 1);
    const asked = performance.now();
    cancelRun(counters);
    expect(await running).toBeInstanceOf(ComputeFailure);
    expect(performance.now() - asked).toBeLessThan(1000);
  });

  it('ends a thread that ignores the flag, as the last resort', async () => {
    const counters = createCounters();
    const abort = new AbortController();
    const running = pool.runJob('shard', shardInput(counters), { signal: abort.signal }).catch((error: unknown) => error);
    await until(() => readCounter(counters, 'constitutionsSeen') === 1);
    abort.abort();
    expect(await running).toBeInstanceOf(WorkerCrash);
  });

  it('hands jobs back when a thread cannot load its file', async () => {
    const broken = createComputePool({
      threads: 1,
      workerUrl: new URL('./fixtures/missing.js', import.meta.url),
      onFault: (error) => faults.push(error),
    });
    await expect(broken.runJob('predict', { smiles: 'C', solvent: 'CDCl3' })).rejects.toBeInstanceOf(WorkerCrash);
    await broken.close();
  });
});
