import { afterAll, afterEach, beforeAll, describe, expect, it, vi } from 'vitest';
import { AuditEvent } from '../../../server/models/audit-event.js';
import { OutboxMail } from '../../../server/models/outbox-mail.js';
import { PasswordReset } from '../../../server/models/password-reset.js';
import type { User } from '../../../server/models/user.js';
import { FAILURES_BEFORE_LOCK } from '../../../server/sessions/sign-in-attempts.js';
import { createUser, PASSWORD } from '../../support/factories.js';
import { createTestApp, type TestApp, type TestClient } from '../../support/test-app.js';

const NEW_PASSWORD = 'shuttle through the shed';
const HOUR = 3_600_000;

let server: TestApp;
let anonymous: TestClient;
beforeAll(async () => {
  server = await createTestApp();
  anonymous = await server.as();
});
afterEach(() => {
  vi.useRealTimers();
});
afterAll(async () => {
  await server.close();
});

const mailsTo = async (email: string) => await OutboxMail.findAll({ where: { recipient: email }, order: [['createdAt', 'ASC']] });
const signIn = async (user: User, password: string) => (await anonymous.post('/session', { email: user.email, password })).status;

/** Asks for a link and returns the secret in the mail. */
async function requestLink(user: User): Promise<string> {
  expect((await anonymous.post('/password-resets', { email: user.email })).status).toBe(204);
  const body = (await mailsTo(user.email)).at(-1)?.body ?? '';
  const secret = /\/reset\/([\w-]{43})\n/.exec(body)?.[1];
  expect(secret).toBeDefined();
  return secret ?? '';
}

describe('asking for a new password', () => {
  it('sends a link of this installation, and stores only its hash', async () => {
    const user = await createUser();
    const secret = await requestLink(user);
    const [mail] = await mailsTo(user.email);
    expect(mail.body).toContain(`${server.context.config.publicUrl}/reset/${secret}`);
    expect(JSON.stringify(await PasswordReset.findAll())).not.toContain(secret);
    expect(await AuditEvent.count({ where: { action: 'password.requestReset', actorId: user.id } })).toBe(1);
  });

  it('answers the same, in the same time, for an unknown address, and sends nothing', async () => {
    const user = await createUser();
    const timed = async (email: string) => {
      const start = performance.now();
      const response = await anonymous.post('/password-resets', { email });
      return { status: response.status, body: response.body as unknown, elapsed: performance.now() - start };
    };
    const known = await timed(user.email);
    const unknown = await timed('nobody@laboratory.test');
    expect(unknown.status).toBe(known.status);
    expect(unknown.body).toEqual(known.body);
    // Both wait for the same fixed time.
    for (const { elapsed } of [known, unknown]) expect(elapsed).toBeGreaterThan(240);
    expect(await mailsTo('nobody@laboratory.test')).toEqual([]);
  });

  it('sends nothing to a disabled account', async () => {
    const user = await createUser({ isDisabled: true });
    expect((await anonymous.post('/password-resets', { email: user.email })).status).toBe(204);
    expect(await mailsTo(user.email)).toEqual([]);
  });

  it('sends at most three mails an hour to one address', async () => {
    const user = await createUser();
    for (let i = 0; i < 5; i++) await anonymous.post('/password-resets', { email: user.email });
    expect(await mailsTo(user.email)).toHaveLength(3);
  });

  it('refuses what is no address', async () => {
    const response = await anonymous.post('/password-resets', { email: 'nobody' });
    expect(response.status).toBe(422);
    expect(response.body.error.issues).toEqual([{ path: 'email', message: 'expected an e-mail address' }]);
  });
});

describe('a reset link', () => {
  it('sets the password and signs out everywhere', async () => {
    const user = await createUser();
    const client = await server.as(user);
    const secret = await requestLink(user);
    expect((await anonymous.post(`/password-resets/${secret}`, { password: NEW_PASSWORD })).status).toBe(204);
    expect(await signIn(user, PASSWORD)).toBe(401);
    expect(await signIn(user, NEW_PASSWORD)).toBe(200);
    expect((await client.get('/me')).status).toBe(401);
    expect((await client.post('/session/refresh')).status).toBe(401);
    expect(await AuditEvent.count({ where: { action: 'password.reset', actorId: user.id } })).toBe(1);
  });

  it('works once, and makes earlier links useless', async () => {
    const user = await createUser();
    const older = await requestLink(user);
    const newer = await requestLink(user);
    const answers = await Promise.all([1, 2].map(() => anonymous.post(`/password-resets/${newer}`, { password: NEW_PASSWORD })));
    expect(answers.map(({ status }) => status).sort()).toEqual([204, 404]);
    for (const secret of [older, newer]) {
      const again = await anonymous.post(`/password-resets/${secret}`, { password: 'yet another password' });
      expect(again.status).toBe(404);
      expect(again.body.error.code).toBe('linkUsedUp');
    }
    expect(await signIn(user, NEW_PASSWORD)).toBe(200);
  });

  it('works for an hour', async () => {
    const user = await createUser();
    const secret = await requestLink(user);
    vi.useFakeTimers({ toFake: ['Date'], now: Date.now() + HOUR + 1000 });
    expect((await anonymous.post(`/password-resets/${secret}`, { password: NEW_PASSWORD })).status).toBe(404);
    vi.useRealTimers();
    expect(await signIn(user, PASSWORD)).toBe(200);
  });

  it('lifts a lock', async () => {
    const user = await createUser();
    for (let i = 0; i < FAILURES_BEFORE_LOCK; i++) await signIn(user, 'wrong wrong');
    expect(await signIn(user, PASSWORD)).toBe(429);
    const secret = await requestLink(user);
    await anonymous.post(`/password-resets/${secret}`, { password: NEW_PASSWORD });
    expect(await signIn(user, NEW_PASSWORD)).toBe(200);
  });

  it('does not bring a disabled account back', async () => {
    const user = await createUser();
    const secret = await requestLink(user);
    await user.update({ isDisabled: true });
    expect((await anonymous.post(`/password-resets/${secret}`, { password: NEW_PASSWORD })).status).toBe(404);
  });

  it('refuses a short password and stays good', async () => {
    const user = await createUser();
    const secret = await requestLink(user);
    const response = await anonymous.post(`/password-resets/${secret}`, { password: 'short' });
    expect(response.status).toBe(422);
    expect(response.body.error.issues).toEqual([{ path: 'password', message: 'expected at least 10 characters' }]);
    expect((await anonymous.post(`/password-resets/${secret}`, { password: NEW_PASSWORD })).status).toBe(204);
  });
});
