import type { EvidenceDocument } from '../schemas/evidence.js';
import type { InputIssue } from '../schemas/problem.js';

/** Settings of a run beside the evidence; fixed when the run starts. */
export interface RunSettings {
  /** How many candidates are kept, best first. */
  readonly keep: number;
  /** Wall-clock limit of the whole run in seconds; null = none. */
  readonly maxSeconds: number | null;
  /** Constitutions after which the run ends; absent or null = none. */
  readonly maxConstitutions?: number | null;
  /** `count` only counts constitutions, `list` keeps the first `keep` unranked, `rank` predicts and scores. */
  readonly mode: 'count' | 'list' | 'rank';
}

/** A piece of the search tree. Opaque outside `workers/enumeration`; JSON-safe. */
export interface SearchNode {
  /** Hydrogen distributions [first, end) of the plan; more than one only without a prefix. */
  readonly firstDistribution: number;
  readonly endDistribution: number;
  /** Number of rows already filled, then their bond orders in filling order; empty = whole distributions. */
  readonly prefix: readonly number[];
}

/** Part of a run's search tree that one worker does on its own. */
export interface ShardSpec {
  readonly index: number;
  readonly nodes: readonly SearchNode[];
}

/** Stages of the funnel in the order in which constitutions pass them. */
export const FUNNEL_STAGES = ['constitutions', 'excludedFragments', 'ringSizes', 'plausibility', 'signals', 'ranked'] as const;
export type FunnelStage = (typeof FUNNEL_STAGES)[number];

/** Counts of one stage: how many arrived, how many passed, and the others by reason. */
export interface FunnelStep {
  readonly stage: FunnelStage;
  readonly entered: number;
  readonly passed: number;
  /** Rejected constitutions by reason, most frequent first. */
  readonly rejections: ReadonlyArray<{ readonly reason: string; readonly text: string; readonly count: number }>;
}
export type Funnel = readonly FunnelStep[];

/** Log-likelihood terms of a candidate (natural logarithm, higher is better); absent = no such evidence. */
export interface ScoreTerms {
  carbon13?: number;
  proton1?: number;
  multiplicity?: number;
  integral?: number;
  plausibility?: number;
}

/** A constitution that survived, as it leaves a shard: compact, still without SMILES. */
export interface ShardCandidate {
  /** Canonical, sortable text key of the constitution (Kekulé-merged when that is on); equal keys = equal constitutions. */
  readonly key: string;
  /** Bond list and hydrogens needed to rebuild the graph: see workers/graph/pack. */
  readonly packed: string;
  readonly score: number;
  readonly terms: ScoreTerms;
}

/** Branches of the search tree that a constraint cut while structures were being built. */
export interface BranchCut {
  readonly reason: string;
  /** One sentence for people. */
  readonly text: string;
  /** Branches, not constitutions: nobody knows how many each would have held. */
  readonly count: number;
}

export interface ShardResult {
  readonly index: number;
  /** Constitutions that were built, before any filter, resonance forms merged when that is on. */
  readonly constitutionCount: number;
  /** The same without merging. */
  readonly multigraphCount: number;
  /** Absent in results stored before branches were counted. */
  readonly cuts?: readonly BranchCut[];
  readonly funnel: Funnel;
  readonly kept: readonly ShardCandidate[];
  /** log Σ exp(score) over all survivors of this shard, −Infinity written as null. */
  readonly logSumExp: number | null;
  readonly cpuSeconds: number;
  /** False when a limit or a cancellation cut the shard short. */
  readonly complete: boolean;
  /** The limit that cut it short; absent when it is complete or was cancelled. */
  readonly stoppedBy?: ShardLimit;
}

/** Limits that a shard watches itself. */
export type ShardLimit = 'time' | 'count' | 'memory';

/** Live counters of a run, written by shards into a SharedArrayBuffer (see shared/jobs/counters). */
export interface RunProgress {
  readonly stage: 'planning' | 'enumerating' | 'ranking' | 'done';
  readonly shardsDone: number;
  readonly shardCount: number;
  readonly constitutionsSeen: number;
  readonly survivors: number;
  readonly ratePerSecond: number;
  readonly elapsedSeconds: number;
  readonly secondsLeft: number | null;
}

/** Predicted signal of a set of equivalent carbons. shift, sd in ppm. */
export interface PredictedCarbon {
  readonly atoms: readonly number[];
  readonly shift: number;
  readonly sd: number;
  readonly hydrogens: number;
  /** The rule that gave the number, for people: "benzene increments", "alkane increments". */
  readonly basis: string;
}
/** Predicted signal of a set of equivalent protons. atoms = heavy atoms that carry them; couplings in Hz. */
export interface PredictedProton {
  readonly atoms: readonly number[];
  readonly shift: number;
  readonly sd: number;
  readonly count: number;
  readonly multiplicity: string;
  readonly couplings: readonly number[];
  readonly exchangeable: boolean;
  readonly basis: string;
}
export interface PredictedSpectra {
  readonly carbons: readonly PredictedCarbon[];
  readonly protons: readonly PredictedProton[];
}

/** Which observed signal was laid on which predicted one. Index into the evidence list; null = nothing fits. */
export interface SignalMatch {
  readonly nucleus: '13C' | '1H';
  readonly observedIndex: number | null;
  readonly predictedIndexes: readonly number[];
  /** observed − predicted, ppm; null when one side is missing. */
  readonly deviation: number | null;
  /** Contribution to the log-likelihood. */
  readonly term: number;
  readonly remark: string | null;
}

/** Something people should see beside a candidate: soft rule that fired, stereocentres, open questions. */
export interface CandidateRemark {
  readonly kind: 'stereo' | 'plausibility' | 'fit' | 'signal';
  readonly tone: 'supports' | 'doubts' | 'notes';
  readonly text: string;
  readonly atoms: readonly number[];
}

/** A kept candidate with everything that is shown of it. Atom numbers follow `smiles` from 0. */
export interface RankedCandidate {
  readonly rank: number;
  /** Key of the shard candidate it came from: by it an explained structure is found among the kept ones. */
  readonly key: string;
  readonly smiles: string;
  readonly idcode: string;
  /** Posterior over all survivors and "none of these", 0–1. */
  readonly probability: number;
  readonly score: number;
  readonly terms: ScoreTerms;
  /** Mean absolute 13C deviation of the matched signals, ppm; null without 13C evidence. */
  readonly carbonDeviation: number | null;
  readonly protonDeviation: number | null;
  readonly spectra: PredictedSpectra;
  readonly matches: readonly SignalMatch[];
  readonly remarks: readonly CandidateRemark[];
}

export interface RunResult {
  readonly constitutionCount: number;
  readonly multigraphCount: number;
  readonly complete: boolean;
  readonly funnel: Funnel;
  readonly cuts: readonly BranchCut[];
  readonly candidates: readonly RankedCandidate[];
  /** Probability that the right structure is not among the survivors. */
  readonly noneOfTheseProbability: number;
  readonly cpuSeconds: number;
}

/** Why a drawn structure is not in a ranking, or where it is. */
export type Explanation =
  | {
      readonly kind: 'rejected';
      readonly stage: FunnelStage;
      readonly reasons: ReadonlyArray<{ reason: string; text: string; atoms: readonly number[] }>;
      readonly key: string;
      readonly smiles: string;
    }
  | { readonly kind: 'survives'; readonly score: number; readonly terms: ScoreTerms; readonly key: string; readonly smiles: string }
  | { readonly kind: 'otherFormula'; readonly formula: string; readonly expected: string; readonly smiles: string };

/** Failure that crosses the worker boundary as data: a thrown error would lose its code. */
export interface JobFailure {
  readonly code: 'badInput' | 'cancelled' | 'internal';
  readonly message: string;
  readonly issues?: readonly InputIssue[];
}
export type JobResult<T> = { readonly ok: true; readonly value: T } | { readonly ok: false; readonly failure: JobFailure };

/** A structure laid out on a plane for files and drawings. Atoms in the order of the SMILES; one Kekulé form. */
export interface LaidOutStructure {
  /** Equal for every numbering and Kekulé form; attachment points count as atoms. */
  readonly idcode: string;
  /** x, y: drawing units, bond length about 1, y upwards. */
  readonly atoms: ReadonlyArray<{ readonly symbol: string; readonly charge: number; readonly x: number; readonly y: number }>;
  /** Indexes into `atoms`, from 0. */
  readonly bonds: ReadonlyArray<{ readonly from: number; readonly to: number; readonly order: number }>;
}

/** Knowledge that would make a search smaller. */
export interface EstimateHint {
  readonly kind: 'attachedHydrogens' | 'carbonShifts' | 'shiftWindows' | 'heteroBonds' | 'ringSizes' | 'valenceGroups';
  /** One sentence for people. */
  readonly text: string;
  /** By how much the number of constitutions is expected to fall. */
  readonly factor: number;
}

/** Size and cost of a run before it starts; low and high are the ends of 95 % intervals. */
export interface RunEstimate {
  /** Constitutions that will be built. */
  readonly estimate: number;
  readonly low: number;
  readonly high: number;
  /** All were counted: low, estimate and high are the same. */
  readonly isExact: boolean;
  /** Constitutions that pass every filter. */
  readonly survivors: { readonly estimate: number; readonly low: number; readonly high: number };
  /** Thread seconds of the whole run. */
  readonly cpuSeconds: number;
  readonly cpuSecondsLow: number;
  readonly cpuSecondsHigh: number;
  /** Most helpful first. */
  readonly hints: readonly EstimateHint[];
  readonly probes: number;
  /** Wall-clock seconds that the estimate took. */
  readonly seconds: number;
}

/** Every message that crosses the thread boundary. Input is structured-cloneable; counters are shared memory. */
export interface JobContract {
  plan: {
    input: { evidence: EvidenceDocument; settings: RunSettings; targetShards: number };
    output: { shards: readonly ShardSpec[]; notes: readonly string[] };
  };
  shard: {
    input: {
      evidence: EvidenceDocument;
      settings: RunSettings;
      shard: ShardSpec;
      counters: SharedArrayBuffer;
      deadlineEpochMs: number | null;
      /** Constitutions that the run may still build when the shard starts; absent or null = no limit. */
      maxConstitutions?: number | null;
    };
    output: ShardResult;
  };
  finish: {
    input: { evidence: EvidenceDocument; settings: RunSettings; kept: readonly ShardCandidate[]; logSumExp: number | null; funnel: Funnel };
    output: { candidates: readonly RankedCandidate[]; noneOfTheseProbability: number };
  };
  explain: { input: { evidence: EvidenceDocument; settings: RunSettings; smiles: string }; output: Explanation };
  predict: { input: { smiles: string; solvent: string }; output: PredictedSpectra & { smiles: string; notes: readonly string[] } };
  estimate: {
    input: {
      evidence: EvidenceDocument;
      mode: RunSettings['mode'];
      probes: number;
      seed: number;
      maxSeconds: number;
      /** When somebody wants the answer, whatever the job waited for before it began. */
      deadlineEpochMs?: number;
      /** Candidates that the run will keep; absent: as the evidence says. */
      keep?: number;
    };
    output: RunEstimate;
  };
  /** Order of the answer = order of the question. */
  layout: { input: { smiles: readonly string[] }; output: { structures: readonly LaidOutStructure[] } };
}
export type JobName = keyof JobContract;
