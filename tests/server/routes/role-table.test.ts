/**
 * Who may call what: every endpoint of the API table as every kind of caller, over HTTP, with valid input. An endpoint
 * that is missing here fails the type check and the first test.
 */
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { endpoints, type Endpoint, type EndpointName } from '../../../shared/schemas/endpoints.js';
import type { RunQueue } from '../../../server/compute/queue.js';
import type { Candidate } from '../../../server/models/candidate.js';
import { Invitation } from '../../../server/models/invitation.js';
import { PasswordReset } from '../../../server/models/password-reset.js';
import type { Run } from '../../../server/models/run.js';
import { Session } from '../../../server/models/session.js';
import { ShortlistItem } from '../../../server/models/shortlist-item.js';
import type { Team } from '../../../server/models/team.js';
import type { Unknown } from '../../../server/models/unknown.js';
import type { User } from '../../../server/models/user.js';
import { apiRoutes } from '../../../server/routes/api.js';
import { createSecret, hashOf } from '../../../server/sessions/tokens.js';
import {
  createCandidate,
  createComment,
  createMember,
  createRevision,
  createRun,
  createShortlistItem,
  createTeam,
  createTeamFragment,
  createUnknown,
  createUser,
  PASSWORD,
} from '../../support/factories.js';
import { createFakeCompute, fakeEstimate } from '../../support/fake-compute.js';
import { createTestApp, type TestApp } from '../../support/test-app.js';

/** `foreignLead` leads another team; `admin` runs the installation and is a member of no team. */
const CALLERS = ['anonymous', 'reader', 'chemist', 'lead', 'admin', 'foreignLead'] as const;
type Caller = (typeof CALLERS)[number];
type Expectation = 'ok' | 401 | 403 | 404;

/** Rows of one team, made anew for every call, so that no call stands on what another left. */
interface World {
  readonly team: Team;
  readonly people: Readonly<Record<Exclude<Caller, 'anonymous'>, User>>;
  /** Who calls; the lead stands for nobody where a row of the caller's is needed. */
  readonly caller: User;
  readonly unknown: Unknown;
  readonly revisionId: string;
  /** Ended, with a candidate. */
  readonly run: Run;
  readonly candidate: Candidate;
}
interface Call {
  readonly params?: Readonly<Record<string, string>>;
  readonly query?: string;
  readonly body?: object;
}
interface Row {
  readonly expected: Readonly<Record<Caller, Expectation>>;
  readonly call: (world: World) => Call | Promise<Call>;
}

const row = (
  [anonymous, reader, chemist, lead, admin, foreignLead]: readonly [
    Expectation,
    Expectation,
    Expectation,
    Expectation,
    Expectation,
    Expectation,
  ],
  call: Row['call'] = () => ({}),
): Row => ({ expected: { anonymous, reader, chemist, lead, admin, foreignLead }, call });

const PUBLIC = ['ok', 'ok', 'ok', 'ok', 'ok', 'ok'] as const;
const SIGNED_IN = [401, 'ok', 'ok', 'ok', 'ok', 'ok'] as const;
const ADMIN_ONLY = [401, 403, 403, 403, 'ok', 403] as const;
/** Science of a team: all members look, chemists and leads work, an admin who is no member sees none of it. */
const SCIENCE_READ = [401, 'ok', 'ok', 'ok', 404, 404] as const;
const SCIENCE_WORK = [401, 403, 'ok', 'ok', 404, 404] as const;
/** The same for lists below a team: that the team exists is no secret to an admin. */
const TEAM_SCIENCE_READ = [401, 'ok', 'ok', 'ok', 403, 404] as const;
const TEAM_SCIENCE_WORK = [401, 403, 'ok', 'ok', 403, 404] as const;
const TEAM_READ = [401, 'ok', 'ok', 'ok', 'ok', 404] as const;
const TEAM_RUN = [401, 403, 403, 'ok', 'ok', 404] as const;

const ofTeam = ({ team }: World): Call => ({ params: { teamId: team.id } });
const ofUnknown = ({ unknown }: World): Call => ({ params: { unknownId: unknown.id } });
const ofRun = ({ run }: World): Call => ({ params: { runId: run.id } });
const withMore =
  (call: (world: World) => Call, more: Call) =>
  (world: World): Call => ({ ...call(world), ...more });
const NEW_PASSWORD = 'a thread of many plies';

async function openInvitation(
  { team, people }: World,
  email = `invited-${createSecret().slice(0, 8).toLowerCase()}@laboratory.test`,
): Promise<{ id: string; secret: string }> {
  const secret = createSecret();
  const { id } = await Invitation.create({
    teamId: team.id,
    email,
    role: 'reader',
    tokenHash: hashOf(secret),
    invitedById: people.lead.id,
    expiresAt: new Date(Date.now() + 60_000),
  });
  return { id, secret };
}
const member = async ({ team }: World): Promise<Record<string, string>> => ({
  teamId: team.id,
  userId: (await createMember(team, 'chemist')).id,
});

const TABLE: Readonly<Record<EndpointName, Row>> = {
  readInstallation: row(PUBLIC),
  signIn: row(PUBLIC, ({ caller }) => ({ body: { email: caller.email, password: PASSWORD } })),
  signOut: row(PUBLIC),
  refreshSession: row(SIGNED_IN),
  me: row(SIGNED_IN),
  listSessions: row(SIGNED_IN),
  endSession: row(SIGNED_IN, async ({ caller }) => {
    const now = new Date();
    const { id } = await Session.create({
      userId: caller.id,
      refreshTokenHash: hashOf('-'),
      userAgent: '',
      lastUsedAt: now,
      expiresAt: new Date(now.getTime() + 60_000),
    });
    return { params: { sessionId: id } };
  }),
  requestPasswordReset: row(PUBLIC, ({ caller }) => ({ body: { email: caller.email } })),
  resetPassword: row(PUBLIC, async ({ caller }) => {
    const token = createSecret();
    await PasswordReset.create({ userId: caller.id, tokenHash: hashOf(token), expiresAt: new Date(Date.now() + 60_000) });
    return { params: { token }, body: { password: NEW_PASSWORD } };
  }),
  readInvitation: row(PUBLIC, async (world) => ({ params: { token: (await openInvitation(world)).secret } })),
  acceptInvitation: row(PUBLIC, async (world) => ({
    params: { token: (await openInvitation(world)).secret },
    body: { name: 'Newcomer', password: NEW_PASSWORD },
  })),

  listTeams: row(SIGNED_IN),
  createTeam: row(ADMIN_ONLY, () => ({ body: { name: 'Second shift' } })),
  readTeam: row(TEAM_READ, ofTeam),
  updateTeam: row(TEAM_RUN, withMore(ofTeam, { body: { name: 'Renamed' } })),
  listMembers: row(TEAM_READ, ofTeam),
  invite: row(TEAM_RUN, withMore(ofTeam, { body: { email: 'guest@laboratory.test', role: 'reader' } })),
  revokeInvitation: row(TEAM_RUN, async (world) => ({ params: { teamId: world.team.id, invitationId: (await openInvitation(world)).id } })),
  changeRole: row(TEAM_RUN, async (world) => ({ params: await member(world), body: { role: 'reader' } })),
  removeMember: row(TEAM_RUN, async (world) => ({ params: await member(world) })),
  setQuota: row(TEAM_RUN, async (world) => ({ params: await member(world), body: { runsAtOnce: 1 } })),
  readUsage: row(TEAM_RUN, ofTeam),
  readOwnQuota: row(TEAM_SCIENCE_READ, ofTeam),

  listUsers: row(ADMIN_ONLY),
  updateUser: row(ADMIN_ONLY, ({ people }) => ({ params: { userId: people.chemist.id }, body: { isDisabled: true } })),
  createResetLink: row(ADMIN_ONLY, ({ people }) => ({ params: { userId: people.chemist.id } })),
  listAudit: row(ADMIN_ONLY),

  listUnknowns: row(TEAM_SCIENCE_READ, ofTeam),
  createUnknown: row(TEAM_SCIENCE_WORK, withMore(ofTeam, { body: { title: 'Tailing fraction' } })),
  readUnknown: row(SCIENCE_READ, ofUnknown),
  updateUnknown: row(SCIENCE_WORK, withMore(ofUnknown, { body: { title: 'Retitled' } })),
  listRevisions: row(SCIENCE_READ, ofUnknown),
  createRevision: row(SCIENCE_WORK, withMore(ofUnknown, { body: { evidence: { formula: 'C4H8O2' }, basedOn: 1 } })),
  readRevision: row(SCIENCE_READ, ({ revisionId }) => ({ params: { revisionId } })),
  restoreRevision: row(SCIENCE_WORK, async ({ unknown, people, revisionId }) => {
    await createRevision(unknown, people.lead, { formula: 'C5H10O2' });
    return { params: { revisionId } };
  }),
  listComments: row(SCIENCE_READ, ofUnknown),
  createComment: row(SCIENCE_READ, withMore(ofUnknown, { body: { text: 'Ran it again.' } })),
  // Each removes a comment of the own; for outsiders it is one of the lead.
  removeComment: row(SCIENCE_READ, async ({ unknown, caller }) => ({ params: { commentId: (await createComment(unknown, caller)).id } })),
  listTeamFragments: row(TEAM_SCIENCE_READ, ofTeam),
  createTeamFragment: row(TEAM_SCIENCE_WORK, withMore(ofTeam, { body: { name: 'Isopropyl', smiles: '*C(C)C' } })),
  removeTeamFragment: row(SCIENCE_WORK, async ({ team, caller }) => ({
    params: { fragmentId: (await createTeamFragment(team, caller)).id },
  })),

  startRun: row(SCIENCE_WORK, withMore(ofUnknown, { body: { keep: 10 } })),
  listRuns: row(SCIENCE_READ, ofUnknown),
  listTeamRuns: row(TEAM_SCIENCE_READ, ofTeam),
  estimateRun: row(SCIENCE_WORK, withMore(ofUnknown, { body: {} })),
  readRun: row(SCIENCE_READ, ofRun),
  cancelRun: row(SCIENCE_WORK, async ({ unknown, caller }) => {
    const revision = await createRevision(unknown, caller);
    return { params: { runId: (await createRun(revision, caller)).id } };
  }),
  runEvents: row(SCIENCE_READ, ofRun),
  listCandidates: row(SCIENCE_READ, ofRun),
  readCandidate: row(SCIENCE_READ, ({ candidate }) => ({ params: { candidateId: candidate.id } })),
  explainStructure: row(SCIENCE_READ, withMore(ofRun, { body: { smiles: 'CCCCC' } })),
  exportCandidates: row(SCIENCE_READ, withMore(ofRun, { query: 'format=smiles' })),
  predict: row(SIGNED_IN, () => ({ body: { smiles: 'CCOC(C)=O' } })),

  readShortlist: row(SCIENCE_READ, ofUnknown),
  addToShortlist: row(SCIENCE_WORK, ({ unknown, candidate }) => ({
    params: { unknownId: unknown.id },
    body: { candidateId: candidate.id },
  })),
  updateShortlistItem: row(SCIENCE_WORK, async ({ candidate, run, people }) => ({
    params: { itemId: (await createShortlistItem(candidate, run, people.lead)).id },
    body: { verdict: 'supported' },
  })),
  removeShortlistItem: row(SCIENCE_WORK, async ({ candidate, run, people }) => ({
    params: { itemId: (await createShortlistItem(candidate, run, people.lead)).id },
  })),
};

const idleQueue: RunQueue = {
  start: async () => undefined,
  submit: () => undefined,
  cancel: async () => undefined,
  progress: () => null,
  subscribe: () => () => undefined,
  settled: async () => undefined,
  close: async () => undefined,
};

let server: TestApp;
beforeAll(async () => {
  const compute = createFakeCompute();
  compute.answers.estimate = fakeEstimate;
  compute.answers.explain = { kind: 'otherFormula', formula: 'C5H12', expected: 'C4H8O2', smiles: 'CCCCC' };
  compute.answers.predict = { smiles: 'CCOC(C)=O', carbons: [], protons: [], notes: [] };
  server = await createTestApp({ compute, queue: idleQueue });
});
afterAll(async () => {
  await server.close();
});

async function createWorld(as: Caller): Promise<World> {
  const team = await createTeam();
  const [reader, chemist, lead] = [
    await createMember(team, 'reader'),
    await createMember(team, 'chemist'),
    await createMember(team, 'lead'),
  ];
  const foreignLead = await createMember(await createTeam(), 'lead');
  const people = { reader, chemist, lead, foreignLead, admin: await createUser({ isAdmin: true }) };
  const unknown = await createUnknown(team, chemist);
  const revision = await createRevision(unknown, chemist);
  const run = await createRun(revision, chemist, {
    status: 'finished',
    complete: true,
    keptCount: 1,
    startedAt: new Date(),
    finishedAt: new Date(),
  });
  const candidate = await createCandidate(run);
  return { team, people, caller: as === 'anonymous' ? lead : people[as], unknown, revisionId: revision.id, run, candidate };
}

const fillPath = (path: string, params: Readonly<Record<string, string>> = {}): string =>
  path.replace(/:(\w+)/g, (_, name: string) => params[name]);

async function statusOf(name: EndpointName, as: Caller): Promise<number> {
  const world = await createWorld(as);
  const { params, query, body } = await TABLE[name].call(world);
  const client = await server.as(as === 'anonymous' ? undefined : world.people[as]);
  const endpoint: Endpoint = endpoints[name];
  const path = fillPath(endpoint.path, params) + (query === undefined ? '' : `?${query}`);
  const send = {
    GET: () => client.get(path),
    POST: () => client.post(path, body),
    PATCH: () => client.patch(path, body),
    DELETE: () => client.delete(path),
  };
  return (await send[endpoint.method]()).status;
}

describe('the table of endpoints', () => {
  it('has a route for each', () => {
    expect(
      apiRoutes(server.context)
        .map(({ name }) => name)
        .sort(),
    ).toEqual(Object.keys(endpoints).sort());
  });

  it('has a row here for each', () => {
    expect(Object.keys(TABLE).sort()).toEqual(Object.keys(endpoints).sort());
  });

  it('calls public exactly the routes that answer people without a session', () => {
    const publicHere = (Object.keys(TABLE) as EndpointName[]).filter((name) => TABLE[name].expected.anonymous === 'ok');
    const publicRoutes = apiRoutes(server.context)
      .filter(({ isPublic }) => isPublic)
      .map(({ name }) => name);
    // Refreshing needs the cookie of a session, but no session that is fresh.
    expect([...publicHere, 'refreshSession'].sort()).toEqual(publicRoutes.sort());
  });
});

describe.each(Object.keys(TABLE) as EndpointName[])('%s', (name) => {
  it.each(CALLERS)('as %s', async (as) => {
    const expected = TABLE[name].expected[as];
    const status = await statusOf(name, as);
    expect(status >= 200 && status < 300 ? 'ok' : status).toBe(expected);
  });
});

describe('rows of others in the own team', () => {
  it.each<[EndpointName, Caller, number, (world: World) => Promise<Record<string, string>>]>([
    ['removeComment', 'lead', 403, async ({ unknown, people }) => ({ commentId: (await createComment(unknown, people.chemist)).id })],
    ['removeTeamFragment', 'chemist', 403, async ({ team, people }) => ({ fragmentId: (await createTeamFragment(team, people.lead)).id })],
    ['removeTeamFragment', 'lead', 204, async ({ team, people }) => ({ fragmentId: (await createTeamFragment(team, people.chemist)).id })],
    [
      'cancelRun',
      'chemist',
      403,
      async ({ unknown, people }) => ({ runId: (await createRun(await createRevision(unknown, people.lead), people.lead)).id }),
    ],
    [
      'cancelRun',
      'lead',
      200,
      async ({ unknown, people }) => ({ runId: (await createRun(await createRevision(unknown, people.lead), people.chemist)).id }),
    ],
  ])('%s as %s answers %i', async (name, as, expected, paramsOf) => {
    const world = await createWorld(as);
    const client = await server.as(world.caller);
    const endpoint: Endpoint = endpoints[name];
    const path = fillPath(endpoint.path, await paramsOf(world));
    const response = endpoint.method === 'DELETE' ? await client.delete(path) : await client.post(path);
    expect(response.status).toBe(expected);
  });
});

describe('rows of another team below an own row', () => {
  it('cannot be put on a shortlist', async () => {
    const [own, foreign] = [await createWorld('chemist'), await createWorld('chemist')];
    const response = await (
      await server.as(own.caller)
    ).post(`/unknowns/${own.unknown.id}/shortlist`, { candidateId: foreign.candidate.id });
    expect([404, 422]).toContain(response.status);
    expect(await ShortlistItem.count({ where: { unknownId: own.unknown.id } })).toBe(0);
  });

  it('cannot be started as a run', async () => {
    const [own, foreign] = [await createWorld('chemist'), await createWorld('chemist')];
    const response = await (await server.as(own.caller)).post(`/unknowns/${own.unknown.id}/runs`, { revisionId: foreign.revisionId });
    expect([404, 422]).toContain(response.status);
  });
});
