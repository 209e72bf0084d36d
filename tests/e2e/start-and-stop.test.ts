import { once } from 'node:events';
import { existsSync, readFileSync, rmSync } from 'node:fs';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { type BuiltServer, startBuiltServer } from '../support/built-server.js';
import { createTemporaryFolder } from '../support/config.js';

let folder: string;
let server: BuiltServer;
let isStarted = false;
const start = (environment: Record<string, string> = {}) =>
  startBuiltServer({ dataDirectory: join(folder, 'data'), environment: { DEMO: 'false', ...environment } });
const databaseProcess = () => Number(readFileSync(join(folder, 'data', 'mariadb', 'm.pid'), 'utf8'));

beforeAll(async () => {
  folder = createTemporaryFolder();
  server = await start({ ADMIN_EMAIL: 'first@example.org' });
  isStarted = true;
});
afterAll(async () => {
  if (isStarted) await server.stop();
  rmSync(folder, { recursive: true, force: true });
});

describe('the built product', () => {
  it('prints its address and tells how the first admin signs in', async () => {
    expect(server.output()).toContain(server.url);
    const password = /first@example\.org\s+(\S+)/.exec(server.output())?.[1];
    const response = await fetch(`${server.url}/api/v1/session`, {
      method: 'POST',
      headers: { 'Content-Type': 'application/json', 'X-Isoloom-Request': '1' },
      body: JSON.stringify({ email: 'first@example.org', password }),
    });
    expect(response.status).toBe(200);
    expect(await response.json()).toMatchObject({ user: { email: 'first@example.org', isAdmin: true } });
  });

  it('serves pages and API on one port', async () => {
    const page = await fetch(`${server.url}/unknowns`, { headers: { Accept: 'text/html' } });
    const html = await page.text();
    expect(html).toContain('<div id="root">');
    const script = /<script[^>]* src="([^"]+)"/.exec(html)?.[1] ?? '';
    expect((await fetch(server.url + script)).headers.get('content-type')).toContain('javascript');
    expect((await fetch(`${server.url}/api/v1/me`)).status).toBe(401);
  });

  it('refuses a second server on the same data', async () => {
    await expect(start()).rejects.toThrow(`process ${server.process.pid}`);
  });

  it('names the variable that has a bad value', async () => {
    await expect(start({ COMPUTE_THREADS: 'many' })).rejects.toThrow('COMPUTE_THREADS: expected a whole number');
  });

  it('stops cleanly, database included, and is back within seconds', async () => {
    const database = databaseProcess();
    expect(await server.stop()).toBe(0);
    expect(existsSync(`/proc/${database}/exe`)).toBe(false);
    const startedAt = performance.now();
    server = await start();
    // Far above the second or two it takes: the machine may be busy.
    expect(performance.now() - startedAt).toBeLessThan(20_000);
    expect(server.output()).not.toContain('schema changes');
    expect(server.output()).not.toContain('first@example.org');
  });

  it('starts again after it was killed', async () => {
    const orphan = databaseProcess();
    const exited = once(server.process, 'exit');
    server.process.kill('SIGKILL');
    await exited;
    server = await start();
    expect(existsSync(`/proc/${orphan}/exe`)).toBe(false);
    expect(await server.stop()).toBe(0);
  });
});
