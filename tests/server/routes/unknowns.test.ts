import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { AuditEvent } from '../../../server/models/audit-event.js';
import { Unknown } from '../../../server/models/unknown.js';
import { createMember, createRevision, createRun, createTeam, createUnknown } from '../../support/factories.js';
import { createLaboratory, type Laboratory } from '../../support/laboratory.js';
import { createTestApp, type TestApp, type TestClient } from '../../support/test-app.js';

let testApp: TestApp;
let laboratory: Laboratory;
let chemist: TestClient;
let reader: TestClient;
let stranger: TestClient;

beforeAll(async () => {
  testApp = await createTestApp();
  laboratory = await createLaboratory();
  chemist = await testApp.as(laboratory.people.chemist);
  reader = await testApp.as(laboratory.people.reader);
  stranger = await testApp.as(await createMember(await createTeam(), 'lead'));
});
afterAll(() => testApp.close());

const listPath = () => `/teams/${laboratory.team.id}/unknowns`;

describe('POST /teams/:teamId/unknowns', () => {
  it('gives each unknown the next number of its team, also when several are created at once', async () => {
    const answers = await Promise.all(['Still bottoms', 'Brown oil', 'Crystals'].map((title) => chemist.post(listPath(), { title })));
    expect(answers.map(({ status }) => status)).toEqual([201, 201, 201]);
    expect(answers.map(({ body }) => body.code).sort()).toEqual(['U-0001', 'U-0002', 'U-0003']);
    expect(answers[0].body).toMatchObject({
      status: 'new',
      formula: null,
      revisionCount: 0,
      currentRevisionId: null,
      lastRun: null,
      isDemo: false,
      purpose: 'research',
      createdBy: { id: laboratory.people.chemist.id },
    });
    expect(await AuditEvent.count({ where: { action: 'unknown.create', teamId: laboratory.team.id } })).toBe(3);
  });

  it('tells the caller what they may do', async () => {
    const { body } = await chemist.post(listPath(), { title: 'Abilities' });
    expect(body.abilities).toEqual({ update: true, shelve: true, saveEvidence: true, startRun: true, editShortlist: true, comment: true });
    const seen = await reader.get(`/unknowns/${body.id}`);
    expect(seen.body.abilities).toEqual({
      update: false,
      shelve: false,
      saveEvidence: false,
      startRun: false,
      editShortlist: false,
      comment: true,
    });
  });

  it('names the field that is wrong', async () => {
    const { status, body } = await chemist.post(listPath(), { title: '  ' });
    expect(status).toBe(422);
    expect(body.error.issues).toEqual([{ path: 'title', message: 'expected a title' }]);
  });

  it('is refused to readers, unknown to strangers, closed to the public', async () => {
    expect((await reader.post(listPath(), { title: 'No' })).status).toBe(403);
    expect((await stranger.post(listPath(), { title: 'No' })).status).toBe(404);
    expect((await (await testApp.as()).post(listPath(), { title: 'No' })).status).toBe(401);
  });
});

describe('GET /teams/:teamId/unknowns', () => {
  let lab: Laboratory;
  let lead: TestClient;
  const list = async (query: string) => {
    const { body } = await lead.get(`/teams/${lab.team.id}/unknowns?${query}`);
    return { titles: body.rows.map(({ title }: { title: string }) => title), total: body.total };
  };

  beforeAll(async () => {
    lab = await createLaboratory();
    lead = await testApp.as(lab.people.lead);
    const make = async (title: string, formula: string | null, status: Unknown['status']) => {
      const unknown = await createUnknown(lab.team, lab.people.chemist, { title });
      if (formula !== null) await createRevision(unknown, lab.people.chemist, { formula });
      await unknown.update({ status });
      return unknown;
    };
    await make('Amber oil', 'C9H10O2', 'new');
    await make('Side fraction 100%', 'C4H8O', 'shelved');
    await make('Wax', null, 'inProgress');
    await make('Blue_crystals', 'C10H9Cl', 'settled');
  });

  it('sorts by each column in both directions', async () => {
    expect((await list('sort=title&direction=ascending')).titles).toEqual(['Amber oil', 'Blue_crystals', 'Side fraction 100%', 'Wax']);
    expect((await list('sort=title&direction=descending')).titles).toEqual(['Wax', 'Side fraction 100%', 'Blue_crystals', 'Amber oil']);
    expect((await list('sort=code&direction=ascending')).titles).toEqual(['Amber oil', 'Side fraction 100%', 'Wax', 'Blue_crystals']);
    expect((await list('sort=status&direction=ascending')).titles).toEqual(['Amber oil', 'Wax', 'Blue_crystals', 'Side fraction 100%']);
    expect((await list('sort=formula&direction=ascending')).titles).toEqual(['Blue_crystals', 'Side fraction 100%', 'Amber oil', 'Wax']);
    expect((await list('sort=formula&direction=descending')).titles).toEqual(['Amber oil', 'Side fraction 100%', 'Blue_crystals', 'Wax']);
    expect((await list('sort=updatedAt')).total).toBe(4);
  });

  it('searches title, code and formula, whatever the case, and takes wildcards literally', async () => {
    expect((await list('search=amber')).titles).toEqual(['Amber oil']);
    expect((await list('search=c9h10o2')).titles).toEqual(['Amber oil']);
    expect((await list(`search=${encodeURIComponent('C₉H₁₀')}`)).titles).toEqual(['Amber oil']);
    expect((await list('search=oil%20amber')).titles).toEqual(['Amber oil']);
    expect((await list(`search=${encodeURIComponent('100%')}`)).titles).toEqual(['Side fraction 100%']);
    expect((await list(`search=${encodeURIComponent('%')}`)).titles).toEqual(['Side fraction 100%']);
    expect((await list('search=_')).titles).toEqual(['Blue_crystals']);
    expect((await list(`search=${encodeURIComponent("'; DROP TABLE unknowns; --")}`)).total).toBe(0);
  });

  it('filters by status and pages without overlap', async () => {
    expect((await list('status=shelved')).titles).toEqual(['Side fraction 100%']);
    const pages = await Promise.all([1, 2, 3].map((page) => list(`sort=code&direction=ascending&pageSize=2&page=${page}`)));
    expect(pages.map(({ titles }) => titles)).toEqual([['Amber oil', 'Side fraction 100%'], ['Wax', 'Blue_crystals'], []]);
    expect(pages[0].total).toBe(4);
  });

  it('shows the newest run of each', async () => {
    const unknown = await Unknown.findOne({ where: { teamId: lab.team.id, title: 'Amber oil' }, rejectOnEmpty: true });
    const revision = await createRevision(unknown, lab.people.chemist, { formula: 'C9H10O2' });
    await createRun(revision, lab.people.chemist, { status: 'failed' });
    await createRun(revision, lab.people.chemist, { status: 'finished' });
    const { body } = await lead.get(`/teams/${lab.team.id}/unknowns?search=amber`);
    expect(body.rows[0].lastRun).toMatchObject({ number: 2, status: 'finished' });
  });

  it('refuses what is no page, sort or status', async () => {
    const { status, body } = await lead.get(`/teams/${lab.team.id}/unknowns?page=0&sort=colour&status=lost`);
    expect(status).toBe(422);
    expect(body.error.issues.map(({ path }: { path: string }) => path).sort()).toEqual(['page', 'sort', 'status']);
  });
});

describe('PATCH /unknowns/:unknownId', () => {
  it('changes what is given and leaves the rest', async () => {
    const unknown = await createUnknown(laboratory.team, laboratory.people.chemist, { title: 'Before' });
    const { status, body } = await chemist.patch(`/unknowns/${unknown.id}`, { title: 'After', purpose: 'regulated' });
    expect(status).toBe(200);
    expect(body).toMatchObject({ title: 'After', purpose: 'regulated', status: 'new', description: '' });
    const event = await AuditEvent.findOne({ where: { subjectId: unknown.id, action: 'unknown.update' } });
    expect(event?.detail).toEqual({ fields: ['title', 'purpose'] });
  });

  it('shelves and takes up again', async () => {
    const unknown = await createUnknown(laboratory.team, laboratory.people.chemist);
    expect((await chemist.patch(`/unknowns/${unknown.id}`, { status: 'shelved' })).body.status).toBe('shelved');
    expect((await chemist.patch(`/unknowns/${unknown.id}`, { status: 'inProgress' })).body.status).toBe('inProgress');
    expect(await AuditEvent.count({ where: { subjectId: unknown.id, action: 'unknown.shelve' } })).toBe(1);
  });

  it('is refused to readers and unknown to strangers', async () => {
    const unknown = await createUnknown(laboratory.team, laboratory.people.chemist, { title: 'Mine' });
    expect((await reader.patch(`/unknowns/${unknown.id}`, { title: 'Theirs' })).status).toBe(403);
    expect((await stranger.patch(`/unknowns/${unknown.id}`, { title: 'Theirs' })).status).toBe(404);
    expect((await stranger.get(`/unknowns/${unknown.id}`)).status).toBe(404);
    expect((await unknown.reload()).title).toBe('Mine');
  });
});
