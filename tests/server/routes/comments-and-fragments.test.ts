import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { Comment } from '../../../server/models/comment.js';
import { createMember, createTeam, createUnknown } from '../../support/factories.js';
import { createFakeCompute } from '../../support/fake-compute.js';
import { createLaboratory, type Laboratory } from '../../support/laboratory.js';
import { createTestApp, type TestApp, type TestClient } from '../../support/test-app.js';

let testApp: TestApp;
let laboratory: Laboratory;
let chemist: TestClient;
let lead: TestClient;
let reader: TestClient;
let stranger: TestClient;

beforeAll(async () => {
  testApp = await createTestApp({ compute: createFakeCompute() });
  laboratory = await createLaboratory();
  chemist = await testApp.as(laboratory.people.chemist);
  lead = await testApp.as(laboratory.people.lead);
  reader = await testApp.as(laboratory.people.reader);
  stranger = await testApp.as(await createMember(await createTeam(), 'lead'));
});
afterAll(() => testApp.close());

describe('comments', () => {
  it('are written by everybody in the team, readers too, and shown oldest first', async () => {
    const unknown = await createUnknown(laboratory.team, laboratory.people.chemist);
    const path = `/unknowns/${unknown.id}/comments`;
    expect((await chemist.post(path, { text: ' Smells of pear. ' })).body).toMatchObject({
      text: 'Smells of pear.',
      author: { id: laboratory.people.chemist.id },
      abilities: { remove: true },
    });
    expect((await reader.post(path, { text: 'Which batch?' })).status).toBe(201);
    const { body } = await lead.get(path);
    expect(body.comments.map(({ text }: { text: string }) => text)).toEqual(['Smells of pear.', 'Which batch?']);
    expect(body.comments[0].abilities.remove).toBe(false);
    expect((await stranger.get(path)).status).toBe(404);
    expect((await stranger.post(path, { text: 'Hello' })).status).toBe(404);
    expect((await chemist.post(path, { text: '   ' })).body.error.issues[0]).toEqual({ path: 'text', message: 'expected a text' });
  });

  it('are removed by their author only', async () => {
    const unknown = await createUnknown(laboratory.team, laboratory.people.chemist);
    const { body } = await reader.post(`/unknowns/${unknown.id}/comments`, { text: 'Never mind' });
    expect((await lead.delete(`/comments/${body.id}`)).status).toBe(403);
    expect((await stranger.delete(`/comments/${body.id}`)).status).toBe(404);
    expect((await reader.delete(`/comments/${body.id}`)).status).toBe(204);
    expect(await Comment.count({ where: { unknownId: unknown.id } })).toBe(0);
  });
});

describe('the fragment library of a team', () => {
  const path = () => `/teams/${laboratory.team.id}/fragments`;

  it('takes a fragment with attachment points, once', async () => {
    const { status, body } = await chemist.post(path(), { name: 'Prenyl', smiles: ' *CC=C(C)C ' });
    expect(status).toBe(201);
    expect(body).toMatchObject({
      name: 'Prenyl',
      group: 'Own',
      smiles: '*CC=C(C)C',
      createdBy: { id: laboratory.people.chemist.id },
      abilities: { remove: true },
    });
    const again = await lead.post(path(), { name: 'Dimethylallyl', smiles: '*CC=C(C)C' });
    expect(again.status).toBe(409);
    expect(again.body.error.message).toContain('Prenyl');
    expect((await reader.get(path())).body.fragments).toMatchObject([{ name: 'Prenyl', abilities: { remove: false } }]);
  });

  it.each([
    ['without an attachment point', 'CCO'],
    ['that cannot be read', '*C('],
    ['with an isotope', '*[13CH3]'],
    ['with five bonds to carbon', '*C(C)(C)(C)C'],
  ])('refuses one %s', async (_what, smiles) => {
    const { status, body } = await chemist.post(path(), { name: 'Wrong', smiles });
    expect(status).toBe(422);
    expect(body.error.issues[0].path).toBe('smiles');
  });

  it('is changed by those who work in the team: own fragments, leads any', async () => {
    const { body } = await chemist.post(path(), { name: 'Cyano', smiles: '*C#N' });
    const colleague = await testApp.as(await createMember(laboratory.team, 'chemist'));
    expect((await reader.post(path(), { name: 'No', smiles: '*O' })).status).toBe(403);
    expect((await stranger.post(path(), { name: 'No', smiles: '*O' })).status).toBe(404);
    expect((await stranger.get(path())).status).toBe(404);
    expect((await colleague.delete(`/fragments/${body.id}`)).status).toBe(403);
    expect((await stranger.delete(`/fragments/${body.id}`)).status).toBe(404);
    expect((await lead.delete(`/fragments/${body.id}`)).status).toBe(204);
  });
});
