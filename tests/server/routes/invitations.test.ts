import { afterAll, afterEach, beforeAll, beforeEach, describe, expect, it, vi } from 'vitest';
import { AuditEvent } from '../../../server/models/audit-event.js';
import { Invitation } from '../../../server/models/invitation.js';
import { Membership } from '../../../server/models/membership.js';
import { OutboxMail } from '../../../server/models/outbox-mail.js';
import type { Team } from '../../../server/models/team.js';
import { User } from '../../../server/models/user.js';
import { FAILURES_BEFORE_LOCK } from '../../../server/sessions/sign-in-attempts.js';
import { createMember, createTeam, createUser, PASSWORD } from '../../support/factories.js';
import { cookiesOf, createTestApp, TestClient, type TestApp } from '../../support/test-app.js';

const NEW_PASSWORD = 'warp and weft and heddle';
const DAY = 86_400_000;

let server: TestApp;
let team: Team;
let lead: User;
let anonymous: TestClient;
beforeAll(async () => {
  server = await createTestApp();
  anonymous = await server.as();
});
beforeEach(async () => {
  team = await createTeam();
  lead = await createMember(team, 'lead');
});
afterEach(() => {
  vi.useRealTimers();
});
afterAll(async () => {
  await server.close();
});

/** Invites and returns the secret of the link. */
const invite = async (email: string, role = 'chemist'): Promise<string> => {
  const response = await (await server.as(lead)).post(`/teams/${team.id}/invitations`, { email, role });
  expect(response.status).toBe(201);
  return String(response.body.link).split('/').pop() ?? '';
};

describe('inviting', () => {
  it('answers with the invitation and its link, and puts the link into a mail', async () => {
    const response = await (
      await server.as(lead)
    ).post(`/teams/${team.id}/invitations`, { email: 'New.Chemist@Laboratory.test', role: 'chemist' });
    expect(response.status).toBe(201);
    const { invitation, link } = response.body as { invitation: { id: string; expiresAt: string }; link: string };
    expect(invitation).toMatchObject({
      email: 'new.chemist@laboratory.test',
      role: 'chemist',
      invitedBy: lead.name,
      abilities: { revoke: true },
    });
    expect(new Date(invitation.expiresAt).getTime() - Date.now()).toBeGreaterThan(7 * DAY - 60_000);
    expect(link).toMatch(new RegExp(`^${server.context.config.publicUrl}/invitation/[\\w-]{43}$`));
    const mail = await OutboxMail.findOne({ where: { recipient: 'new.chemist@laboratory.test' }, rejectOnEmpty: true });
    expect(mail.status).toBe('waiting');
    expect(mail.subject).toContain(team.name);
    expect(mail.body).toContain(link);
    const row = await Invitation.findByPk(invitation.id, { rejectOnEmpty: true });
    expect(JSON.stringify(row)).not.toContain(link.split('/').pop());
    const audit = await AuditEvent.findOne({ where: { subjectId: invitation.id }, rejectOnEmpty: true });
    expect(audit).toMatchObject({ action: 'invitation.create', actorId: lead.id, teamId: team.id, detail: { role: 'chemist' } });
  });

  it('is for leads and admins', async () => {
    const body = { email: 'someone@laboratory.test', role: 'reader' };
    for (const role of ['reader', 'chemist'] as const) {
      expect((await (await server.as(await createMember(team, role))).post(`/teams/${team.id}/invitations`, body)).status).toBe(403);
    }
    expect((await anonymous.post(`/teams/${team.id}/invitations`, body)).status).toBe(401);
    const outsider = await createMember(await createTeam(), 'lead');
    expect((await (await server.as(outsider)).post(`/teams/${team.id}/invitations`, body)).status).toBe(404);
    expect((await (await server.as(await createUser({ isAdmin: true }))).post(`/teams/${team.id}/invitations`, body)).status).toBe(201);
  });

  it('refuses bad input with every field, and saves nothing', async () => {
    const response = await (await server.as(lead)).post(`/teams/${team.id}/invitations`, { email: 'x', role: 'owner' });
    expect(response.status).toBe(422);
    expect(response.body.error.issues).toEqual([
      { path: 'email', message: 'expected an e-mail address' },
      { path: 'role', message: 'expected one of: chemist, lead, reader' },
    ]);
    expect(await Invitation.count({ where: { teamId: team.id } })).toBe(0);
  });

  it('refuses somebody who is a member already', async () => {
    const member = await createMember(team, 'reader');
    const response = await (await server.as(lead)).post(`/teams/${team.id}/invitations`, { email: member.email, role: 'lead' });
    expect(response.status).toBe(409);
    expect(response.body.error.code).toBe('alreadyMember');
  });

  it('replaces an open invitation of the same address', async () => {
    const old = await invite('twice@laboratory.test');
    const fresh = await invite('twice@laboratory.test', 'lead');
    expect((await anonymous.get(`/invitations/${old}`)).status).toBe(404);
    expect((await anonymous.get(`/invitations/${fresh}`)).body.role).toBe('lead');
    const list = await (await server.as(lead)).get(`/teams/${team.id}/members`);
    expect(list.body.invitations).toHaveLength(1);
  });
});

describe('an invitation link', () => {
  it('tells what it is for', async () => {
    const secret = await invite('tell@laboratory.test', 'reader');
    const response = await anonymous.get(`/invitations/${secret}`);
    expect(response.status).toBe(200);
    expect(response.body).toMatchObject({
      email: 'tell@laboratory.test',
      teamName: team.name,
      role: 'reader',
      invitedBy: lead.name,
      needsAccount: true,
    });
  });

  it('makes an account with name and password, joins the team and signs in', async () => {
    const secret = await invite('joins@laboratory.test');
    const response = await anonymous.post(`/invitations/${secret}`, { name: 'Joanna Joiner', password: NEW_PASSWORD });
    expect(response.status).toBe(200);
    expect(response.body.user).toMatchObject({ name: 'Joanna Joiner', email: 'joins@laboratory.test', isAdmin: false });
    expect(response.body.memberships).toMatchObject([{ teamId: team.id, role: 'chemist' }]);
    expect((await new TestClient(server.app, cookiesOf(response)).get('/me')).status).toBe(200);
    expect((await anonymous.post('/session', { email: 'joins@laboratory.test', password: NEW_PASSWORD })).status).toBe(200);
    const user = await User.findOne({ where: { email: 'joins@laboratory.test' }, rejectOnEmpty: true });
    expect(await AuditEvent.count({ where: { action: 'invitation.accept', actorId: user.id, teamId: team.id } })).toBe(1);
  });

  it('works once', async () => {
    const secret = await invite('once@laboratory.test');
    const answers = await Promise.all(
      [1, 2].map((n) => anonymous.post(`/invitations/${secret}`, { name: `Once ${n}`, password: NEW_PASSWORD })),
    );
    expect(answers.filter(({ status }) => status === 200)).toHaveLength(1);
    expect(answers.filter(({ status }) => status === 404 || status === 409)).toHaveLength(1);
    const again = await anonymous.post(`/invitations/${secret}`, { name: 'Again', password: NEW_PASSWORD });
    expect(again.status).toBe(404);
    expect(again.body.error.code).toBe('linkUsedUp');
    expect(await User.count({ where: { email: 'once@laboratory.test' } })).toBe(1);
  });

  it('works for a week', async () => {
    const secret = await invite('late@laboratory.test');
    vi.useFakeTimers({ toFake: ['Date'], now: Date.now() + 7 * DAY + 1000 });
    expect((await anonymous.get(`/invitations/${secret}`)).status).toBe(404);
    expect((await anonymous.post(`/invitations/${secret}`, { name: 'Late', password: NEW_PASSWORD })).status).toBe(404);
    expect(await User.count({ where: { email: 'late@laboratory.test' } })).toBe(0);
  });

  it('refuses a short password, a password over 72 bytes and an empty name', async () => {
    const secret = await invite('short@laboratory.test');
    const short = await anonymous.post(`/invitations/${secret}`, { name: ' ', password: 'short' });
    expect(short.status).toBe(422);
    expect(short.body.error.issues).toEqual([
      { path: 'name', message: 'expected your name' },
      { path: 'password', message: 'expected at least 10 characters' },
    ]);
    const long = await anonymous.post(`/invitations/${secret}`, { name: 'Long', password: 'ü'.repeat(37) });
    expect(long.body.error.issues).toEqual([{ path: 'password', message: 'expected at most 72 bytes' }]);
    expect((await anonymous.get(`/invitations/${secret}`)).status).toBe(200);
  });

  it('answers the same for links that never were', async () => {
    expect((await anonymous.get(`/invitations/${'a'.repeat(43)}`)).body.error.code).toBe('linkUsedUp');
    expect((await anonymous.get('/invitations/short')).status).toBe(422);
  });

  describe('of an address with an account', () => {
    it('joins the team when the password of the account is given', async () => {
      const user = await createUser();
      const secret = await invite(user.email, 'reader');
      expect((await anonymous.get(`/invitations/${secret}`)).body.needsAccount).toBe(false);
      const response = await anonymous.post(`/invitations/${secret}`, { name: 'Ignored', password: PASSWORD });
      expect(response.status).toBe(200);
      expect(response.body.user).toMatchObject({ id: user.id, name: user.name });
      expect(await Membership.count({ where: { userId: user.id, teamId: team.id, role: 'reader' } })).toBe(1);
    });

    it('does not open the account to the person who invites', async () => {
      const admin = await createUser({ isAdmin: true });
      const secret = await invite(admin.email);
      const response = await anonymous.post(`/invitations/${secret}`, { name: 'Thief', password: 'a password of my own' });
      expect(response.status).toBe(401);
      expect(response.headers['set-cookie']).toBeUndefined();
      expect(await Membership.count({ where: { userId: admin.id } })).toBe(0);
      expect((await anonymous.post('/session', { email: admin.email, password: PASSWORD })).status).toBe(200);
    });

    it('counts wrong passwords like the sign-in page', async () => {
      const user = await createUser();
      const secret = await invite(user.email);
      for (let i = 0; i < FAILURES_BEFORE_LOCK; i++) {
        expect((await anonymous.post(`/invitations/${secret}`, { name: 'Guess', password: `guess number ${i}` })).status).toBe(401);
      }
      expect((await anonymous.post(`/invitations/${secret}`, { name: 'Guess', password: PASSWORD })).status).toBe(429);
      expect((await anonymous.post('/session', { email: user.email, password: PASSWORD })).status).toBe(429);
    });
  });
});

describe('withdrawing an invitation', () => {
  it('makes the link useless', async () => {
    const secret = await invite('gone@laboratory.test');
    const client = await server.as(lead);
    const [invitation] = (await client.get(`/teams/${team.id}/members`)).body.invitations as Array<{ id: string }>;
    expect((await client.delete(`/teams/${team.id}/invitations/${invitation.id}`)).status).toBe(204);
    expect((await anonymous.get(`/invitations/${secret}`)).status).toBe(404);
    expect((await client.get(`/teams/${team.id}/members`)).body.invitations).toEqual([]);
    const again = await client.delete(`/teams/${team.id}/invitations/${invitation.id}`);
    expect(again.status).toBe(409);
    expect(again.body.error.code).toBe('invitationClosed');
    expect(await AuditEvent.count({ where: { action: 'invitation.revoke', subjectId: invitation.id } })).toBe(1);
  });

  it('needs the invitation to be of the team in the address', async () => {
    await invite('elsewhere@laboratory.test');
    const invitation = await Invitation.findOne({ where: { email: 'elsewhere@laboratory.test' }, rejectOnEmpty: true });
    const otherTeam = await createTeam();
    const otherLead = await createMember(otherTeam, 'lead');
    expect((await (await server.as(otherLead)).delete(`/teams/${otherTeam.id}/invitations/${invitation.id}`)).status).toBe(404);
    expect((await (await server.as(otherLead)).delete(`/teams/${team.id}/invitations/${invitation.id}`)).status).toBe(404);
    expect(
      (await (await server.as(await createMember(team, 'chemist'))).delete(`/teams/${team.id}/invitations/${invitation.id}`)).status,
    ).toBe(403);
    await invitation.reload();
    expect(invitation.revokedAt).toBeNull();
  });
});
