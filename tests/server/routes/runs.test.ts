import type { Server } from 'node:http';
import { pino } from 'pino';
import { afterAll, afterEach, beforeAll, beforeEach, describe, expect, it, vi } from 'vitest';
import { createEmbeddedQueue } from '../../../server/compute/embedded-queue.js';
import type { RunQueue } from '../../../server/compute/queue.js';
import { Membership } from '../../../server/models/membership.js';
import { Quota } from '../../../server/models/quota.js';
import { Run } from '../../../server/models/run.js';
import { UsageEntry } from '../../../server/models/usage-entry.js';
import type { User } from '../../../server/models/user.js';
import { createMember, createRevision, createTeam, createUnknown } from '../../support/factories.js';
import { listen, openStream } from '../../support/event-stream.js';
import { createFakeCompute, type FakeCompute, type ShardBehaviour, until } from '../../support/fake-compute.js';
import { createLaboratory, createUnknownWithEvidence, type Laboratory } from '../../support/laboratory.js';
import { createTestApp, type TestApp, type TestClient } from '../../support/test-app.js';

let testApp: TestApp;
let compute: FakeCompute;
let queue: RunQueue;
let server: Server;
/** How shards behave in the test at hand. */
let behaviour: ShardBehaviour = 'done';
let laboratory: Laboratory;
let chemist: TestClient;
let lead: TestClient;
let reader: TestClient;
let stranger: TestClient;

beforeAll(async () => {
  compute = createFakeCompute({ shardCount: 3, onShard: () => behaviour });
  testApp = await createTestApp({ compute });
  queue = createEmbeddedQueue({ compute, sequelize: testApp.context.sequelize, logger: pino({ level: 'silent' }) });
  Object.assign(testApp.context, { queue });
  server = await listen(testApp);
  laboratory = await createLaboratory();
  chemist = await testApp.as(laboratory.people.chemist);
  lead = await testApp.as(laboratory.people.lead);
  reader = await testApp.as(laboratory.people.reader);
  stranger = await testApp.as(await createMember(await createTeam(), 'lead'));
});
beforeEach(() => {
  behaviour = 'done';
});
afterEach(async () => {
  behaviour = 'done';
  const pump = setInterval(() => compute.release(), 5);
  await Promise.all((await Run.findAll({ where: { status: ['queued', 'running'] } })).map(({ id }) => queue.settled(id)));
  clearInterval(pump);
});
afterAll(async () => {
  await queue.close();
  server.closeAllConnections();
  server.close();
  await testApp.close();
});

const startOn = async (client: TestClient, body: object = {}, evidence?: Parameters<typeof createUnknownWithEvidence>[1]) => {
  const unknown = await createUnknownWithEvidence(laboratory, evidence);
  return { unknown, answer: await client.post(`/unknowns/${unknown.id}/runs`, body) };
};
/** A member of the laboratory with a quota of their own and nothing used of it. */
async function createLimited(figures: {
  cpuSecondsPerMonth?: number;
  candidatesPerRun?: number;
  runsAtOnce?: number;
}): Promise<{ user: User; client: TestClient }> {
  const user = await createMember(laboratory.team, 'chemist');
  await Quota.create({
    teamId: laboratory.team.id,
    userId: user.id,
    cpuSecondsPerMonth: null,
    candidatesPerRun: null,
    runsAtOnce: null,
    ...figures,
  });
  return { user, client: await testApp.as(user) };
}

describe('POST /unknowns/:unknownId/runs', () => {
  it('starts a run on the current revision and takes it to its end', async () => {
    const { unknown, answer } = await startOn(chemist, { keep: 5, maxSeconds: 60 });
    expect(answer.status).toBe(201);
    expect(answer.body).toMatchObject({
      number: 1,
      unknownCode: unknown.code,
      revisionId: unknown.currentRevisionId,
      revisionNumber: 1,
      formula: 'C4H10O',
      settings: { keep: 5, maxSeconds: 60 },
      startedBy: { id: laboratory.people.chemist.id },
      abilities: { cancel: true, export: true, editShortlist: true },
    });
    await queue.settled(answer.body.id);
    const { body } = await chemist.get(`/runs/${answer.body.id}`);
    expect(body).toMatchObject({
      status: 'finished',
      complete: true,
      constitutionCount: 3_000,
      survivorCount: 30,
      keptCount: 5,
      progress: null,
      failure: null,
    });
    expect((await unknown.reload()).status).toBe('inProgress');
  });

  it('freezes the settings in the evidence of the run and leaves the revision as it is', async () => {
    const { unknown, answer } = await startOn(chemist, { keep: 7, maxSeconds: null });
    const run = await Run.findByPk(answer.body.id, { rejectOnEmpty: true });
    expect(run.evidence.options).toMatchObject({ keep: 7, maxSeconds: null });
    const revision = await chemist.get(`/revisions/${unknown.currentRevisionId}`);
    expect(revision.body.evidence.options.keep).toBe(1000);
  });

  it('runs an older revision when asked for it, but none of another unknown', async () => {
    const unknown = await createUnknownWithEvidence(laboratory, { formula: 'C5H10O' });
    const first = unknown.currentRevisionId;
    await createRevision(unknown, laboratory.people.chemist, { formula: 'C6H12O' });
    expect((await chemist.post(`/unknowns/${unknown.id}/runs`, { revisionId: first })).body.formula).toBe('C5H10O');
    const other = await createUnknownWithEvidence(laboratory);
    const { status, body } = await chemist.post(`/unknowns/${unknown.id}/runs`, { revisionId: other.currentRevisionId });
    expect(status).toBe(422);
    expect(body.error.issues[0].path).toBe('revisionId');
  });

  it('wants evidence, and an unknown that is not shelved', async () => {
    const empty = await createUnknown(laboratory.team, laboratory.people.chemist);
    expect((await chemist.post(`/unknowns/${empty.id}/runs`, {})).body.error.code).toBe('noEvidence');
    const shelved = await createUnknownWithEvidence(laboratory);
    await shelved.update({ status: 'shelved' });
    expect((await chemist.post(`/unknowns/${shelved.id}/runs`, {})).body.error.code).toBe('unknownShelved');
  });

  it('is refused to readers, unknown to strangers', async () => {
    expect((await startOn(reader)).answer.status).toBe(403);
    expect((await startOn(stranger)).answer.status).toBe(404);
  });

  it('names settings that are out of range', async () => {
    const { answer } = await startOn(chemist, { keep: 0, maxSeconds: 'soon' });
    expect(answer.status).toBe(422);
    expect(answer.body.error.issues.map(({ path }: { path: string }) => path).sort()).toEqual(['keep', 'maxSeconds']);
  });
});

describe('the quota', () => {
  it('refuses more runs at once than allowed, with the figures', async () => {
    behaviour = 'waits';
    const { client } = await createLimited({ runsAtOnce: 1 });
    expect((await startOn(client)).answer.status).toBe(201);
    const { answer } = await startOn(client);
    expect(answer.status).toBe(409);
    expect(answer.body.error).toMatchObject({ code: 'quotaExceeded', figures: { runningCount: 1, runsAtOnce: 1 } });
    expect(answer.body.error.message).toContain('1 of at most 1');
  });

  it('counts runs that are started at the same moment one after the other', async () => {
    behaviour = 'waits';
    const { client, user } = await createLimited({ runsAtOnce: 2 });
    const answers = await Promise.all(Array.from({ length: 5 }, () => startOn(client)));
    expect(answers.map(({ answer }) => answer.status).sort()).toEqual([201, 201, 409, 409, 409]);
    expect(await Run.count({ where: { startedById: user.id } })).toBe(2);
  });

  it('refuses to keep more candidates than allowed when asked to, and keeps fewer when not', async () => {
    const { client } = await createLimited({ candidatesPerRun: 50 });
    const asked = (await startOn(client, { keep: 51 })).answer;
    expect(asked.body.error).toMatchObject({ code: 'quotaExceeded', figures: { keep: 51, candidatesPerRun: 50 } });
    const silent = (await startOn(client)).answer;
    expect(silent.body.settings.keep).toBe(50);
  });

  it('refuses a run when the CPU seconds of the month are used or reserved', async () => {
    const { client, user } = await createLimited({ cpuSecondsPerMonth: 100 });
    const first = (await startOn(client, { maxSeconds: 1 })).answer;
    await queue.settled(first.body.id);
    await UsageEntry.update({ cpuSeconds: 60 }, { where: { userId: user.id } });
    behaviour = 'waits';
    // Reserves the rest: at least 30 s a step.
    const second = (await startOn(client)).answer;
    expect(second.status).toBe(201);
    await UsageEntry.update({ cpuSeconds: 40 }, { where: { runId: second.body.id } });
    const third = (await startOn(client)).answer;
    expect(third.status).toBe(409);
    expect(third.body.error).toMatchObject({
      code: 'quotaExceeded',
      figures: { usedCpuSeconds: 60, reservedCpuSeconds: 40, cpuSecondsPerMonth: 100 },
    });
  });

  it('forgets what was used in another month', async () => {
    const { client, user } = await createLimited({ cpuSecondsPerMonth: 100 });
    const first = (await startOn(client)).answer;
    await queue.settled(first.body.id);
    await UsageEntry.update({ cpuSeconds: 100, month: '2001-01' }, { where: { userId: user.id } });
    expect((await startOn(client)).answer.status).toBe(201);
  });

  it('reserves when a run starts and charges what it used when it ends', async () => {
    behaviour = 'waits';
    const { client, user } = await createLimited({ cpuSecondsPerMonth: 1_000 });
    const { answer } = await startOn(client);
    const standing = async () => (await client.get(`/teams/${laboratory.team.id}/own-quota`)).body;
    expect(await standing()).toMatchObject({ usedCpuSeconds: 0, reservedCpuSeconds: 50, runningCount: 1 });
    behaviour = 'done';
    await until(() => compute.started.length > 0);
    const pump = setInterval(() => compute.release(), 5);
    await queue.settled(answer.body.id);
    clearInterval(pump);
    const { cpuSeconds } = await Run.findByPk(answer.body.id, { rejectOnEmpty: true });
    expect(cpuSeconds).toBeGreaterThanOrEqual(1.5);
    expect(await standing()).toMatchObject({ usedCpuSeconds: cpuSeconds, reservedCpuSeconds: 0, runningCount: 0 });
    expect(await UsageEntry.count({ where: { userId: user.id, kind: 'reserved' } })).toBe(0);
  });

  it('is not charged for a run that was refused', async () => {
    const { client, user } = await createLimited({ runsAtOnce: 0 });
    await startOn(client);
    expect(await UsageEntry.count({ where: { userId: user.id } })).toBe(0);
    expect(await Run.count({ where: { startedById: user.id } })).toBe(0);
  });
});

describe('POST /runs/:runId/cancel', () => {
  it('stops the run within a second and says so', async () => {
    behaviour = 'waits';
    const { answer } = await startOn(chemist);
    await until(async () => (await chemist.get(`/runs/${answer.body.id}`)).body.status === 'running');
    const asked = performance.now();
    const { status, body } = await chemist.post(`/runs/${answer.body.id}/cancel`);
    expect(performance.now() - asked).toBeLessThan(1_000);
    expect(status).toBe(200);
    expect(body).toMatchObject({ status: 'cancelled', complete: false, keptCount: 0 });
    expect(body.finishedAt).not.toBeNull();
  });

  it('leaves a run that has ended as it is', async () => {
    const { answer } = await startOn(chemist);
    await queue.settled(answer.body.id);
    expect((await chemist.post(`/runs/${answer.body.id}/cancel`)).body.status).toBe('finished');
  });

  it('is for the owner and for leads', async () => {
    behaviour = 'waits';
    const { answer } = await startOn(chemist);
    const colleague = await testApp.as(await createMember(laboratory.team, 'chemist'));
    expect((await colleague.post(`/runs/${answer.body.id}/cancel`)).status).toBe(403);
    expect((await reader.post(`/runs/${answer.body.id}/cancel`)).status).toBe(403);
    expect((await stranger.post(`/runs/${answer.body.id}/cancel`)).status).toBe(404);
    expect((await lead.post(`/runs/${answer.body.id}/cancel`)).body.status).toBe('cancelled');
  });
});

describe('lists of runs', () => {
  it('show the runs of an unknown and of a team, newest first', async () => {
    const { unknown, answer } = await startOn(chemist);
    await queue.settled(answer.body.id);
    const second = await chemist.post(`/unknowns/${unknown.id}/runs`, {});
    await queue.settled(second.body.id);
    const ofUnknown = await reader.get(`/unknowns/${unknown.id}/runs`);
    expect(ofUnknown.body.runs.map(({ number }: { number: number }) => number)).toEqual([2, 1]);
    const ofTeam = await reader.get(`/teams/${laboratory.team.id}/runs?status=finished&pageSize=1`);
    expect(ofTeam.body).toMatchObject({ page: 1, pageSize: 1, rows: [{ id: second.body.id }] });
    expect(ofTeam.body.total).toBeGreaterThanOrEqual(2);
    expect((await stranger.get(`/unknowns/${unknown.id}/runs`)).status).toBe(404);
    expect((await stranger.get(`/teams/${laboratory.team.id}/runs`)).status).toBe(404);
  });
});

describe('GET /runs/:runId/events', () => {
  it('tells state and progress until the run has ended, then closes', async () => {
    behaviour = 'waits';
    const { answer } = await startOn(chemist);
    const stream = await openStream(server, reader, `/runs/${answer.body.id}/events`);
    expect(stream.status).toBe(200);
    expect(stream.headers['content-type']).toContain('text/event-stream');
    expect(stream.headers['content-encoding']).toBeUndefined();
    await until(() => stream.events.filter(({ event }) => event === 'progress').length >= 3);
    expect(stream.events[0]).toMatchObject({ event: 'run', data: { id: answer.body.id, abilities: { cancel: false, export: true } } });
    expect(stream.events.findLast(({ event }) => event === 'progress')?.data).toMatchObject({
      stage: 'enumerating',
      shardCount: 3,
      shardsDone: 0,
      constitutionsSeen: 20,
    });
    behaviour = 'done';
    compute.release();
    await stream.ended;
    const statuses = stream.events.filter(({ event }) => event === 'run').map(({ data }) => (data as { status: string }).status);
    expect(statuses.at(-1)).toBe('finished');
    expect(statuses.filter((status) => status === 'finished')).toHaveLength(1);
  });

  it('gives the end of a run that ended before, and nothing to a browser that comes back for more', async () => {
    const { answer } = await startOn(chemist);
    await queue.settled(answer.body.id);
    const stream = await openStream(server, chemist, `/runs/${answer.body.id}/events`);
    await stream.ended;
    expect(stream.events).toMatchObject([{ event: 'run', data: { status: 'finished' } }]);
    expect((await openStream(server, chemist, `/runs/${answer.body.id}/events`, { 'Last-Event-ID': '1' })).status).toBe(204);
  });

  it('leaves no listener behind when the other side goes away', async () => {
    behaviour = 'waits';
    const { answer } = await startOn(chemist);
    const stream = await openStream(server, chemist, `/runs/${answer.body.id}/events`);
    await until(() => stream.events.length > 0);
    stream.close();
    await stream.ended.catch(() => undefined);
    expect((await chemist.post(`/runs/${answer.body.id}/cancel`)).body.status).toBe('cancelled');
  });

  it('keeps the line open with a comment every 15 s, and closes it when the reader loses access', async () => {
    behaviour = 'waits';
    const guest = await createMember(laboratory.team, 'reader');
    const client = await testApp.as(guest);
    const { answer } = await startOn(chemist);
    vi.useFakeTimers({ toFake: ['setInterval', 'clearInterval'] });
    try {
      const stream = await openStream(server, client, `/runs/${answer.body.id}/events`);
      vi.advanceTimersByTime(15_000);
      await until(() => stream.text().includes(': still here'));
      await Membership.destroy({ where: { userId: guest.id } });
      vi.advanceTimersByTime(15_000);
      await stream.ended;
    } finally {
      vi.useRealTimers();
    }
    await chemist.post(`/runs/${answer.body.id}/cancel`);
  });

  it('is open to those who may read the run only', async () => {
    const { answer } = await startOn(chemist);
    expect((await openStream(server, stranger, `/runs/${answer.body.id}/events`)).status).toBe(404);
    expect((await openStream(server, await testApp.as(), `/runs/${answer.body.id}/events`)).status).toBe(401);
  });
});

describe('a member who leaves', () => {
  it('loses sight of runs at once', async () => {
    const user = await createMember(laboratory.team, 'chemist');
    const client = await testApp.as(user);
    const { answer } = await startOn(client);
    await Membership.destroy({ where: { userId: user.id } });
    expect((await client.get(`/runs/${answer.body.id}`)).status).toBe(404);
  });
});
