import type { z } from 'zod';
import { evidenceDocument } from '../../../shared/schemas/evidence';
import type { meResponse, memberList, usageResponse } from '../../../shared/schemas/people';
import type { funnelSchema } from '../../../shared/schemas/runs';
import type { unknownResponse, unknownRow } from '../../../shared/schemas/unknowns';
import { FakeApi, FakeProblem, type FakeHandlers } from './fake-api';

/** Everything here is invented. */
const uuid = (number: number) => `00000000-0000-4000-8000-${String(number).padStart(12, '0')}`;
export const ids = {
  me: uuid(1),
  colleague: uuid(2),
  team: uuid(10),
  otherTeam: uuid(11),
  unknown: uuid(20),
  emptyUnknown: uuid(21),
  revision: uuid(30),
  run: uuid(40),
  session: uuid(50),
};
const time = '2026-11-30T14:05:00.000Z';

type Me = z.input<typeof meResponse>;
type UnknownRow = z.input<typeof unknownRow>;
type UnknownDetail = z.input<typeof unknownResponse>;

export const member = (
  role: 'chemist' | 'lead' | 'reader',
  overrides: Partial<Me['memberships'][number]> = {},
): Me['memberships'][number] => ({
  teamId: ids.team,
  teamName: 'Lindenhof laboratory',
  role,
  isDemo: true,
  abilities: {
    readUnknowns: true,
    createUnknown: role !== 'reader',
    createFragment: role !== 'reader',
    manageMembers: role === 'lead',
    readUsage: role === 'lead',
    setQuotas: role === 'lead',
  },
  ...overrides,
});

export const meAs = (role: 'chemist' | 'lead' | 'reader', overrides: Partial<Me> = {}): Me => ({
  user: { id: ids.me, name: 'Mirela Dragan', email: 'mirela@lindenhof.example', isAdmin: false },
  memberships: [member(role)],
  abilities: { createTeam: false, manageUsers: false, readAudit: false },
  ...overrides,
});

const funnel: z.input<typeof funnelSchema> = [
  { stage: 'constitutions', entered: 369067, passed: 369067, rejections: [] },
  {
    stage: 'excludedFragments',
    entered: 369067,
    passed: 210400,
    rejections: [{ reason: 'fragment', text: 'contains an excluded fragment', count: 158667 }],
  },
  { stage: 'plausibility', entered: 210400, passed: 18230, rejections: [{ reason: 'strain', text: 'strained ring', count: 192170 }] },
  { stage: 'signals', entered: 18230, passed: 212, rejections: [{ reason: 'carbons', text: 'too few distinct carbons', count: 18018 }] },
  { stage: 'ranked', entered: 212, passed: 212, rejections: [] },
];

export const unknownRows: UnknownRow[] = [
  ['U-0042', 'Late-eluting impurity of batch 7', 'inProgress', 'C10H14', 'finished'],
  ['U-0041', 'Floral note of the steam distillate', 'settled', 'C7H14O2', 'finished'],
  ['U-0040', 'Colourless oil from the crude amine fraction, after two recrystallisations', 'new', 'C9H10O2', null],
  ['U-0039', 'Bottle without a label, cabinet 3', 'new', null, null],
  ['U-0038', 'By-product of the nitration', 'inProgress', 'C8H9NO3', 'failed'],
  ['U-0037', 'Isolate from the heartwood', 'shelved', 'C15H24O', 'stopped'],
].map(([code, title, status, formula, run], index) => ({
  id: index === 0 ? ids.unknown : index === 3 ? ids.emptyUnknown : uuid(200 + index),
  teamId: ids.team,
  code: code ?? '',
  title: title ?? '',
  status: status as UnknownRow['status'],
  formula: formula ?? null,
  createdBy: { id: ids.me, name: 'Mirela Dragan' },
  createdAt: time,
  updatedAt: new Date(Date.parse(time) - index * 8_000_000).toISOString(),
  lastRun:
    run === null
      ? null
      : {
          id: uuid(400 + index),
          number: 1,
          status: run as 'finished',
          constitutionCount: run === 'failed' ? null : 369067,
          survivorCount: run === 'failed' ? null : 212,
          funnel: run === 'failed' ? null : funnel,
          finishedAt: time,
        },
}));

export const unknownDetail = (abilities: boolean, overrides: Partial<UnknownDetail> = {}): UnknownDetail => ({
  ...unknownRows[0],
  description: 'Appears at 14.2 min in the assay of batch 7, above the reporting threshold. Isolated 3 mg by preparative chromatography.',
  purpose: 'research',
  isDemo: true,
  revisionCount: 3,
  currentRevisionId: ids.revision,
  shortlistCount: 2,
  abilities: {
    update: abilities,
    shelve: abilities,
    saveEvidence: abilities,
    startRun: abilities,
    editShortlist: abilities,
    comment: true,
  },
  ...overrides,
});

export const evidence = evidenceDocument.parse({
  formula: 'C10H14',
  fragments: {
    required: [
      { smiles: '*c1ccc(*)cc1', count: 1, label: '1,4-disubstituted benzene ring' },
      { smiles: '*C(C)C', count: 1 },
    ],
    excluded: [{ smiles: 'C#C' }],
  },
  // Data of p-cymene, SCIENCE.md 11.
  carbonSignals: [145.9, 135.1, 129.0, 126.3, 33.7, 24.1, 21.0].map((shift) => ({ shift })),
  protonSignals: [7.12, 2.87, 2.32, 1.24].map((shift) => ({ shift })),
  infraredBands: [{ wavenumber: 815, intensity: 'strong' }],
});

const members: z.input<typeof memberList> = {
  members: [
    {
      userId: ids.me,
      name: 'Mirela Dragan',
      email: 'mirela@lindenhof.example',
      role: 'lead',
      joinedAt: time,
      abilities: { changeRole: false, remove: false, setQuota: true },
    },
    {
      userId: ids.colleague,
      name: 'Jonas Petrauskas',
      email: 'jonas@lindenhof.example',
      role: 'chemist',
      joinedAt: time,
      abilities: { changeRole: true, remove: true, setQuota: true },
    },
  ],
  invitations: [
    {
      id: uuid(60),
      email: 'new.colleague@lindenhof.example',
      role: 'reader',
      invitedBy: 'Mirela Dragan',
      expiresAt: '2026-12-07T14:05:00.000Z',
      abilities: { revoke: true },
    },
  ],
};

const usage: z.input<typeof usageResponse> = {
  month: '2026-12',
  people: [
    {
      userId: ids.me,
      name: 'Mirela Dragan',
      role: 'lead',
      usedCpuSeconds: 5340,
      reservedCpuSeconds: 600,
      runCount: 14,
      quota: { cpuSecondsPerMonth: 36000, candidatesPerRun: 10000, runsAtOnce: 4 },
      isOverridden: false,
    },
    {
      userId: ids.colleague,
      name: 'Jonas Petrauskas',
      role: 'chemist',
      usedCpuSeconds: 7200,
      reservedCpuSeconds: 0,
      runCount: 31,
      quota: { cpuSecondsPerMonth: 7200, candidatesPerRun: 2000, runsAtOnce: 2 },
      isOverridden: true,
    },
  ],
};

const teamAbilities = (role: string) => ({
  update: role === 'lead',
  manageMembers: role === 'lead',
  readUsage: role === 'lead',
  setQuotas: role === 'lead',
});

/** A signed-in person of one role in the invented laboratory, with everything the own pages ask for. */
export function laboratory(role: 'chemist' | 'lead' | 'reader', overrides: FakeHandlers = {}, me: Me = meAs(role)): FakeApi {
  return new FakeApi({
    me: () => me,
    refreshSession: () => new FakeProblem(401, { code: 'noSession', message: 'Sign in to continue.' }),
    signOut: () => undefined,
    readInstallation: () => ({ demoAccounts: [] }),
    listUnknowns: ({ query }) => {
      const search = (query.get('search') ?? '').toLowerCase();
      const status = query.get('status') ?? 'all';
      const rows = unknownRows.filter(
        (row) =>
          (status === 'all' || row.status === status) && `${row.code} ${row.title} ${row.formula ?? ''}`.toLowerCase().includes(search),
      );
      return { rows, total: rows.length, page: Number(query.get('page') ?? 1), pageSize: 25 };
    },
    readUnknown: ({ params }) =>
      params['unknownId'] === ids.emptyUnknown
        ? {
            ...unknownDetail(role !== 'reader'),
            ...unknownRows[3],
            currentRevisionId: null,
            revisionCount: 0,
            shortlistCount: 0,
            description: '',
          }
        : unknownDetail(role !== 'reader'),
    readRevision: () => ({
      id: ids.revision,
      number: 3,
      author: { id: ids.me, name: 'Mirela Dragan' },
      comment: '',
      createdAt: time,
      formula: 'C10H14',
      isCurrent: true,
      unknownId: ids.unknown,
      evidence,
      notes: [],
      abilities: { restore: role !== 'reader' },
    }),
    listComments: () => ({
      comments: [
        {
          id: uuid(70),
          author: { id: ids.colleague, name: 'Jonas Petrauskas' },
          text: 'The methyl doublet integrates for six: isopropyl.',
          createdAt: time,
          abilities: { remove: false },
        },
        {
          id: uuid(71),
          author: { id: ids.me, name: 'Mirela Dragan' },
          text: 'Agreed. Para pattern from the two aromatic CH signals.',
          createdAt: time,
          abilities: { remove: true },
        },
      ],
    }),
    readTeam: () => ({ id: ids.team, name: 'Lindenhof laboratory', isDemo: true, createdAt: time, abilities: teamAbilities(role) }),
    listMembers: () => members,
    readUsage: () => usage,
    readOwnQuota: () => ({
      quota: { cpuSecondsPerMonth: 36000, candidatesPerRun: 10000, runsAtOnce: 4 },
      usedCpuSeconds: 5340,
      reservedCpuSeconds: 600,
      runningCount: 1,
    }),
    listSessions: () => ({
      sessions: [
        {
          id: ids.session,
          createdAt: time,
          lastUsedAt: time,
          userAgent: 'Mozilla/5.0 (X11; Linux x86_64; rv:145.0) Gecko/20100101 Firefox/145.0',
          isCurrent: true,
        },
        {
          id: uuid(51),
          createdAt: time,
          lastUsedAt: time,
          userAgent: 'Mozilla/5.0 (iPhone; CPU iPhone OS 18_0 like Mac OS X) AppleWebKit/605.1.15 Version/18.0 Mobile Safari/604.1',
          isCurrent: false,
        },
      ],
    }),
    listUsers: () => ({
      users: [
        {
          id: ids.me,
          name: 'Mirela Dragan',
          email: 'mirela@lindenhof.example',
          isAdmin: true,
          isDisabled: false,
          createdAt: time,
          teams: [{ teamId: ids.team, teamName: 'Lindenhof laboratory', role: 'lead' }],
          abilities: { update: false, issueResetLink: true },
        },
        {
          id: ids.colleague,
          name: 'Jonas Petrauskas',
          email: 'jonas@lindenhof.example',
          isAdmin: false,
          isDisabled: true,
          createdAt: time,
          teams: [{ teamId: ids.team, teamName: 'Lindenhof laboratory', role: 'chemist' }],
          abilities: { update: true, issueResetLink: false },
        },
      ],
    }),
    listTeams: () => ({
      teams: [{ id: ids.team, name: 'Lindenhof laboratory', isDemo: true, createdAt: time, abilities: teamAbilities('lead') }],
    }),
    listAudit: () => ({
      rows: [
        {
          id: uuid(80),
          at: time,
          actor: 'Mirela Dragan',
          action: 'member.changeRole',
          subject: 'jonas@lindenhof.example',
          teamId: ids.team,
          detail: { from: 'reader', to: 'chemist' },
        },
        {
          id: uuid(81),
          at: time,
          actor: 'Jonas Petrauskas',
          action: 'revision.create',
          subject: 'U-0042',
          teamId: ids.team,
          detail: { number: 3 },
        },
      ],
      total: 2,
      page: 1,
      pageSize: 50,
    }),
    ...overrides,
  });
}
