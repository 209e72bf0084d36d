import { pino } from 'pino';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { createEmbeddedQueue } from '../../../server/compute/embedded-queue.js';
import type { RunQueue } from '../../../server/compute/queue.js';
import { Candidate } from '../../../server/models/candidate.js';
import { Run } from '../../../server/models/run.js';
import { ShortlistItem } from '../../../server/models/shortlist-item.js';
import { UsageEntry } from '../../../server/models/usage-entry.js';
import type { Unknown } from '../../../server/models/unknown.js';
import { createMember, createTeam } from '../../support/factories.js';
import { createFakeCompute, type FakeCompute } from '../../support/fake-compute.js';
import { createLaboratory, createUnknownWithEvidence, type Laboratory } from '../../support/laboratory.js';
import { createTestApp, type TestApp, type TestClient } from '../../support/test-app.js';

let testApp: TestApp;
let compute: FakeCompute;
let queue: RunQueue;
let laboratory: Laboratory;
let chemist: TestClient;
let reader: TestClient;
let stranger: TestClient;
let unknown: Unknown;
let runId: string;
let candidates: Candidate[];

async function runToEnd(of: Unknown): Promise<string> {
  const { body } = await chemist.post(`/unknowns/${of.id}/runs`, { keep: 12 });
  await queue.settled(body.id);
  return body.id;
}

beforeAll(async () => {
  compute = createFakeCompute({ shardCount: 4 });
  testApp = await createTestApp({ compute });
  queue = createEmbeddedQueue({ compute, sequelize: testApp.context.sequelize, logger: pino({ level: 'silent' }) });
  Object.assign(testApp.context, { queue });
  laboratory = await createLaboratory();
  chemist = await testApp.as(laboratory.people.chemist);
  reader = await testApp.as(laboratory.people.reader);
  stranger = await testApp.as(await createMember(await createTeam(), 'lead'));
  unknown = await createUnknownWithEvidence(laboratory);
  runId = await runToEnd(unknown);
  candidates = await Candidate.findAll({ where: { runId }, order: [['rank', 'ASC']] });
});
afterAll(async () => {
  await queue.close();
  await testApp.close();
});

describe('GET /runs/:runId/candidates', () => {
  const ranks = async (query: string) =>
    (await reader.get(`/runs/${runId}/candidates?${query}`)).body.rows.map(({ rank }: { rank: number }) => rank);

  it('lists candidates by rank, page by page', async () => {
    expect(await ranks('')).toEqual([1, 2, 3, 4, 5, 6, 7, 8, 9, 10, 11, 12]);
    expect(await ranks('page=2&pageSize=5')).toEqual([6, 7, 8, 9, 10]);
    expect((await reader.get(`/runs/${runId}/candidates?pageSize=5`)).body).toMatchObject({ total: 12, page: 1, pageSize: 5 });
  });

  it('sorts by deviation with the candidates that have none at the end, either way', async () => {
    await candidates[0].update({ carbonDeviation: null });
    expect((await ranks('sort=carbonDeviation')).at(-1)).toBe(1);
    expect((await ranks('sort=carbonDeviation&direction=descending')).slice(0, 2)).toEqual([12, 11]);
    expect((await ranks('sort=carbonDeviation&direction=descending')).at(-1)).toBe(1);
    expect(await ranks('sort=protonDeviation')).toEqual([1, 2, 3, 4, 5, 6, 7, 8, 9, 10, 11, 12]);
    expect((await ranks('sort=smiles&direction=descending')).at(0)).toBe(12);
  });

  it('leaves the details out and is closed to strangers', async () => {
    const { body } = await reader.get(`/runs/${runId}/candidates`);
    expect(body.rows[0]).not.toHaveProperty('spectra');
    expect((await stranger.get(`/runs/${runId}/candidates`)).status).toBe(404);
  });
});

describe('GET /candidates/:candidateId', () => {
  it('shows spectra and matches, and its neighbours by rank', async () => {
    const { body } = await reader.get(`/candidates/${candidates[1].id}`);
    expect(body).toMatchObject({
      unknownId: unknown.id,
      rank: 2,
      previousId: candidates[0].id,
      nextId: candidates[2].id,
      shortlistItemId: null,
      abilities: { editShortlist: false },
      spectra: { carbons: [{ atoms: [0], hydrogens: 3 }], protons: [] },
      matches: [{ nucleus: '13C', observedIndex: 0 }],
    });
    expect((await reader.get(`/candidates/${candidates[0].id}`)).body.previousId).toBeNull();
    expect((await reader.get(`/candidates/${candidates[11].id}`)).body.nextId).toBeNull();
    expect((await stranger.get(`/candidates/${candidates[1].id}`)).status).toBe(404);
  });
});

describe('POST /runs/:runId/explanations', () => {
  const explain = (smiles: string, client = reader) => client.post(`/runs/${runId}/explanations`, { smiles });

  it('tells the rank of a structure that was kept', async () => {
    // The best candidate of shard 0, as the fake engine calls it.
    const kept = await Candidate.findOne({ where: { runId, idcode: 'id-key-0-0' }, rejectOnEmpty: true });
    compute.answers.explain = { kind: 'survives', score: -1, terms: {}, key: 'key-0-0', smiles: 'CCOCC' };
    expect((await explain('CCOCC')).body).toEqual({
      kind: 'ranked',
      smiles: 'CCOCC',
      rank: kept.rank,
      candidateId: kept.id,
      probability: kept.probability,
    });
  });

  it('tells a structure that survived from one that was kept', async () => {
    compute.answers.explain = { kind: 'survives', score: -40, terms: {}, key: 'another', smiles: 'CCCCO' };
    expect((await explain('CCCCO')).body).toEqual({
      kind: 'notKept',
      smiles: 'CCCCO',
      score: -40,
      lowestKeptScore: candidates[11].score,
      runComplete: true,
    });
  });

  it('tells why a structure was rejected, or that its formula is another', async () => {
    compute.answers.explain = {
      kind: 'rejected',
      stage: 'plausibility',
      reasons: [{ reason: 'peroxide', text: 'has an O–O bond', atoms: [1, 2] }],
      key: 'k',
      smiles: 'COOC',
    };
    expect((await explain('COOC')).body).toEqual({
      kind: 'rejected',
      smiles: 'COOC',
      stage: 'plausibility',
      reasons: [{ reason: 'peroxide', text: 'has an O–O bond', atoms: [1, 2] }],
    });
    compute.answers.explain = { kind: 'otherFormula', formula: 'C6H6', expected: 'C4H10O', smiles: 'c1ccccc1' };
    expect((await explain('c1ccccc1')).body).toEqual({ kind: 'otherFormula', smiles: 'c1ccccc1', formula: 'C6H6', expected: 'C4H10O' });
  });

  it('names the field of a structure that cannot be read', async () => {
    delete compute.answers.explain;
    const { status, body } = await explain('nonsense');
    expect(status).toBe(422);
    expect(body.error.issues).toEqual([{ path: 'smiles', message: 'expected a structure' }]);
    expect((await explain(' ')).status).toBe(422);
    expect((await explain('C', stranger)).status).toBe(404);
  });
});

describe('the shortlist', () => {
  it('keeps a candidate once, with the figures it has now', async () => {
    const { status, body } = await chemist.post(`/unknowns/${unknown.id}/shortlist`, {
      candidateId: candidates[2].id,
      note: 'fits the IR',
    });
    expect(status).toBe(201);
    expect(body).toMatchObject({
      verdict: 'open',
      note: 'fits the IR',
      smiles: candidates[2].smiles,
      addedBy: { id: laboratory.people.chemist.id },
      snapshot: {
        candidateId: candidates[2].id,
        runId,
        runNumber: 1,
        rank: 3,
        probability: candidates[2].probability,
        carbonDeviation: 2,
        protonDeviation: null,
      },
    });
    expect((await chemist.post(`/unknowns/${unknown.id}/shortlist`, { candidateId: candidates[2].id })).body.error.code).toBe(
      'alreadyShortlisted',
    );
    expect((await reader.get(`/runs/${runId}/candidates`)).body.rows[2].shortlistItemId).toBe(body.id);
    expect((await reader.get(`/candidates/${candidates[2].id}`)).body.shortlistItemId).toBe(body.id);
    expect((await reader.get(`/unknowns/${unknown.id}`)).body.shortlistCount).toBe(1);
  });

  it('takes notes and verdicts', async () => {
    const [item] = (await chemist.get(`/unknowns/${unknown.id}/shortlist`)).body.items;
    expect((await chemist.patch(`/shortlist-items/${item.id}`, { verdict: 'supported' })).body).toMatchObject({
      verdict: 'supported',
      note: 'fits the IR',
    });
    expect((await chemist.patch(`/shortlist-items/${item.id}`, { note: '' })).body).toMatchObject({ verdict: 'supported', note: '' });
    expect((await chemist.patch(`/shortlist-items/${item.id}`, { verdict: 'maybe' })).status).toBe(422);
    expect((await reader.patch(`/shortlist-items/${item.id}`, { verdict: 'refuted' })).status).toBe(403);
    expect((await stranger.patch(`/shortlist-items/${item.id}`, { verdict: 'refuted' })).status).toBe(404);
  });

  it('takes candidates of its own unknown only', async () => {
    const other = await createUnknownWithEvidence(laboratory);
    const { status, body } = await chemist.post(`/unknowns/${other.id}/shortlist`, { candidateId: candidates[0].id });
    expect(status).toBe(422);
    expect(body.error.issues[0].path).toBe('candidateId');
    expect((await reader.post(`/unknowns/${unknown.id}/shortlist`, { candidateId: candidates[0].id })).status).toBe(403);
  });

  it('outlives the run its candidates came from', async () => {
    const sample = await createUnknownWithEvidence(laboratory);
    const gone = await runToEnd(sample);
    const best = await Candidate.findOne({ where: { runId: gone, rank: 1 }, rejectOnEmpty: true });
    await chemist.post(`/unknowns/${sample.id}/shortlist`, { candidateId: best.id });
    await UsageEntry.destroy({ where: { runId: gone } });
    await Run.destroy({ where: { id: gone } });
    expect(await Candidate.count({ where: { runId: gone } })).toBe(0);
    const { body } = await reader.get(`/unknowns/${sample.id}/shortlist`);
    expect(body.items).toMatchObject([
      { smiles: best.smiles, snapshot: { candidateId: null, runId: null, runNumber: 1, rank: 1, probability: best.probability } },
    ]);
  });

  it('lets go of an item', async () => {
    const [item] = (await chemist.get(`/unknowns/${unknown.id}/shortlist`)).body.items;
    expect((await reader.delete(`/shortlist-items/${item.id}`)).status).toBe(403);
    expect((await chemist.delete(`/shortlist-items/${item.id}`)).status).toBe(204);
    expect(await ShortlistItem.count({ where: { unknownId: unknown.id } })).toBe(0);
  });
});

describe('GET /runs/:runId/export', () => {
  const download = (query: string, client = reader) =>
    client
      .get(`/runs/${runId}/export?${query}`)
      .buffer(true)
      .parse((response, done) => {
        let text = '';
        response.setEncoding('utf8');
        response.on('data', (chunk: string) => (text += chunk));
        response.on('end', () => done(null, text));
      });

  it('sends each format as a file with a name that tells what it is', async () => {
    for (const [format, extension] of [
      ['smiles', 'smi'],
      ['sdf', 'sdf'],
      ['csv', 'csv'],
    ]) {
      const { status, headers } = await download(`format=${format}`);
      expect(status).toBe(200);
      expect(headers['content-disposition']).toBe(`attachment; filename="${unknown.code}-run-1-candidates.${extension}"`);
    }
  });

  it('writes all candidates, best first, or as many as asked for', async () => {
    const all = (await download('format=smiles')).body.trim().split('\n');
    expect(all).toHaveLength(12);
    expect(all[0]).toBe(`${candidates[0].smiles}\t${unknown.code}-run-1-rank-1`);
    expect((await download('format=smiles&limit=3')).body.trim().split('\n')).toHaveLength(3);
    expect((await download('format=sdf&limit=3')).body.split('$$$$\n')).toHaveLength(4);
    expect((await download('format=csv&limit=3')).body.trim().split('\r\n')).toHaveLength(4);
  });

  it('says in the name that a search was cut short', async () => {
    await Run.update({ complete: false }, { where: { id: runId } });
    expect((await download('format=csv')).headers['content-disposition']).toContain('-candidates-incomplete.csv');
    await Run.update({ complete: true }, { where: { id: runId } });
  });

  it('has nothing to send for a run without candidates, an unknown format, or a stranger', async () => {
    expect((await download('format=docx')).status).toBe(422);
    expect((await download('format=csv', stranger)).status).toBe(404);
    await Run.update({ keptCount: 0 }, { where: { id: runId } });
    expect((await download('format=csv')).status).toBe(409);
    await Run.update({ keptCount: 12 }, { where: { id: runId } });
  });
});

describe('POST /unknowns/:unknownId/estimate and /predictions', () => {
  const estimate = {
    estimate: 1_200,
    low: 900,
    high: 1_500,
    isExact: false,
    survivors: { estimate: 400, low: 300, high: 500 },
    cpuSeconds: 360,
    cpuSecondsLow: 180,
    cpuSecondsHigh: 720,
    hints: [{ kind: 'attachedHydrogens' as const, text: 'Attached-hydrogen counts would cut this about 30-fold.', factor: 30 }],
    probes: 800,
    seconds: 0.1,
  };

  it('weigh the estimate of the engine against the quota of the caller', async () => {
    compute.answers.estimate = estimate;
    // A chemist has 7200 s a month and 1000 candidates a run.
    const { body } = await chemist.post(`/unknowns/${unknown.id}/estimate`, {});
    expect(body).toMatchObject({ estimate: 1_200, isHopeless: false, limit: null, hints: estimate.hints });
    expect(body.quotaShare.estimate).toBeCloseTo(360 / body.cpuSecondsLeft);
    expect(body.quotaShare.high).toBeCloseTo(720 / body.cpuSecondsLeft);
    expect(body.candidateShare).toEqual({ estimate: 0.4, low: 0.3, high: 0.5 });
  });

  it('say that a run is hopeless, or may not end, and by which limit', async () => {
    compute.answers.estimate = { ...estimate, cpuSeconds: 90_000, cpuSecondsLow: 50_000, cpuSecondsHigh: 1e6 };
    expect((await chemist.post(`/unknowns/${unknown.id}/estimate`, {})).body).toMatchObject({ isHopeless: true, limit: 'quota' });
    compute.answers.estimate = estimate;
    const limited = async (limits: object) => (await chemist.post(`/unknowns/${unknown.id}/estimate`, limits)).body;
    expect(await limited({ maxSeconds: 10 })).toMatchObject({ isHopeless: true, limit: 'timeLimit' });
    expect(await limited({ maxConstitutions: 1_000 })).toMatchObject({ isHopeless: false, limit: 'countLimit' });
  });

  it('pass the answer of the engine on', async () => {
    expect((await reader.post(`/unknowns/${unknown.id}/estimate`, {})).status).toBe(403);
    compute.answers.predict = {
      smiles: 'CCO',
      notes: ['stereo dropped'],
      carbons: [{ atoms: [0], shift: 18.4, sd: 2, hydrogens: 3, basis: 'alkane increments' }],
      protons: [],
    };
    expect((await reader.post('/predictions', { smiles: 'CCO' })).body).toEqual(compute.answers.predict);
    expect((await (await testApp.as()).post('/predictions', { smiles: 'CCO' })).status).toBe(401);
  });
});
