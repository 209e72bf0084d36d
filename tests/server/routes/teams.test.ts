import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import { AuditEvent } from '../../../server/models/audit-event.js';
import { Membership } from '../../../server/models/membership.js';
import { Quota } from '../../../server/models/quota.js';
import type { Run } from '../../../server/models/run.js';
import { Team } from '../../../server/models/team.js';
import { UsageEntry } from '../../../server/models/usage-entry.js';
import type { User } from '../../../server/models/user.js';
import { usageMonth } from '../../../server/quotas/read-usage.js';
import { createMember, createRevision, createRun, createTeam, createUnknown, createUser } from '../../support/factories.js';
import { createTestApp, type TestApp, type TestClient } from '../../support/test-app.js';

let server: TestApp;
let team: Team;
let lead: User;
let chemist: User;
let reader: User;
let admin: User;
beforeAll(async () => {
  server = await createTestApp();
  admin = await createUser({ isAdmin: true });
});
beforeEach(async () => {
  team = await createTeam();
  lead = await createMember(team, 'lead', { name: 'Lena Lead' });
  chemist = await createMember(team, 'chemist', { name: 'Carla Chemist' });
  reader = await createMember(team, 'reader', { name: 'Rosa Reader' });
});
afterAll(async () => {
  await server.close();
});

const as = (user: User): Promise<TestClient> => server.as(user);
const auditOf = async (action: string) => await AuditEvent.findOne({ where: { teamId: team.id, action }, rejectOnEmpty: true });

describe('teams', () => {
  it('are created by admins only, without members', async () => {
    const response = await (await as(admin)).post('/teams', { name: '  Dye works  ' });
    expect(response.status).toBe(201);
    expect(response.body).toMatchObject({
      name: 'Dye works',
      isDemo: false,
      abilities: { update: true, manageMembers: true, readUsage: true, setQuotas: true },
    });
    expect(await Membership.count({ where: { teamId: response.body.id } })).toBe(0);
    expect(await AuditEvent.count({ where: { teamId: response.body.id, action: 'team.create', actorId: admin.id } })).toBe(1);
    const before = await Team.count();
    expect((await (await as(lead)).post('/teams', { name: 'Mine' })).status).toBe(403);
    expect((await (await server.as()).post('/teams', { name: 'Mine' })).status).toBe(401);
    const bad = await (await as(admin)).post('/teams', { name: ' ' });
    expect(bad.status).toBe(422);
    expect(bad.body.error.issues).toEqual([{ path: 'name', message: 'expected a name' }]);
    expect(await Team.count()).toBe(before);
  });

  it('are listed: the own ones, all of them for an admin', async () => {
    const own = await (await as(chemist)).get('/teams');
    expect(own.body.teams.map(({ id }: { id: string }) => id)).toEqual([team.id]);
    const all = await (await as(admin)).get('/teams');
    expect(all.body.teams).toHaveLength(await Team.count());
    expect((await (await as(await createUser())).get('/teams')).body.teams).toEqual([]);
  });

  it('are read by members and admins; to others they do not exist', async () => {
    for (const user of [lead, chemist, reader, admin]) expect((await (await as(user)).get(`/teams/${team.id}`)).status).toBe(200);
    const stranger = await as(await createMember(await createTeam(), 'lead'));
    const response = await stranger.get(`/teams/${team.id}`);
    expect(response.status).toBe(404);
    expect(response.body).toEqual((await stranger.get('/teams/00000000-0000-4000-8000-000000000000')).body);
    expect((await stranger.get('/teams/no-id')).body.error.issues).toEqual([{ path: 'teamId', message: 'expected an id' }]);
    expect((await (await server.as()).get(`/teams/${team.id}`)).status).toBe(401);
  });

  it('are renamed by leads and admins', async () => {
    expect((await (await as(lead)).patch(`/teams/${team.id}`, { name: 'Mordants' })).body.name).toBe('Mordants');
    expect((await auditOf('team.update')).detail).toEqual({ before: team.name, after: 'Mordants' });
    expect((await (await as(chemist)).patch(`/teams/${team.id}`, { name: 'Madder' })).status).toBe(403);
    expect((await (await as(lead)).patch(`/teams/${team.id}`, { name: 'x'.repeat(121) })).status).toBe(422);
    await team.reload();
    expect(team.name).toBe('Mordants');
  });
});

describe('members', () => {
  it('are listed by name with what the caller may do to each', async () => {
    const forLead = await (await as(lead)).get(`/teams/${team.id}/members`);
    expect(forLead.status).toBe(200);
    expect(forLead.body.members).toMatchObject([
      { userId: chemist.id, name: 'Carla Chemist', role: 'chemist', abilities: { changeRole: true, remove: true, setQuota: true } },
      { userId: lead.id, name: 'Lena Lead', role: 'lead', abilities: { changeRole: false, remove: false, setQuota: true } },
      { userId: reader.id, name: 'Rosa Reader', role: 'reader', abilities: { changeRole: true, remove: true, setQuota: true } },
    ]);
    const nothing = { changeRole: false, remove: false, setQuota: false };
    const forReader = await (await as(reader)).get(`/teams/${team.id}/members`);
    expect(forReader.body.members.map(({ abilities }: { abilities: object }) => abilities)).toEqual([nothing, nothing, nothing]);
    const forAdmin = await (await as(admin)).get(`/teams/${team.id}/members`);
    expect(forAdmin.body.members[1].abilities).toEqual({ changeRole: true, remove: true, setQuota: true });
  });

  it('never leak a password hash', async () => {
    const response = await (await as(lead)).get(`/teams/${team.id}/members`);
    expect(response.text).not.toContain('$2');
  });

  it('get another role from leads and admins', async () => {
    const response = await (await as(lead)).patch(`/teams/${team.id}/members/${chemist.id}`, { role: 'lead' });
    expect(response.status).toBe(200);
    expect(response.body).toMatchObject({ userId: chemist.id, role: 'lead' });
    expect(await auditOf('member.changeRole')).toMatchObject({
      actorId: lead.id,
      subjectId: chemist.id,
      detail: { before: 'chemist', after: 'lead' },
    });
    expect((await (await as(reader)).patch(`/teams/${team.id}/members/${reader.id}`, { role: 'lead' })).status).toBe(403);
    const bad = await (await as(lead)).patch(`/teams/${team.id}/members/${reader.id}`, { role: 'admin' });
    expect(bad.body.error.issues).toEqual([{ path: 'role', message: 'expected one of: chemist, lead, reader' }]);
    expect((await (await as(lead)).patch(`/teams/${team.id}/members/${admin.id}`, { role: 'reader' })).status).toBe(404);
  });

  it('are removed with their quota, and lose access at once', async () => {
    const client = await as(chemist);
    await Quota.create({ teamId: team.id, userId: chemist.id, cpuSecondsPerMonth: 1, candidatesPerRun: null, runsAtOnce: null });
    expect((await (await as(reader)).delete(`/teams/${team.id}/members/${chemist.id}`)).status).toBe(403);
    expect((await client.get(`/teams/${team.id}`)).status).toBe(200);
    expect((await (await as(lead)).delete(`/teams/${team.id}/members/${chemist.id}`)).status).toBe(204);
    expect((await client.get(`/teams/${team.id}`)).status).toBe(404);
    expect((await client.get('/me')).body.memberships).toEqual([]);
    expect(await Quota.count({ where: { teamId: team.id } })).toBe(0);
    expect(await auditOf('member.remove')).toMatchObject({ subjectId: chemist.id, detail: { role: 'chemist' } });
    expect((await (await as(lead)).delete(`/teams/${team.id}/members/${chemist.id}`)).status).toBe(404);
  });

  it('keep their last lead, unless an admin says otherwise', async () => {
    const client = await as(lead);
    const demotion = await client.patch(`/teams/${team.id}/members/${lead.id}`, { role: 'chemist' });
    expect(demotion.status).toBe(409);
    expect(demotion.body.error.code).toBe('lastLead');
    expect((await client.delete(`/teams/${team.id}/members/${lead.id}`)).body.error.code).toBe('lastLead');
    expect((await client.patch(`/teams/${team.id}/members/${lead.id}`, { role: 'lead' })).status).toBe(200);

    const second = await createMember(team, 'lead');
    expect((await client.patch(`/teams/${team.id}/members/${lead.id}`, { role: 'chemist' })).status).toBe(200);
    const byAdmin = await (await as(admin)).delete(`/teams/${team.id}/members/${second.id}`);
    expect(byAdmin.status).toBe(204);
  });

  it('do not count a lead who cannot sign in', async () => {
    await createMember(team, 'lead', { isDisabled: true });
    expect((await (await as(lead)).delete(`/teams/${team.id}/members/${lead.id}`)).body.error.code).toBe('lastLead');
  });

  it('keep one lead when two leads demote each other at the same time', async () => {
    const other = await createMember(team, 'lead');
    const [first, second] = [await as(lead), await as(other)];
    const answers = await Promise.all([
      first.patch(`/teams/${team.id}/members/${other.id}`, { role: 'chemist' }),
      second.patch(`/teams/${team.id}/members/${lead.id}`, { role: 'chemist' }),
    ]);
    expect(answers.map(({ status }) => status).sort()).toEqual([200, 409]);
    expect(await Membership.count({ where: { teamId: team.id, role: 'lead' } })).toBe(1);
  });
});

describe('quotas', () => {
  const CHEMIST = { cpuSecondsPerMonth: 7_200, candidatesPerRun: 1_000, runsAtOnce: 2 };

  it('follow the role until something else is set, and again when that is taken back', async () => {
    const path = `/teams/${team.id}/members/${chemist.id}/quota`;
    const ownOf = async (user: User) => (await (await as(user)).get(`/teams/${team.id}/own-quota`)).body.quota as object;
    expect(await ownOf(chemist)).toEqual(CHEMIST);
    expect(await ownOf(lead)).toEqual({ cpuSecondsPerMonth: 36_000, candidatesPerRun: 5_000, runsAtOnce: 4 });
    expect(await ownOf(reader)).toMatchObject({ cpuSecondsPerMonth: 0, runsAtOnce: 0 });

    const client = await as(lead);
    expect((await client.patch(path, { runsAtOnce: 5 })).body).toEqual({ ...CHEMIST, runsAtOnce: 5 });
    expect(await ownOf(chemist)).toEqual({ ...CHEMIST, runsAtOnce: 5 });
    expect(await auditOf('member.setQuota')).toMatchObject({
      subjectId: chemist.id,
      detail: { before: CHEMIST, after: { ...CHEMIST, runsAtOnce: 5 } },
    });
    expect((await client.patch(path, { cpuSecondsPerMonth: 0 })).body).toEqual({ ...CHEMIST, cpuSecondsPerMonth: 0 });
    expect((await client.patch(path, {})).body).toEqual(CHEMIST);
    expect(await Quota.count({ where: { teamId: team.id } })).toBe(0);
  });

  it('of one team say nothing about another', async () => {
    const other = await createTeam();
    await Membership.create({ teamId: other.id, userId: chemist.id, role: 'lead' });
    await (await as(lead)).patch(`/teams/${team.id}/members/${chemist.id}/quota`, { runsAtOnce: 9 });
    expect((await (await as(chemist)).get(`/teams/${other.id}/own-quota`)).body.quota.runsAtOnce).toBe(4);
  });

  it('are set by leads and admins, within bounds', async () => {
    const path = `/teams/${team.id}/members/${chemist.id}/quota`;
    expect((await (await as(chemist)).patch(path, { runsAtOnce: 9 })).status).toBe(403);
    expect((await (await as(admin)).patch(path, { runsAtOnce: 9 })).status).toBe(200);
    const bad = await (await as(lead)).patch(path, { runsAtOnce: -1, candidatesPerRun: 0, cpuSecondsPerMonth: 'many' });
    expect(bad.status).toBe(422);
    expect(bad.body.error.issues).toEqual([
      { path: 'cpuSecondsPerMonth', message: 'expected a number' },
      { path: 'candidatesPerRun', message: 'expected at least 1' },
      { path: 'runsAtOnce', message: 'expected at least 0' },
    ]);
    expect((await (await as(lead)).patch(`/teams/${team.id}/members/${admin.id}/quota`, { runsAtOnce: 1 })).status).toBe(404);
  });

  it('are next to unlimited for an admin who is a member', async () => {
    const member = await createMember(team, 'chemist', { isAdmin: true });
    expect((await (await as(member)).get(`/teams/${team.id}/own-quota`)).body.quota.cpuSecondsPerMonth).toBeGreaterThan(1e8);
    expect((await (await as(admin)).get(`/teams/${team.id}/own-quota`)).status).toBe(403);
  });
});

describe('usage', () => {
  const enter = async (run: Run, kind: 'reserved' | 'settled', cpuSeconds: number, month = usageMonth(new Date())) =>
    await UsageEntry.create({ teamId: run.teamId, userId: run.startedById, runId: run.id, month, kind, cpuSeconds });

  it('of this month is summed by person, apart for what is used and what is reserved', async () => {
    const revision = await createRevision(await createUnknown(team, chemist), chemist);
    await enter(await createRun(revision, chemist, { status: 'finished' }), 'settled', 12.5);
    await enter(await createRun(revision, chemist, { status: 'stopped' }), 'settled', 7.25);
    await enter(await createRun(revision, chemist, { status: 'running' }), 'reserved', 60);
    await enter(await createRun(revision, chemist, { status: 'finished' }), 'settled', 500, '2020-01');
    await enter(await createRun(revision, lead, { status: 'finished' }), 'settled', 3);

    const response = await (await as(lead)).get(`/teams/${team.id}/usage`);
    expect(response.status).toBe(200);
    expect(response.body.month).toBe(new Date().toISOString().slice(0, 7));
    expect(response.body.people).toMatchObject([
      {
        userId: chemist.id,
        usedCpuSeconds: 19.75,
        reservedCpuSeconds: 60,
        runCount: 3,
        isOverridden: false,
        quota: { cpuSecondsPerMonth: 7_200 },
      },
      { userId: lead.id, usedCpuSeconds: 3, reservedCpuSeconds: 0, runCount: 1 },
      { userId: reader.id, usedCpuSeconds: 0, reservedCpuSeconds: 0, runCount: 0 },
    ]);
    const own = await (await as(chemist)).get(`/teams/${team.id}/own-quota`);
    expect(own.body).toMatchObject({ usedCpuSeconds: 19.75, reservedCpuSeconds: 60, runningCount: 1 });
  });

  it('is for leads and admins', async () => {
    expect((await (await as(chemist)).get(`/teams/${team.id}/usage`)).status).toBe(403);
    expect((await (await as(admin)).get(`/teams/${team.id}/usage`)).status).toBe(200);
  });
});
