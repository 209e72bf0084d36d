import bcrypt from 'bcryptjs';
import jwt from 'jsonwebtoken';
import request from 'supertest';
import { afterAll, afterEach, beforeAll, describe, expect, it, vi } from 'vitest';
import { AuditEvent } from '../../../server/models/audit-event.js';
import { Membership } from '../../../server/models/membership.js';
import { Session } from '../../../server/models/session.js';
import { hashPassword } from '../../../server/sessions/passwords.js';
import { FAILURES_BEFORE_LOCK } from '../../../server/sessions/sign-in-attempts.js';
import { createMember, createTeam, createUser, PASSWORD } from '../../support/factories.js';
import { cookiesOf, createTestApp, TestClient, type TestApp } from '../../support/test-app.js';

let server: TestApp;
beforeAll(async () => {
  server = await createTestApp();
});
afterAll(async () => {
  await server.close();
});
afterEach(() => {
  vi.useRealTimers();
});

const signIn = async (email: string, password = PASSWORD) => await (await server.as()).post('/session', { email, password });
/** Moves the clock of this process; timers go on as they are. */
const travel = (milliseconds: number) => vi.useFakeTimers({ toFake: ['Date'], now: Date.now() + milliseconds });
const signedIn = async (email: string) => new TestClient(server.app, cookiesOf(await signIn(email)));
const MINUTE = 60_000;

describe('signing in', () => {
  it('tells who signed in, with teams and abilities, and sets cookies that scripts cannot read', async () => {
    const team = await createTeam();
    const user = await createMember(team, 'chemist');
    const response = await signIn(user.email.toUpperCase());
    expect(response.status).toBe(200);
    expect(response.body).toEqual({
      user: { id: user.id, name: user.name, email: user.email, isAdmin: false },
      memberships: [
        {
          teamId: team.id,
          teamName: team.name,
          role: 'chemist',
          isDemo: false,
          abilities: {
            readUnknowns: true,
            createUnknown: true,
            createFragment: true,
            manageMembers: false,
            readUsage: false,
            setQuotas: false,
          },
        },
      ],
      abilities: { createTeam: false, manageUsers: false, readAudit: false },
    });
    const cookies = response.headers['set-cookie'] as unknown as string[];
    expect(cookies).toHaveLength(2);
    for (const cookie of cookies) expect(cookie).toMatch(/; HttpOnly; SameSite=Strict$/);
    expect(cookies[1]).toContain('Path=/api/v1/session;');
    expect(await AuditEvent.count({ where: { action: 'session.start', actorId: user.id } })).toBe(1);
  });

  it('gives a wrong password, an unknown address and a disabled account the same answer', async () => {
    const user = await createUser();
    const disabled = await createUser({ isDisabled: true });
    const answers = [await signIn(user.email, 'not the password'), await signIn('nobody@laboratory.test'), await signIn(disabled.email)];
    for (const answer of answers) {
      expect(answer.status).toBe(401);
      expect(answer.body).toEqual({ error: { code: 'signInFailed', message: 'E-mail address or password is not right.' } });
      expect(answer.headers['set-cookie']).toBeUndefined();
    }
  });

  it('compares a password also when there is no such account, so that the time tells nothing', async () => {
    const user = await createUser();
    const compare = vi.spyOn(bcrypt, 'compare');
    const costs = [];
    for (const email of [user.email, 'absent@laboratory.test']) {
      compare.mockClear();
      await signIn(email, 'not the password');
      expect(compare).toHaveBeenCalledTimes(1);
      costs.push(bcrypt.getRounds(compare.mock.calls[0][1]));
    }
    expect(costs[0]).toBe(costs[1]);
    compare.mockRestore();
  });

  it('does not let a longer password pass for its first 72 bytes', async () => {
    const user = await createUser();
    const long = 'x'.repeat(72);
    await user.update({ passwordHash: await hashPassword(server.context.config, long) });
    expect((await signIn(user.email, `${long}y`)).status).toBe(401);
    expect((await signIn(user.email, long)).status).toBe(200);
  });

  it('locks an address for a while after several wrong passwords, whether or not there is an account', async () => {
    const user = await createUser();
    for (const email of [user.email, 'ghost@laboratory.test']) {
      for (let i = 0; i < FAILURES_BEFORE_LOCK; i++) expect((await signIn(email, 'wrong wrong')).status).toBe(401);
      const locked = await signIn(email);
      expect(locked.status).toBe(429);
      expect(locked.body.error.code).toBe('tooManyRequests');
      expect(locked.body.error.message).toMatch(/Try again in 15 minutes/);
      expect(Number(locked.headers['retry-after'])).toBeGreaterThan(800);
    }
    travel(16 * MINUTE);
    expect((await signIn(user.email)).status).toBe(200);
  });

  it('counts attempts that arrive at the same time one by one', async () => {
    const user = await createUser();
    const answers = await Promise.all(Array.from({ length: FAILURES_BEFORE_LOCK + 4 }, () => signIn(user.email, 'wrong wrong')));
    expect(answers.filter(({ status }) => status === 401)).toHaveLength(FAILURES_BEFORE_LOCK);
    expect(answers.filter(({ status }) => status === 429)).toHaveLength(4);
  });

  it('forgets wrong passwords after a right one', async () => {
    const user = await createUser();
    for (let round = 0; round < 2; round++) {
      for (let i = 1; i < FAILURES_BEFORE_LOCK; i++) expect((await signIn(user.email, 'wrong wrong')).status).toBe(401);
      expect((await signIn(user.email)).status).toBe(200);
    }
  });

  it('names every field that is missing or wrong', async () => {
    const response = await (await server.as()).post('/session', { email: 'no address' });
    expect(response.status).toBe(422);
    expect(response.body.error.code).toBe('invalidInput');
    expect(response.body.error.issues).toEqual([
      { path: 'email', message: 'expected an e-mail address' },
      { path: 'password', message: 'expected your password' },
    ]);
  });
});

describe('a session', () => {
  it('is refused without cookies, with a forged token and with a token of the other kind', async () => {
    const user = await createUser();
    const cookies = cookiesOf(await signIn(user.email));
    const refresh = cookies.find((cookie) => cookie.startsWith('isoloom_refresh='))?.split('=')[1];
    const sid = (await Session.findOne({ where: { userId: user.id }, rejectOnEmpty: true })).id;
    const forged = jwt.sign({ sid }, 'another key', { audience: 'access' });
    const unsigned = jwt.sign({ sid }, '', { algorithm: 'none', audience: 'access' });
    for (const token of [undefined, '', 'nonsense', forged, unsigned, refresh]) {
      const client = new TestClient(server.app, token === undefined ? [] : [`isoloom_access=${token}`]);
      const response = await client.get('/me');
      expect(response.status).toBe(401);
      expect(response.body.error.code).toBe('notSignedIn');
    }
  });

  it('needs a fresh access token after a quarter of an hour', async () => {
    const user = await createUser();
    const client = await signedIn(user.email);
    expect((await client.get('/me')).status).toBe(200);
    travel(16 * MINUTE);
    expect((await client.get('/me')).status).toBe(401);
    const refreshed = await client.post('/session/refresh');
    expect(refreshed.status).toBe(200);
    expect(refreshed.body.user.id).toBe(user.id);
    expect((await new TestClient(server.app, cookiesOf(refreshed)).get('/me')).status).toBe(200);
  });

  it('goes on with each new refresh token, and ends for everybody when an old one comes back', async () => {
    const user = await createUser();
    const first = await signedIn(user.email);
    const second = new TestClient(server.app, cookiesOf(await first.post('/session/refresh')));
    const third = new TestClient(server.app, cookiesOf(await second.post('/session/refresh')));
    expect((await third.get('/me')).status).toBe(200);

    const replay = await first.post('/session/refresh');
    expect(replay.status).toBe(401);
    expect(replay.body.error.code).toBe('sessionEnded');
    expect(cookiesOf(replay)).toEqual([]);
    expect((await third.get('/me')).status).toBe(401);
    expect((await third.post('/session/refresh')).status).toBe(401);
    const session = await Session.findOne({ where: { userId: user.id }, rejectOnEmpty: true });
    expect(session.endReason).toBe('replayed');
    expect(await AuditEvent.count({ where: { action: 'session.replayed', actorId: user.id } })).toBe(1);
  });

  it('lets only one of two refreshes with the same token through', async () => {
    const user = await createUser();
    const client = await signedIn(user.email);
    const answers = await Promise.all([client.post('/session/refresh'), client.post('/session/refresh')]);
    expect(answers.map(({ status }) => status).sort()).toEqual([200, 401]);
  });

  it('does not spread a replay to other sessions of the same person', async () => {
    const user = await createUser();
    const stolen = await signedIn(user.email);
    const other = await signedIn(user.email);
    await stolen.post('/session/refresh');
    await stolen.post('/session/refresh');
    expect((await other.get('/me')).status).toBe(200);
  });

  it('ends after two weeks without use, and after two months however busy', async () => {
    const user = await createUser();
    const idle = await signedIn(user.email);
    let busy = await signedIn(user.email);
    const day = 24 * 60 * MINUTE;
    const start = Date.now();
    for (let days = 10; days <= 50; days += 10) {
      vi.useFakeTimers({ toFake: ['Date'], now: start + days * day });
      const response = await busy.post('/session/refresh');
      expect(response.status).toBe(200);
      busy = new TestClient(server.app, cookiesOf(response));
      if (days === 20) expect((await idle.post('/session/refresh')).status).toBe(401);
    }
    vi.useFakeTimers({ toFake: ['Date'], now: start + 61 * day });
    expect((await busy.post('/session/refresh')).status).toBe(401);
  });

  it('is gone for a disabled person at once', async () => {
    const user = await createUser();
    const client = await signedIn(user.email);
    await user.update({ isDisabled: true });
    expect((await client.get('/me')).status).toBe(401);
    expect((await client.post('/session/refresh')).status).toBe(401);
  });

  it('follows a change of role at once', async () => {
    const team = await createTeam();
    const user = await createMember(team, 'reader');
    const client = await signedIn(user.email);
    expect((await client.get('/me')).body.memberships[0].abilities.createUnknown).toBe(false);
    await Membership.update({ role: 'lead' }, { where: { userId: user.id } });
    expect((await client.get('/me')).body.memberships[0].abilities).toMatchObject({ createUnknown: true, manageMembers: true });
  });

  it('is left by signing out, which also works when the access token has run out', async () => {
    const user = await createUser();
    const client = await signedIn(user.email);
    travel(20 * MINUTE);
    const response = await client.delete('/session');
    expect(response.status).toBe(204);
    const cleared = response.headers['set-cookie'] as unknown as string[];
    expect(cleared.map((line) => line.split(';')[0])).toEqual(['isoloom_access=', 'isoloom_refresh=']);
    expect((await client.post('/session/refresh')).status).toBe(401);
    expect((await Session.findOne({ where: { userId: user.id }, rejectOnEmpty: true })).endReason).toBe('signedOut');
    expect((await (await server.as()).delete('/session')).status).toBe(204);
  });
});

describe('the list of sessions', () => {
  it('shows the own open ones with the present one marked, and ends the others', async () => {
    const user = await createUser();
    await server.as(await createUser());
    const phone = new TestClient(
      server.app,
      cookiesOf(
        await request(server.app)
          .post('/api/v1/session')
          .set({ 'X-Isoloom-Request': '1', 'User-Agent': 'Phone' })
          .send({ email: user.email, password: PASSWORD }),
      ),
    );
    const desk = await signedIn(user.email);
    const { sessions } = (await desk.get('/sessions')).body as { sessions: Array<{ id: string; userAgent: string; isCurrent: boolean }> };
    expect(sessions.filter(({ isCurrent }) => isCurrent)).toHaveLength(1);
    expect(sessions).toHaveLength(2);
    const other = sessions.find(({ userAgent }) => userAgent === 'Phone');
    expect(other?.isCurrent).toBe(false);

    expect((await desk.delete(`/sessions/${other?.id}`)).status).toBe(204);
    expect((await phone.get('/me')).status).toBe(401);
    expect((await phone.post('/session/refresh')).status).toBe(401);
    expect((await desk.get('/sessions')).body.sessions).toHaveLength(1);
  });

  it('does not end sessions of other people', async () => {
    const stranger = await createUser();
    const theirs = await signedIn(stranger.email);
    const { sessions } = (await theirs.get('/sessions')).body as { sessions: Array<{ id: string }> };
    const client = await server.as(await createUser());
    expect((await client.delete(`/sessions/${sessions[0].id}`)).status).toBe(404);
    expect((await theirs.get('/me')).status).toBe(200);
    expect((await client.delete('/sessions/not-an-id')).status).toBe(422);
  });
});

describe('requests that change something', () => {
  it('are refused without the header of the client', async () => {
    const user = await createUser();
    const response = await request(server.app).post('/api/v1/session').send({ email: user.email, password: PASSWORD });
    expect(response.status).toBe(403);
    expect(response.body.error.code).toBe('missingRequestHeader');
    const cookies = cookiesOf(await signIn(user.email));
    expect((await request(server.app).delete('/api/v1/session').set('Cookie', cookies)).status).toBe(403);
    expect((await new TestClient(server.app, cookies).get('/me')).status).toBe(200);
  });
});
