import { pino } from 'pino';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { ComputeService } from '../../../server/compute/compute-service.js';
import { createEmbeddedQueue } from '../../../server/compute/embedded-queue.js';
import { createComputePool } from '../../../server/compute/pool.js';
import type { RunQueue } from '../../../server/compute/queue.js';
import { createLaboratory, createUnknownWithEvidence, type Laboratory } from '../../support/laboratory.js';
import { createTestApp, type TestApp, type TestClient } from '../../support/test-app.js';

/**
 * The whole way through the real compute threads, once. Butyl acetate, C6H12O2: one of 1313 valence multigraphs
 * (SCIENCE.md 2.6), shifts in CDCl3 from Babij et al., Org. Process Res. Dev. 2016, 20, 661 (SCIENCE.md 11, row 17).
 */
const evidence = {
  formula: 'C6H12O2',
  carbonSignals: [
    // Without attached hydrogens, which would narrow the search before it begins.
    { shift: 171.2 },
    { shift: 64.36 },
    { shift: 30.7 },
    { shift: 20.99 },
    { shift: 19.16 },
    { shift: 13.71 },
  ],
  protonSignals: [
    { shift: 4.07, count: 2, multiplicity: 't', couplings: [6.7] },
    { shift: 2.05, count: 3, multiplicity: 's' },
    { shift: 1.58, count: 2, multiplicity: 'm' },
    { shift: 1.38, count: 2, multiplicity: 'm' },
    { shift: 0.94, count: 3, multiplicity: 't', couplings: [7.4] },
  ],
};
let testApp: TestApp;
let compute: ComputeService;
let queue: RunQueue;
let chemist: TestClient;
let laboratory: Laboratory;
let unknownId: string;
let runId: string;

beforeAll(async () => {
  compute = createComputePool({ threads: 2 });
  testApp = await createTestApp({ compute });
  queue = createEmbeddedQueue({ compute, sequelize: testApp.context.sequelize, logger: pino({ level: 'silent' }) });
  Object.assign(testApp.context, { queue });
  laboratory = await createLaboratory();
  chemist = await testApp.as(laboratory.people.chemist);
  unknownId = (await createUnknownWithEvidence(laboratory, evidence)).id;
  runId = (await chemist.post(`/unknowns/${unknownId}/runs`, { keep: 100 })).body.id;
  await queue.settled(runId);
}, 120_000);
afterAll(async () => {
  await queue.close();
  await compute.close();
  await testApp.close();
});

describe('a run with the real engine', () => {
  it('counts every constitution of a formula of which nothing else is known', async () => {
    const { id } = await createUnknownWithEvidence(laboratory, { formula: evidence.formula, options: { plausibility: false } });
    const { body: started } = await chemist.post(`/unknowns/${id}/runs`, { keep: 10 });
    await queue.settled(started.id);
    const { body: run } = await chemist.get(`/runs/${started.id}`);
    expect(run).toMatchObject({ status: 'finished', complete: true, failure: null, constitutionCount: 1313, cuts: [] });
    expect(run.funnel[0]).toMatchObject({ stage: 'constitutions', entered: 1313 });
  });

  it('builds only what the signals allow and ranks the right one first', async () => {
    const { body: run } = await chemist.get(`/runs/${runId}`);
    expect(run).toMatchObject({ status: 'finished', complete: true, failure: null });
    expect(run.cpuSeconds).toBeGreaterThan(0);
    expect(run.constitutionCount).toBeLessThan(1313 / 5);
    expect(run.cuts.map(({ reason }: { reason: string }) => reason)).toContain('signals:assignment');
    expect(run.funnel[0]).toMatchObject({ stage: 'constitutions', entered: run.constitutionCount });
    const { body } = await chemist.get(`/runs/${runId}/candidates`);
    const { body: predicted } = await chemist.post(`/runs/${runId}/explanations`, { smiles: 'CC(=O)OCCCC' });
    expect(predicted).toMatchObject({ kind: 'ranked', rank: 1, candidateId: body.rows[0].id });
    expect(body.rows[0].probability).toBeGreaterThan(0.5);
    const sum = body.rows.reduce((total: number, { probability }: { probability: number }) => total + probability, 0);
    expect(sum + run.noneOfTheseProbability).toBeLessThanOrEqual(1.000001);
  });

  it('gives the same ranking when it is run again', async () => {
    const again = await chemist.post(`/unknowns/${unknownId}/runs`, { keep: 100 });
    await queue.settled(again.body.id);
    const ranking = async (id: string) =>
      (await chemist.get(`/runs/${id}/candidates`)).body.rows.map(({ rank, smiles, probability, score }: Record<string, unknown>) => ({
        rank,
        smiles,
        probability,
        score,
      }));
    expect(await ranking(again.body.id)).toEqual(await ranking(runId));
  });

  it('says why other structures are not in the ranking', async () => {
    const { body: ether } = await chemist.post(`/runs/${runId}/explanations`, { smiles: 'CCOCC' });
    expect(ether).toMatchObject({ kind: 'otherFormula', formula: 'C4H10O', expected: 'C6H12O2' });
    const { body: acid } = await chemist.post(`/runs/${runId}/explanations`, { smiles: 'OC(=O)C(C)(C)CC' });
    expect(acid.kind).toBe('rejected');
    expect(acid.reasons[0].text).not.toBe('');
    const { body: nonsense } = await chemist.post(`/runs/${runId}/explanations`, { smiles: 'C1CC' });
    expect(nonsense.error.issues[0].path).toBe('smiles');
  });

  it('exports the candidates as an SDF with places for the atoms', async () => {
    const { text } = await chemist
      .get(`/runs/${runId}/export?format=sdf&limit=5`)
      .buffer(true)
      .parse((response, done) => {
        let all = '';
        response.on('data', (chunk: Buffer) => (all += chunk.toString('utf8')));
        response.on('end', () => done(null, all));
      })
      .then(({ body }) => ({ text: body as string }));
    expect(text.split('$$$$\n').length - 1).toBe(Math.min(5, (await chemist.get(`/runs/${runId}`)).body.keptCount));
    expect(text).toContain('V2000');
  });

  it('predicts and estimates', async () => {
    const { body: prediction } = await chemist.post('/predictions', { smiles: 'CC(=O)OCCCC' });
    expect(prediction.carbons).toHaveLength(6);
    const { body: estimate } = await chemist.post(`/unknowns/${unknownId}/estimate`, {});
    expect(estimate.low).toBeLessThanOrEqual(estimate.estimate);
    expect(estimate.estimate).toBeLessThanOrEqual(estimate.high);
  });
});
