import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { AuditEvent } from '../../../server/models/audit-event.js';
import { User } from '../../../server/models/user.js';
import { createMember, createTeam, createUser, PASSWORD } from '../../support/factories.js';
import { createTestApp, type TestApp } from '../../support/test-app.js';

let server: TestApp;
let admin: User;
beforeAll(async () => {
  server = await createTestApp();
  admin = await createUser({ isAdmin: true, name: 'Ada Admin' });
});
afterAll(async () => {
  await server.close();
});

describe('the list of people', () => {
  it('shows everybody with their teams, to admins only', async () => {
    const team = await createTeam({ name: 'Weld' });
    const lead = await createMember(team, 'lead');
    const response = await (await server.as(admin)).get('/users');
    expect(response.status).toBe(200);
    expect(response.body.users).toHaveLength(await User.count());
    expect(response.body.users.find(({ id }: { id: string }) => id === lead.id)).toMatchObject({
      email: lead.email,
      isAdmin: false,
      isDisabled: false,
      teams: [{ teamId: team.id, teamName: 'Weld', role: 'lead' }],
      abilities: { update: true, issueResetLink: true },
    });
    expect(response.body.users.find(({ id }: { id: string }) => id === admin.id).abilities).toEqual({
      update: false,
      issueResetLink: true,
    });
    expect(response.text).not.toContain('$2');
    expect((await (await server.as(lead)).get('/users')).status).toBe(403);
    expect((await (await server.as()).get('/users')).status).toBe(401);
  });
});

describe('changing a person', () => {
  it('disables an account: signed out at once, and no way back in', async () => {
    const user = await createUser();
    const client = await server.as(user);
    const response = await (await server.as(admin)).patch(`/users/${user.id}`, { isDisabled: true });
    expect(response.status).toBe(200);
    expect(response.body).toMatchObject({ id: user.id, isDisabled: true, isAdmin: false });
    expect((await client.get('/me')).status).toBe(401);
    const anonymous = await server.as();
    expect((await anonymous.post('/session', { email: user.email, password: PASSWORD })).status).toBe(401);
    expect(await AuditEvent.findOne({ where: { action: 'user.update', subjectId: user.id } })).toMatchObject({
      actorId: admin.id,
      detail: { before: { isAdmin: false, isDisabled: false }, after: { isAdmin: false, isDisabled: true } },
    });
    expect((await (await server.as(admin)).patch(`/users/${user.id}`, { isDisabled: false })).body.isDisabled).toBe(false);
    expect((await anonymous.post('/session', { email: user.email, password: PASSWORD })).status).toBe(200);
  });

  it('makes an admin, who may then do the same', async () => {
    const user = await createUser();
    const client = await server.as(user);
    expect((await client.patch(`/users/${user.id}`, { isAdmin: true })).status).toBe(403);
    await (await server.as(admin)).patch(`/users/${user.id}`, { isAdmin: true });
    expect((await client.get('/users')).status).toBe(200);
    expect((await client.get('/me')).body.abilities).toEqual({ createTeam: true, manageUsers: true, readAudit: true });
    await (await server.as(admin)).patch(`/users/${user.id}`, { isAdmin: false });
    expect((await client.get('/users')).status).toBe(403);
  });

  it('is not possible for oneself, so that an installation keeps an admin', async () => {
    const client = await server.as(admin);
    expect((await client.patch(`/users/${admin.id}`, { isAdmin: false })).status).toBe(403);
    expect((await client.patch(`/users/${admin.id}`, { isDisabled: true })).status).toBe(403);
  });

  it('leaves one admin when two demote each other at the same time', async () => {
    const [first, second] = [await createUser({ isAdmin: true }), await createUser({ isAdmin: true })];
    await User.update({ isAdmin: false }, { where: { id: admin.id } });
    const [firstClient, secondClient] = [await server.as(first), await server.as(second)];
    const answers = await Promise.all([
      firstClient.patch(`/users/${second.id}`, { isAdmin: false }),
      secondClient.patch(`/users/${first.id}`, { isAdmin: false }),
    ]);
    expect(answers.filter(({ status }) => status === 200)).toHaveLength(1);
    expect(await User.count({ where: { isAdmin: true } })).toBe(1);
    await User.update({ isAdmin: true }, { where: { id: admin.id } });
  });

  it('names what is wrong and changes nothing', async () => {
    const user = await createUser();
    const client = await server.as(admin);
    const response = await client.patch(`/users/${user.id}`, { isDisabled: 'yes' });
    expect(response.status).toBe(422);
    expect(response.body.error.issues).toEqual([{ path: 'isDisabled', message: 'expected true or false' }]);
    expect((await client.patch('/users/00000000-0000-4000-8000-000000000000', { isAdmin: true })).status).toBe(404);
    await user.reload();
    expect(user.isDisabled).toBe(false);
  });
});

describe('a reset link from an admin', () => {
  it('sets a new password where no mail is sent, and leaves a trace', async () => {
    const user = await createUser();
    const client = await server.as(user);
    const response = await (await server.as(admin)).post(`/users/${user.id}/password-reset`);
    expect(response.status).toBe(201);
    const { link, expiresAt } = response.body as { link: string; expiresAt: string };
    expect(link).toMatch(new RegExp(`^${server.context.config.publicUrl}/reset/[\\w-]{43}$`));
    expect(new Date(expiresAt).getTime() - Date.now()).toBeLessThanOrEqual(3_600_000);
    expect(await AuditEvent.count({ where: { action: 'user.issueResetLink', actorId: admin.id, subjectId: user.id } })).toBe(1);
    expect(JSON.stringify(await AuditEvent.findAll())).not.toContain(link.split('/').pop());

    const anonymous = await server.as();
    expect((await anonymous.post(`/password-resets/${link.split('/').pop()}`, { password: 'spun from a new fleece' })).status).toBe(204);
    expect((await client.get('/me')).status).toBe(401);
    expect((await anonymous.post('/session', { email: user.email, password: 'spun from a new fleece' })).status).toBe(200);
  });

  it('is not made for a disabled account, nor by others than admins', async () => {
    const user = await createUser({ isDisabled: true });
    const response = await (await server.as(admin)).post(`/users/${user.id}/password-reset`);
    expect(response.status).toBe(409);
    expect(response.body.error.code).toBe('accountDisabled');
    expect((await (await server.as(await createMember(await createTeam(), 'lead'))).post(`/users/${user.id}/password-reset`)).status).toBe(
      403,
    );
    expect((await (await server.as(admin)).post('/users/00000000-0000-4000-8000-000000000000/password-reset')).status).toBe(404);
  });
});

describe('the audit', () => {
  it('lists changes, newest first and page by page, to admins only', async () => {
    const client = await server.as(admin);
    for (const name of ['First', 'Second', 'Third']) await client.post('/teams', { name });
    const page = await client.get('/audit?pageSize=2');
    expect(page.status).toBe(200);
    expect(page.body).toMatchObject({ page: 1, pageSize: 2, total: await AuditEvent.count() });
    expect(page.body.rows.map(({ subject }: { subject: string }) => subject)).toEqual(['team Third', 'team Second']);
    expect(page.body.rows[0]).toMatchObject({ actor: 'Ada Admin', action: 'team.create' });
    expect((await client.get('/audit?pageSize=2&page=2')).body.rows[0].subject).toBe('team First');
    const bad = await client.get('/audit?page=0&pageSize=100000');
    expect(bad.body.error.issues).toEqual([
      { path: 'page', message: 'expected at least 1' },
      { path: 'pageSize', message: 'expected at most 200' },
    ]);
    expect((await (await server.as(await createUser())).get('/audit')).status).toBe(403);
    expect((await (await server.as()).get('/audit')).status).toBe(401);
  });
});
