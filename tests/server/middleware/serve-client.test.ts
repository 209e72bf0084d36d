import { mkdirSync, rmSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import express from 'express';
import request from 'supertest';
import { afterAll, beforeAll, expect, it } from 'vitest';
import { serveClient } from '../../../server/middleware/serve-client.js';
import { createTemporaryFolder } from '../../support/config.js';

let folder: string;
let app: express.Express;
beforeAll(() => {
  folder = createTemporaryFolder();
  mkdirSync(join(folder, 'assets'));
  writeFileSync(join(folder, 'index.html'), '<title>page</title>');
  writeFileSync(join(folder, 'assets', 'main-abc123.js'), 'export {};');
  app = express().use(serveClient(folder));
});
afterAll(() => rmSync(folder, { recursive: true, force: true }));

it('answers deep links with the page, always asked for anew', async () => {
  for (const path of ['/', '/index.html', '/unknowns/123/runs/4', '/apiary']) {
    const response = await request(app).get(path).set('Accept', 'text/html,*/*').expect(200);
    expect(response.text).toContain('<title>page</title>');
    expect(response.headers['cache-control']).toBe('no-cache');
  }
});

it('lets browsers keep built assets', async () => {
  const response = await request(app).get('/assets/main-abc123.js').expect(200);
  expect(response.headers['cache-control']).toContain('immutable');
});

it('does not answer with the page for a missing asset, an address of the API, or a request for data', async () => {
  await request(app).get('/assets/main-old.js').set('Accept', 'text/html').expect(404);
  await request(app).get('/api/v1/nothing').set('Accept', 'text/html').expect(404);
  await request(app).get('/unknowns').set('Accept', 'application/json').expect(404);
  await request(app).post('/unknowns').expect(404);
  await request(app).get('/../package.json').set('Accept', 'application/json').expect(404);
});

it('serves nothing where nothing is built', async () => {
  const bare = express().use(serveClient(join(folder, 'absent')));
  await request(bare).get('/').set('Accept', 'text/html').expect(404);
});
