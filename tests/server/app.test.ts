import { Writable } from 'node:stream';
import express from 'express';
import { pino } from 'pino';
import request from 'supertest';
import { afterAll, afterEach, beforeAll, describe, expect, it, vi } from 'vitest';
import { problemResponse } from '../../shared/schemas/problem.js';
import { createApp } from '../../server/app.js';
import { compress } from '../../server/middleware/compress.js';
import { Team } from '../../server/models/team.js';
import type { User } from '../../server/models/user.js';
import { createUser, PASSWORD } from '../support/factories.js';
import { createTestApp, TestClient, type TestApp } from '../support/test-app.js';

let server: TestApp;
let admin: User;
beforeAll(async () => {
  server = await createTestApp();
  admin = await createUser({ isAdmin: true });
});
afterEach(() => {
  vi.restoreAllMocks();
});
afterAll(async () => {
  await server.close();
});

const appWith = (overrides: Partial<TestApp['context']['config']>) =>
  createApp({ ...server.context, config: { ...server.context.config, ...overrides } });

describe('headers', () => {
  it('let the page load nothing from elsewhere and nobody frame it', async () => {
    const { headers } = await request(server.app).get('/api/v1/installation');
    const policy = headers['content-security-policy'];
    expect(policy).toContain("default-src 'none'");
    expect(policy).toContain("script-src 'self';");
    expect(policy).not.toMatch(/script-src[^;]*unsafe/);
    expect(policy).toContain("connect-src 'self'");
    expect(policy).toContain("frame-ancestors 'none'");
    expect(policy).toContain("base-uri 'none'");
    expect(policy).not.toMatch(/https?:\/\//);
    expect(headers['x-content-type-options']).toBe('nosniff');
    // Links in mails carry a secret in their path.
    expect(headers['referrer-policy']).toBe('no-referrer');
    expect(headers['x-powered-by']).toBeUndefined();
  });

  it('ask for https only where the product is reached by https', async () => {
    const plain = await request(server.app).get('/api/v1/installation');
    expect(plain.headers['strict-transport-security']).toBeUndefined();
    expect(plain.headers['content-security-policy']).not.toContain('upgrade-insecure-requests');
    const secure = await request(appWith({ publicUrl: 'https://isoloom.test' })).get('/api/v1/installation');
    expect(secure.headers['strict-transport-security']).toMatch(/max-age=\d+/);
    expect(secure.headers['content-security-policy']).toContain('upgrade-insecure-requests');
  });

  it('keep answers of the API out of caches', async () => {
    expect((await request(server.app).get('/api/v1/installation')).headers['cache-control']).toBe('no-store');
  });

  it('mark the cookies of a session as secure where the configuration says so', async () => {
    const response = await new TestClient(appWith({ cookieSecure: true }), []).post('/session', { email: admin.email, password: PASSWORD });
    for (const cookie of response.headers['set-cookie'] as unknown as string[]) expect(cookie).toContain('; Secure');
  });

  it('name the request by an id of ours', async () => {
    const [first, second] = [
      await request(server.app).get('/api/v1/me').set('X-Request-Id', 'mine'),
      await request(server.app).get('/api/v1/me'),
    ];
    expect(first.headers['x-request-id']).toMatch(/^[0-9a-f-]{36}$/);
    expect(first.headers['x-request-id']).not.toBe(second.headers['x-request-id']);
  });
});

describe('failures', () => {
  it('are JSON problems, also for addresses below /api that are not there', async () => {
    for (const path of ['/api/v1/nothing', '/api/v2/me', '/api']) {
      const response = await request(server.app).get(path).set('Accept', 'text/html');
      expect(response.status).toBe(404);
      expect(problemResponse.parse(response.body).error.code).toBe('notFound');
    }
  });

  it('tell broken JSON, a body that is too large and a body that is no JSON', async () => {
    const client = await server.as(admin);
    const post = () => request(server.app).post('/api/v1/teams').set('X-Isoloom-Request', '1').set('Cookie', client.cookies.join('; '));
    const broken = await post().set('Content-Type', 'application/json').send('{"name":');
    expect(broken.status).toBe(400);
    expect(broken.body.error.code).toBe('invalidJson');
    const large = await post().send({ name: 'x'.repeat(600_000) });
    expect(large.status).toBe(413);
    expect(large.body.error.code).toBe('tooLarge');
    const form = await post().type('form').send('name=Form');
    expect(form.status).toBe(422);
    expect(form.body.error.issues).toEqual([{ path: 'name', message: 'expected a text' }]);
    const list = await post().send(['name']);
    expect(list.status).toBe(422);
    expect(await Team.count()).toBe(0);
  });

  it('of our own are logged in full and answered without a word about the inside', async () => {
    const lines: string[] = [];
    const logger = pino({ level: 'info' }, new Writable({ write: (chunk, _encoding, done) => (lines.push(String(chunk)), done()) }));
    vi.spyOn(Team, 'findAll').mockRejectedValue(new Error('SELECT secrets FROM inside'));
    const client = await server.as(admin);
    const response = await new TestClient(createApp({ ...server.context, logger }), client.cookies).get('/teams');
    expect(response.status).toBe(500);
    expect(response.body.error).toEqual({
      code: 'internal',
      message: 'Something went wrong on our side. Please try again.',
      requestId: response.headers['x-request-id'],
    });
    const logged = lines.find((line) => line.includes('SELECT secrets FROM inside'));
    expect(logged).toContain(response.headers['x-request-id']);
  });
});

describe('the log', () => {
  it('holds neither cookies nor the secrets of links', async () => {
    const lines: string[] = [];
    const logger = pino({ level: 'info' }, new Writable({ write: (chunk, _encoding, done) => (lines.push(String(chunk)), done()) }));
    const client = await server.as(admin);
    const logging = new TestClient(createApp({ ...server.context, logger }), client.cookies);
    const secret = 'S'.repeat(43);
    await logging.get(`/invitations/${secret}`);
    await logging.post(`/password-resets/${secret}`, { password: 'a password to be kept secret' });
    await logging.get('/me?search=confidential');
    const text = lines.join('');
    expect(text).toContain('/invitations/[secret]');
    expect(text).toContain('/password-resets/[secret]');
    for (const forbidden of [
      secret,
      'a password to be kept secret',
      'confidential',
      ...client.cookies.map((cookie) => cookie.split('=')[1]),
    ])
      expect(text).not.toContain(forbidden);
  });
});

describe('limits by address', () => {
  it('slow down guessing of passwords over many accounts', async () => {
    const client = new TestClient(createApp(server.context), []);
    let limited = null;
    for (let i = 0; i < 60 && limited === null; i++) {
      const response = await client.post('/session', { email: 'not an address' });
      if (response.status === 429) limited = response;
    }
    expect(limited?.body.error.code).toBe('tooManyRequests');
    expect(Number(limited?.headers['retry-after'])).toBeGreaterThan(0);
    // Other parts go on, and so do other addresses behind a proxy that is trusted.
    expect((await client.get('/installation')).status).toBe(200);
  });

  it('believe X-Forwarded-For only from proxies that are trusted', async () => {
    const exhaust = async (trustedProxies: number) => {
      const app = appWith({ trustedProxies });
      const send = (address: string) =>
        request(app).post('/api/v1/session').set({ 'X-Isoloom-Request': '1', 'X-Forwarded-For': address }).send({});
      for (let i = 0; i < 51; i++) await send('192.0.2.1');
      return (await send('192.0.2.2')).status;
    };
    expect(await exhaust(0)).toBe(429);
    expect(await exhaust(1)).toBe(422);
  });
});

describe('compression', () => {
  it('shrinks long answers and leaves event streams alone', async () => {
    const app = express();
    app.use(compress());
    app.get('/json', (_request, response) => void response.json({ text: 'x'.repeat(10_000) }));
    app.get('/events', (_request, response) => {
      response.setHeader('Content-Type', 'text/event-stream; charset=utf-8');
      response.end('data: x\n\n'.repeat(1_000));
    });
    expect((await request(app).get('/json')).headers['content-encoding']).toBe('gzip');
    expect((await request(app).get('/events')).headers['content-encoding']).toBeUndefined();
  });
});
