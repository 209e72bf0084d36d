import { z } from 'zod';
import { FUNNEL_STAGES } from '../jobs/contract.js';
import { RUN_STAGES, RUN_STATUSES, VERDICTS } from '../types/states.js';
import { abilities, id, pageOf, pageQuery, personName, timestamp } from './common.js';
import { EVIDENCE_LIMITS } from './evidence.js';

export const funnelSchema = z.array(
  z.object({
    stage: z.enum(FUNNEL_STAGES),
    entered: z.number(),
    passed: z.number(),
    rejections: z.array(z.object({ reason: z.string(), text: z.string(), count: z.number() })),
  }),
);
/** Branches of the search that a constraint cut while structures were being built, most frequent first. */
export const cutsSchema = z.array(z.object({ reason: z.string(), text: z.string(), count: z.number() }));
export const runParams = z.object({ runId: id });
export const runStartRequest = z.object({
  /** Absent = the current revision. */
  revisionId: id.optional(),
  keep: z.number().int().min(1).max(EVIDENCE_LIMITS.keep).optional(),
  maxSeconds: z.number().min(1).max(EVIDENCE_LIMITS.seconds).nullable().optional(),
  maxConstitutions: z.number().int().min(1).max(EVIDENCE_LIMITS.constitutions).nullable().optional(),
});
export const runProgressSchema = z.object({
  stage: z.enum(RUN_STAGES),
  shardsDone: z.number(),
  shardCount: z.number(),
  constitutionsSeen: z.number(),
  survivors: z.number(),
  ratePerSecond: z.number(),
  elapsedSeconds: z.number(),
  secondsLeft: z.number().nullable(),
});
export const runResponse = z.object({
  id,
  unknownId: id,
  unknownCode: z.string(),
  unknownTitle: z.string(),
  teamId: id,
  number: z.number().int(),
  status: z.enum(RUN_STATUSES),
  complete: z.boolean(),
  revisionId: id,
  revisionNumber: z.number().int(),
  formula: z.string(),
  settings: z.object({ keep: z.number(), maxSeconds: z.number().nullable(), maxConstitutions: z.number().nullable().default(null) }),
  startedBy: personName,
  createdAt: timestamp,
  startedAt: timestamp.nullable(),
  finishedAt: timestamp.nullable(),
  constitutionCount: z.number().nullable(),
  multigraphCount: z.number().nullable(),
  survivorCount: z.number().nullable(),
  keptCount: z.number(),
  cpuSeconds: z.number(),
  noneOfTheseProbability: z.number().nullable(),
  funnel: funnelSchema.nullable(),
  cuts: cutsSchema.default([]),
  failure: z.object({ code: z.string(), message: z.string() }).nullable(),
  progress: runProgressSchema.nullable(),
  abilities: abilities(['cancel', 'export', 'editShortlist']),
});
export const runList = z.object({ runs: z.array(runResponse) });
export const runPage = pageOf(runResponse);
export const runListQuery = pageQuery.extend({ status: z.union([z.enum(RUN_STATUSES), z.literal('all')]).default('all') });
/** Server-sent events of a run: `progress` carries runProgressSchema, `run` a full runResponse whenever the status changes. */

export const scoreTerms = z.object({
  carbon13: z.number().optional(),
  proton1: z.number().optional(),
  multiplicity: z.number().optional(),
  integral: z.number().optional(),
  plausibility: z.number().optional(),
});
export const remarkSchema = z.object({
  kind: z.enum(['stereo', 'plausibility', 'fit', 'signal']),
  tone: z.enum(['supports', 'doubts', 'notes']),
  text: z.string(),
  atoms: z.array(z.number()),
});
export const candidateRow = z.object({
  id,
  runId: id,
  rank: z.number().int(),
  smiles: z.string(),
  idcode: z.string(),
  probability: z.number(),
  score: z.number(),
  terms: scoreTerms,
  carbonDeviation: z.number().nullable(),
  protonDeviation: z.number().nullable(),
  remarks: z.array(remarkSchema),
  shortlistItemId: id.nullable(),
});
export const candidateListQuery = pageQuery.extend({
  pageSize: z.coerce.number().int().min(1).max(1000).default(200),
  sort: z.enum(['rank', 'carbonDeviation', 'protonDeviation', 'smiles']).default('rank'),
  direction: z.enum(['ascending', 'descending']).default('ascending'),
});
/** `runComplete` false: a limit cut the search, better candidates may be missing. */
export const candidatePage = pageOf(candidateRow).extend({ runComplete: z.boolean() });
export const predictedCarbon = z.object({
  atoms: z.array(z.number()),
  shift: z.number(),
  sd: z.number(),
  hydrogens: z.number(),
  basis: z.string(),
});
export const predictedProton = z.object({
  atoms: z.array(z.number()),
  shift: z.number(),
  sd: z.number(),
  count: z.number(),
  multiplicity: z.string(),
  couplings: z.array(z.number()),
  exchangeable: z.boolean(),
  basis: z.string(),
});
export const predictedSpectra = z.object({ carbons: z.array(predictedCarbon), protons: z.array(predictedProton) });
export const signalMatch = z.object({
  nucleus: z.enum(['13C', '1H']),
  observedIndex: z.number().nullable(),
  predictedIndexes: z.array(z.number()),
  deviation: z.number().nullable(),
  term: z.number(),
  remark: z.string().nullable(),
});
export const candidateParams = z.object({ candidateId: id });
/** Atom numbers follow `smiles`, from 0. `previousId`/`nextId` by rank. */
export const candidateResponse = candidateRow.extend({
  unknownId: id,
  /** False: a limit cut the search, better candidates may be missing. */
  runComplete: z.boolean(),
  spectra: predictedSpectra,
  matches: z.array(signalMatch),
  previousId: id.nullable(),
  nextId: id.nullable(),
  abilities: abilities(['editShortlist']),
});

export const explanationRequest = z.object({ smiles: z.string().trim().min(1, { error: 'expected a structure' }).max(300) });
export const explanationResponse = z.discriminatedUnion('kind', [
  z.object({
    kind: z.literal('rejected'),
    smiles: z.string(),
    stage: z.enum(FUNNEL_STAGES),
    reasons: z.array(z.object({ reason: z.string(), text: z.string(), atoms: z.array(z.number()) })),
  }),
  z.object({ kind: z.literal('ranked'), smiles: z.string(), rank: z.number().int(), candidateId: id, probability: z.number() }),
  /** Survives every filter but scored below the kept ones, or was not reached: that is possible where the run is incomplete. */
  z.object({
    kind: z.literal('notKept'),
    smiles: z.string(),
    score: z.number(),
    lowestKeptScore: z.number().nullable(),
    runComplete: z.boolean(),
  }),
  z.object({ kind: z.literal('otherFormula'), smiles: z.string(), formula: z.string(), expected: z.string() }),
]);
export const exportQuery = z.object({
  format: z.enum(['smiles', 'sdf', 'csv']),
  limit: z.coerce.number().int().min(1).max(EVIDENCE_LIMITS.keep).optional(),
});

export const shortlistItem = z.object({
  id,
  unknownId: id,
  smiles: z.string(),
  idcode: z.string(),
  verdict: z.enum(VERDICTS),
  note: z.string(),
  addedBy: personName,
  addedAt: timestamp,
  /** Snapshot of the candidate: survives its run. */
  snapshot: z.object({
    candidateId: id.nullable(),
    runId: id.nullable(),
    runNumber: z.number(),
    /** False: a limit had cut its search; null: was not noted at the time. */
    runComplete: z.boolean().nullable().default(null),
    rank: z.number(),
    probability: z.number(),
    carbonDeviation: z.number().nullable(),
    protonDeviation: z.number().nullable(),
  }),
  abilities: abilities(['update', 'remove']),
});
export const shortlistResponse = z.object({ items: z.array(shortlistItem) });
export const shortlistAddRequest = z.object({ candidateId: id, note: z.string().trim().max(4000).default('') });
export const shortlistItemParams = z.object({ itemId: id });
export const shortlistUpdateRequest = z.object({ verdict: z.enum(VERDICTS).optional(), note: z.string().trim().max(4000).optional() });

export const predictRequest = z.object({
  smiles: z.string().trim().min(1, { error: 'expected a structure' }).max(300),
  solvent: z.string().trim().max(60).default('CDCl3'),
});
export const predictResponse = predictedSpectra.extend({ smiles: z.string(), notes: z.array(z.string()) });
const interval = z.object({ estimate: z.number(), low: z.number(), high: z.number() });
/**
 * Size and cost of a run before it starts, by random probing; low and high are the ends of 95 % intervals. Shares are of what
 * is left of the caller's quota: 1 = all of it; null where nothing is left.
 */
export const estimateResponse = z.object({
  /** Constitutions that will be built. */
  estimate: z.number(),
  low: z.number(),
  high: z.number(),
  isExact: z.boolean(),
  /** Constitutions that pass every filter. */
  survivors: interval,
  /** Thread seconds of the whole run: building, filtering, scoring, describing what is kept. */
  cpuSeconds: z.number(),
  cpuSecondsLow: z.number(),
  cpuSecondsHigh: z.number(),
  /** Threads that will share the work. */
  threadCount: z.number().int(),
  cpuSecondsLeft: z.number(),
  quotaShare: interval.nullable(),
  /** Of the candidates that the caller may keep in a run. */
  candidateShare: interval.nullable(),
  /** True when even the low end of the interval does not fit into quota, time limit or count limit. */
  isHopeless: z.boolean(),
  /** The limit that will probably, or may, end the run. */
  limit: z.enum(['quota', 'timeLimit', 'countLimit']).nullable(),
  /** Knowledge that would make the search smaller, most helpful first. */
  hints: z.array(
    z.object({
      kind: z.enum(['attachedHydrogens', 'carbonShifts', 'shiftWindows', 'heteroBonds', 'ringSizes', 'valenceGroups']),
      text: z.string(),
      factor: z.number(),
    }),
  ),
  /** Seconds that the estimate took. */
  seconds: z.number(),
});
