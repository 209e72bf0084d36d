import { rmSync } from 'node:fs';
import { pino } from 'pino';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { AppContext, DemoAccount } from '../../../server/app-context.js';
import { createEmbeddedQueue } from '../../../server/compute/embedded-queue.js';
import { createComputePool } from '../../../server/compute/pool.js';
import { readDemoFile, writeDemoFile } from '../../../server/demo/demo-accounts.js';
import { DEMO_TEAM, DEMO_UNKNOWNS } from '../../../server/demo/demo-data.js';
import { loadDemo } from '../../../server/demo/load-demo.js';
import { Comment } from '../../../server/models/comment.js';
import { Run } from '../../../server/models/run.js';
import { ShortlistItem } from '../../../server/models/shortlist-item.js';
import { Team } from '../../../server/models/team.js';
import { Unknown } from '../../../server/models/unknown.js';
import { User } from '../../../server/models/user.js';
import { createTemporaryFolder, createTestConfig } from '../../support/config.js';
import { createTestDatabase } from '../../support/database.js';
import { createUser } from '../../support/factories.js';
import { createTestApp, type TestApp } from '../../support/test-app.js';

const folders: string[] = [];
function createFolder(): string {
  const folder = createTemporaryFolder();
  folders.push(folder);
  return folder;
}
const compute = createComputePool({ threads: 2 });
afterAll(async () => {
  await compute.close();
  for (const folder of folders) rmSync(folder, { recursive: true });
});

describe('the demo, loaded by the real engine', () => {
  let testApp: TestApp;
  let accounts: readonly DemoAccount[];
  const said: string[] = [];

  beforeAll(async () => {
    testApp = await createTestApp({ compute, config: createTestConfig({ demo: true, dataDirectory: createFolder() }) });
    const { context } = testApp;
    Object.assign(context, { queue: createEmbeddedQueue({ compute, sequelize: context.sequelize, logger: context.logger }) });
    accounts = await loadDemo(context, (line) => said.push(line));
  }, 240_000);
  afterAll(async () => {
    await testApp.context.queue?.close();
    await testApp.close();
  });

  it('is marked as invented', async () => {
    expect(await Team.findAll()).toMatchObject([{ name: DEMO_TEAM, isDemo: true }]);
    expect(DEMO_TEAM).toContain('invented');
    expect(said[0]).toContain('invented');
  });

  it('has a run for each unknown that is to have one, with candidates', async () => {
    const runs = await Run.findAll();
    expect(runs).toHaveLength(DEMO_UNKNOWNS.filter(({ run }) => run).length);
    for (const run of runs) {
      expect(run).toMatchObject({ status: 'finished', complete: true, failure: null });
      expect(run.keptCount).toBeGreaterThan(0);
    }
    const statuses = (await Unknown.findAll({ order: [['number', 'ASC']] })).map(({ title, status }) => ({ title, status }));
    expect(statuses).toEqual(DEMO_UNKNOWNS.map(({ title, status }) => ({ title, status })));
  });

  it('has a shortlist with verdicts, and comments', async () => {
    expect((await ShortlistItem.findAll({ order: [['verdict', 'ASC']] })).map(({ verdict }) => verdict)).toEqual(['confirmed', 'refuted']);
    expect(await Comment.count()).toBe(DEMO_UNKNOWNS.reduce((sum, { comments }) => sum + comments.length, 0));
  });

  it('lets every role sign in with a password that was made here', async () => {
    expect(accounts.map(({ role }) => role)).toEqual(['chemist', 'lead', 'reader', 'admin']);
    expect(new Set(accounts.map(({ password }) => password)).size).toBe(4);
    const nobody = await testApp.as();
    for (const { email, password, role } of accounts) {
      const { status, body } = await nobody.post('/session', { email, password });
      expect(status).toBe(200);
      expect(body.user.isAdmin).toBe(role === 'admin');
    }
  });

  it('is not loaded again by a second start, which still knows the accounts', async () => {
    const counts = async () => [await User.count(), await Unknown.count(), await Run.count()];
    const before = await counts();
    expect(await loadDemo(testApp.context, () => expect.unreachable())).toEqual(accounts);
    expect(await counts()).toEqual(before);
  });

  it('is gone on with after a start that was broken off, and only with what is missing', async () => {
    const { config } = testApp.context;
    const last = await Unknown.findOne({ where: { title: DEMO_UNKNOWNS[6].title }, rejectOnEmpty: true });
    await last.update({ currentRevisionId: null });
    await testApp.context.sequelize.query('DELETE FROM evidence_revisions WHERE unknown_id = :id', { replacements: { id: last.id } });
    await last.destroy();
    writeDemoFile(config.dataDirectory, { ...readDemoFile(config.dataDirectory)!, isLoaded: false });
    const runCount = await Run.count();
    expect(await loadDemo(testApp.context, () => undefined)).toEqual(accounts);
    expect(await Unknown.count()).toBe(DEMO_UNKNOWNS.length);
    expect(await Run.count()).toBe(runCount);
    expect(await ShortlistItem.count()).toBe(2);
    expect(readDemoFile(config.dataDirectory)?.isLoaded).toBe(true);
  });
});

describe('the demo', () => {
  it('is kept out of a database that is in use, and when it is not wanted', async () => {
    const database = await createTestDatabase();
    const contextWith = (demo: boolean): AppContext => ({
      config: createTestConfig({ demo, dataDirectory: createFolder() }),
      sequelize: database.sequelize,
      logger: pino({ level: 'silent' }),
      mailer: { send: () => Promise.resolve(), close: () => undefined },
    });
    expect(await loadDemo(contextWith(false), () => expect.unreachable())).toEqual([]);
    await createUser();
    expect(await loadDemo(contextWith(true), () => expect.unreachable())).toEqual([]);
    expect(await Team.count()).toBe(0);
    await database.drop();
  });
});
