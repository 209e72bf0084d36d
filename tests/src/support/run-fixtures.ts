import type { z } from 'zod';
import type {
  candidateResponse,
  candidateRow,
  funnelSchema,
  runResponse,
  shortlistItem,
  estimateResponse,
} from '../../../shared/schemas/runs';
import { FakeProblem, type FakeHandlers } from './fake-api';
import { evidence, ids } from './fixtures';

/** Everything here is invented, except the shifts of p-cymene (SCIENCE.md 11, row 26). */
const uuid = (number: number) => `00000000-0000-4000-8000-${String(number).padStart(12, '0')}`;
const time = '2026-11-30T14:05:00.000Z';
const me = { id: ids.me, name: 'Mirela Dragan' };
export const liveRunId = uuid(41);
export const candidateId = (rank: number) => uuid(1000 + rank);

type Run = z.input<typeof runResponse>;
type Row = z.input<typeof candidateRow>;

const funnel: z.input<typeof funnelSchema> = [
  { stage: 'constitutions', entered: 24938, passed: 24938, rejections: [] },
  {
    stage: 'excludedFragments',
    entered: 24938,
    passed: 24101,
    rejections: [{ reason: 'x0', text: 'Contains the excluded fragment C≡C', count: 837 }],
  },
  { stage: 'ringSizes', entered: 24101, passed: 24101, rejections: [] },
  {
    stage: 'plausibility',
    entered: 24101,
    passed: 9760,
    rejections: [
      { reason: 'bridgehead', text: 'Double bond at the bridgehead of a small bicycle', count: 8102 },
      { reason: 'smallRingAllene', text: 'Cumulated double bonds in a small ring', count: 4120 },
      { reason: 'smallRingAlkyne', text: 'Triple bond in a small ring', count: 2119 },
    ],
  },
  { stage: 'signals', entered: 9760, passed: 612, rejections: [{ reason: 'carbons', text: 'Too few carbon environments', count: 9148 }] },
  { stage: 'ranked', entered: 612, passed: 450, rejections: [{ reason: 'kept', text: 'Not among the 450 best', count: 162 }] },
];

export const finishedRun: Run = {
  id: ids.run,
  unknownId: ids.unknown,
  unknownCode: 'U-0042',
  unknownTitle: 'Late-eluting impurity of batch 7',
  teamId: ids.team,
  number: 2,
  status: 'finished',
  complete: true,
  revisionId: ids.revision,
  revisionNumber: 3,
  formula: 'C10H14',
  settings: { keep: 450, maxSeconds: null },
  startedBy: me,
  createdAt: time,
  startedAt: time,
  finishedAt: '2026-11-30T14:05:09.000Z',
  constitutionCount: 24938,
  multigraphCount: 25940,
  survivorCount: 612,
  keptCount: 450,
  cpuSeconds: 12.4,
  noneOfTheseProbability: 0.041,
  funnel,
  failure: null,
  progress: null,
  abilities: { cancel: false, export: true, editShortlist: true },
};
export const progress = {
  stage: 'enumerating' as const,
  shardsDone: 31,
  shardCount: 240,
  constitutionsSeen: 182340,
  survivors: 431,
  ratePerSecond: 310200,
  elapsedSeconds: 4.1,
  secondsLeft: 29,
};
export const liveRun: Run = {
  ...finishedRun,
  id: liveRunId,
  number: 3,
  status: 'running',
  complete: false,
  finishedAt: null,
  constitutionCount: null,
  multigraphCount: null,
  survivorCount: null,
  keptCount: 0,
  noneOfTheseProbability: null,
  funnel: null,
  progress,
  abilities: { cancel: true, export: false, editShortlist: false },
};

/** 450 candidates: a page of the API holds 200, so lists have to load on. */
export const candidates: Row[] = Array.from({ length: 450 }, (_, index) => ({
  id: candidateId(index + 1),
  runId: ids.run,
  rank: index + 1,
  smiles: index === 0 ? 'Cc1ccc(cc1)C(C)C' : `C(C)(C)c1ccc(cc1)${'C'.repeat(1 + (index % 6))}`,
  idcode: `constitution-${index + 1}`,
  probability: index === 0 ? 0.62 : 0.33 / 2 ** index,
  score: -12.3 - index * 0.3,
  terms: { carbon13: -8.1 - index * 0.2, proton1: -4.2 - index * 0.1 },
  // The best by 13C alone is the last by rank, so that orders can be told apart.
  carbonDeviation: 5 - index * 0.01,
  protonDeviation: 0.08 + index * 0.001,
  remarks: [
    { kind: 'signal', tone: 'doubts', text: `δ 24.1 is ${index + 1} steps away`, atoms: [0] },
    { kind: 'fit', tone: 'supports', text: 'δ 145.9 fits best: quaternary ring carbon', atoms: [4] },
  ],
  shortlistItemId: null,
}));

const carbon = (atoms: number[], shift: number, sd: number, hydrogens: number) => ({
  atoms,
  shift,
  sd,
  hydrogens,
  basis: 'benzene increments',
});
const carbons = [
  carbon([4], 146.0, 1.6, 0),
  carbon([1], 135.4, 1.6, 0),
  carbon([2, 6], 129.1, 1.5, 1),
  carbon([3, 5], 121.0, 1.5, 1),
  carbon([7], 34.0, 1.8, 1),
  carbon([8, 9], 24.0, 1.4, 3),
  carbon([0], 21.1, 1.2, 3),
];
const protons = [
  {
    atoms: [2, 3, 5, 6],
    shift: 7.1,
    sd: 0.1,
    count: 4,
    multiplicity: 'm',
    couplings: [],
    exchangeable: false,
    basis: 'benzene increments',
  },
  { atoms: [7], shift: 2.8, sd: 0.15, count: 1, multiplicity: 'sept', couplings: [6.9], exchangeable: false, basis: 'methine rule' },
  { atoms: [0], shift: 2.3, sd: 0.1, count: 3, multiplicity: 's', couplings: [], exchangeable: false, basis: 'methyl rule' },
  { atoms: [8, 9], shift: 1.2, sd: 0.1, count: 6, multiplicity: 'd', couplings: [6.9], exchangeable: false, basis: 'methyl rule' },
];
export const spectra = { carbons, protons };

export const candidateDetail = (rank: number): z.input<typeof candidateResponse> => ({
  ...candidates[rank - 1],
  smiles: 'Cc1ccc(cc1)C(C)C',
  unknownId: ids.unknown,
  runComplete: true,
  spectra,
  matches: [
    ...evidence.carbonSignals.map((signal, index) => ({
      nucleus: '13C' as const,
      observedIndex: index,
      predictedIndexes: [index],
      deviation: signal.shift - carbons[index].shift,
      term: -Math.abs(signal.shift - carbons[index].shift),
      remark: null,
    })),
    ...evidence.protonSignals.map((signal, index) => ({
      nucleus: '1H' as const,
      observedIndex: index,
      predictedIndexes: [index],
      deviation: signal.shift - protons[index].shift,
      term: -Math.abs(signal.shift - protons[index].shift),
      remark: null,
    })),
  ],
  previousId: rank === 1 ? null : candidateId(rank - 1),
  nextId: candidateId(rank + 1),
  abilities: { editShortlist: true },
});

export const itemOf = (rank: number, overrides: Partial<z.input<typeof shortlistItem>> = {}): z.input<typeof shortlistItem> => ({
  id: uuid(3000 + rank),
  unknownId: ids.unknown,
  smiles: candidates[rank - 1].smiles,
  idcode: candidates[rank - 1].idcode,
  verdict: 'open',
  note: '',
  addedBy: me,
  addedAt: time,
  snapshot: {
    candidateId: candidateId(rank),
    runId: ids.run,
    runNumber: 2,
    rank,
    probability: candidates[rank - 1].probability,
    carbonDeviation: candidates[rank - 1].carbonDeviation,
    protonDeviation: candidates[rank - 1].protonDeviation,
  },
  abilities: { update: true, remove: true },
  ...overrides,
});

const sortKey = (row: Row, sort: string) =>
  sort === 'smiles'
    ? row.smiles
    : sort === 'carbonDeviation'
      ? row.carbonDeviation
      : sort === 'protonDeviation'
        ? row.protonDeviation
        : row.rank;

export const estimate: z.input<typeof estimateResponse> = {
  estimate: 24_512,
  low: 18_023,
  high: 34_201,
  isExact: false,
  survivors: { estimate: 3_100, low: 2_400, high: 4_000 },
  cpuSeconds: 12,
  cpuSecondsLow: 8,
  cpuSecondsHigh: 18,
  threadCount: 2,
  cpuSecondsLeft: 6_000,
  quotaShare: { estimate: 0.002, low: 0.0013, high: 0.003 },
  candidateShare: { estimate: 0.1, low: 0.1, high: 0.1 },
  isHopeless: false,
  limit: null,
  hints: [],
  seconds: 0.4,
};

export const hopelessEstimate: z.input<typeof estimateResponse> = {
  ...estimate,
  estimate: 8.4e13,
  low: 2e13,
  high: 3.4e14,
  survivors: { estimate: 7.6e13, low: 1e13, high: 3e14 },
  cpuSeconds: 3.3e9,
  cpuSecondsLow: 7.5e8,
  cpuSecondsHigh: 1.4e10,
  quotaShare: { estimate: 550_000, low: 125_000, high: 2_330_000 },
  isHopeless: true,
  limit: 'quota',
  hints: [
    { kind: 'attachedHydrogens', text: 'Attached-hydrogen counts (DEPT or HSQC) would cut this about 300-fold.', factor: 300 },
    { kind: 'ringSizes', text: 'Allowing only rings of five and six atoms would cut this about 17-fold.', factor: 17 },
  ],
};

/** What the pages of runs, candidates and shortlists ask for; the shortlist remembers what was kept. */
export function runHandlers(overrides: FakeHandlers = {}): FakeHandlers {
  const kept = [itemOf(2, { note: 'Band at 815 cm-1 agrees.', verdict: 'supported' })];
  return {
    listRuns: () => ({ runs: [liveRun, finishedRun] }),
    listTeamRuns: () => ({ rows: [liveRun, finishedRun], total: 2, page: 1, pageSize: 50 }),
    readRun: ({ params }) => (params['runId'] === liveRunId ? liveRun : finishedRun),
    estimateRun: () => estimate,
    listCandidates: ({ query }) => {
      const sign = query.get('direction') === 'descending' ? -1 : 1;
      const sort = query.get('sort') ?? 'rank';
      const page = Number(query.get('page') ?? 1);
      const pageSize = Number(query.get('pageSize') ?? 200);
      const sorted = [...candidates].sort((a, b) => {
        const [left, right] = [sortKey(a, sort) ?? 0, sortKey(b, sort) ?? 0];
        return (left < right ? -1 : left > right ? 1 : a.rank - b.rank) * sign;
      });
      return { rows: sorted.slice((page - 1) * pageSize, page * pageSize), total: sorted.length, page, pageSize, runComplete: true };
    },
    readCandidate: ({ params }) => {
      const row = candidates.find((candidate) => candidate.id === params['candidateId']);
      return row === undefined
        ? new FakeProblem(404, { code: 'notFound', message: 'There is no such candidate.' })
        : candidateDetail(row.rank);
    },
    readShortlist: () => ({ items: kept }),
    addToShortlist: ({ body }) => {
      const row = candidates.find((candidate) => candidate.id === (body as { candidateId: string }).candidateId);
      const item = itemOf(row?.rank ?? 1);
      kept.push(item);
      return item;
    },
    updateShortlistItem: ({ params, body }) => {
      const index = kept.findIndex((item) => item.id === params['itemId']);
      kept[index] = { ...kept[index], ...(body as object) };
      return kept[index];
    },
    removeShortlistItem: ({ params }) => {
      kept.splice(
        kept.findIndex((item) => item.id === params['itemId']),
        1,
      );
      return undefined;
    },
    predict: ({ body }) => ({ ...spectra, smiles: (body as { smiles: string }).smiles, notes: [] }),
    ...overrides,
  };
}
