import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import { EvidenceRevision } from '../../../server/models/evidence-revision.js';
import type { Unknown } from '../../../server/models/unknown.js';
import { createMember, createTeam, createUnknown } from '../../support/factories.js';
import { createLaboratory, type Laboratory } from '../../support/laboratory.js';
import { createTestApp, type TestApp, type TestClient } from '../../support/test-app.js';

let testApp: TestApp;
let laboratory: Laboratory;
let chemist: TestClient;
let reader: TestClient;
let stranger: TestClient;
let unknown: Unknown;

beforeAll(async () => {
  testApp = await createTestApp();
  laboratory = await createLaboratory();
  chemist = await testApp.as(laboratory.people.chemist);
  reader = await testApp.as(laboratory.people.reader);
  stranger = await testApp.as(await createMember(await createTeam(), 'lead'));
});
beforeEach(async () => {
  unknown = await createUnknown(laboratory.team, laboratory.people.chemist);
});
afterAll(() => testApp.close());

const path = () => `/unknowns/${unknown.id}/revisions`;
const save = (evidence: object, basedOn: number, comment = '') => chemist.post(path(), { evidence, basedOn, comment });

describe('POST /unknowns/:unknownId/revisions', () => {
  it('saves evidence as the next revision, with author and comment, and shows its formula on the unknown', async () => {
    const first = await save(
      { formula: 'O2C9H10', carbonSignals: [{ shift: 166.9, hydrogens: 0, count: 1 }] },
      0,
      'from the first spectrum',
    );
    expect(first.status).toBe(201);
    expect(first.body).toMatchObject({
      number: 1,
      comment: 'from the first spectrum',
      isCurrent: true,
      formula: 'C9H10O2',
      author: { id: laboratory.people.chemist.id },
      abilities: { restore: true },
    });
    expect(first.body.evidence).toMatchObject({
      formula: 'C9H10O2',
      carbonSignals: [{ shift: 166.9, hydrogens: 0, count: 1 }],
      options: { keep: 1000 },
    });
    const second = await save({ formula: 'C8H8O3' }, 1);
    expect(second.body).toMatchObject({ number: 2, isCurrent: true });
    expect((await chemist.get(`/unknowns/${unknown.id}`)).body).toMatchObject({
      formula: 'C8H8O3',
      currentRevisionId: second.body.id,
      revisionCount: 2,
    });
    expect((await chemist.get(`/revisions/${first.body.id}`)).body).toMatchObject({ isCurrent: false, evidence: { formula: 'C9H10O2' } });
  });

  it('answers 409 when somebody else saved in between, and saves nothing', async () => {
    await save({ formula: 'C4H8O' }, 0);
    const { status, body } = await save({ formula: 'C5H10O' }, 0);
    expect(status).toBe(409);
    expect(body.error).toMatchObject({ code: 'revisionConflict', figures: { basedOn: 0, latest: 1 } });
    expect(await EvidenceRevision.count({ where: { unknownId: unknown.id } })).toBe(1);
  });

  it('lets only one of two saves at the same time through', async () => {
    const answers = await Promise.all([save({ formula: 'C4H8O' }, 0), save({ formula: 'C5H10O' }, 0)]);
    expect(answers.map(({ status }) => status).sort()).toEqual([201, 409]);
  });

  it('names field and cure of every shape that is wrong', async () => {
    const { status, body } = await save(
      { formula: 'C9H10O2', carbonSignals: [{ shift: 20 }, { shift: 'twenty' }, { shift: 900 }], colour: 'blue' },
      0,
    );
    expect(status).toBe(422);
    const issues = Object.fromEntries(body.error.issues.map(({ path: at, message }: { path: string; message: string }) => [at, message]));
    expect(issues['evidence.carbonSignals[1].shift']).toBe('expected a number between -50 and 300 ppm');
    expect(issues['evidence.carbonSignals[2].shift']).toBe('expected a number between -50 and 300 ppm');
    expect(issues).toHaveProperty('evidence.colour');
  });

  it.each([
    ['an element that is none', { formula: 'C4H8Xx' }, 'evidence.formula'],
    ['no heavy atom', { formula: 'H2' }, 'evidence.formula'],
    ['too many hydrogens', { formula: 'C4H12' }, 'evidence.formula'],
    ['an odd number of hydrogens', { formula: 'C4H9' }, 'evidence.formula'],
    ['over 40 heavy atoms', { formula: 'C41H84' }, 'evidence.formula'],
    [
      'a fragment that cannot be read',
      { formula: 'C4H8O', fragments: { required: [{ smiles: '*C(' }] } },
      'evidence.fragments.required[0].smiles',
    ],
    ['an isotope', { formula: 'C4H8O', fragments: { required: [{ smiles: '*[13CH3]' }] } }, 'evidence.fragments.required[0].smiles'],
    ['a radical', { formula: 'C4H8O', fragments: { required: [{ smiles: '*[CH2]' }] } }, 'evidence.fragments.required[0].smiles'],
    ['a charge', { formula: 'C4H11NO', fragments: { required: [{ smiles: '*[NH3+]' }] } }, 'evidence.fragments.required[0].smiles'],
    [
      'more carbon signals than carbons',
      { formula: 'C2H6O', carbonSignals: [{ shift: 10 }, { shift: 20 }, { shift: 30 }] },
      'evidence.carbonSignals',
    ],
    ['more hydrogens than the formula has', { formula: 'C2H6O', protonSignals: [{ shift: 1, count: 7 }] }, 'evidence.protonSignals'],
  ])('refuses %s', async (_what, evidence, at) => {
    const { status, body } = await save(evidence, 0);
    expect(status).toBe(422);
    expect(body.error.issues.map((issue: { path: string }) => issue.path)).toContain(at);
    expect(await EvidenceRevision.count({ where: { unknownId: unknown.id } })).toBe(0);
    expect((await unknown.reload()).formula).toBeNull();
  });

  it('refuses fragments that need more atoms than the formula has', async () => {
    const { status, body } = await save({ formula: 'C4H8O', fragments: { required: [{ smiles: '*c1ccccc1' }] } }, 0);
    expect(status).toBe(422);
    expect(body.error.issues[0].path).toMatch(/^evidence\.fragments/);
  });

  it('saves a fragment with stereo marks and says that they were dropped', async () => {
    const { status, body } = await save({ formula: 'C5H10O', fragments: { required: [{ smiles: 'C/C=C/*' }] } }, 0);
    expect(status).toBe(201);
    expect(body.notes.join(' ')).toMatch(/stereo dropped/);
    expect((await chemist.get(`/revisions/${body.id}`)).body.notes).toEqual(body.notes);
  });

  it('is refused to readers and unknown to strangers', async () => {
    const body = { evidence: { formula: 'C4H8O' }, basedOn: 0 };
    expect((await reader.post(path(), body)).status).toBe(403);
    expect((await stranger.post(path(), body)).status).toBe(404);
  });
});

describe('revisions', () => {
  it('are listed newest first', async () => {
    await save({ formula: 'C4H8O' }, 0, 'one');
    await save({ formula: 'C5H10O' }, 1, 'two');
    const { body } = await reader.get(path());
    expect(body.revisions).toMatchObject([
      { number: 2, comment: 'two', formula: 'C5H10O', isCurrent: true },
      { number: 1, comment: 'one', formula: 'C4H8O', isCurrent: false },
    ]);
  });

  it('are restored as a new revision, and the old ones stay', async () => {
    const first = await save({ formula: 'C4H8O', carbonSignals: [{ shift: 30 }] }, 0);
    await save({ formula: 'C5H10O' }, 1);
    const { status, body } = await chemist.post(`/revisions/${first.body.id}/restore`);
    expect(status).toBe(201);
    expect(body).toMatchObject({ number: 3, comment: 'Revision 1 restored', isCurrent: true, evidence: first.body.evidence });
    expect((await unknown.reload()).formula).toBe('C4H8O');
    expect(await EvidenceRevision.count({ where: { unknownId: unknown.id } })).toBe(3);
  });

  it('are not restored when they are current, by readers, or by strangers', async () => {
    const first = await save({ formula: 'C4H8O' }, 0);
    expect((await chemist.post(`/revisions/${first.body.id}/restore`)).body.error.code).toBe('alreadyCurrent');
    expect((await reader.post(`/revisions/${first.body.id}/restore`)).status).toBe(403);
    expect((await stranger.post(`/revisions/${first.body.id}/restore`)).status).toBe(404);
    expect((await stranger.get(`/revisions/${first.body.id}`)).status).toBe(404);
  });
});
