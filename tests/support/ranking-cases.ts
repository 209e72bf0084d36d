import { existsSync, readFileSync } from 'node:fs';
import { resolve } from 'node:path';
import { gunzipSync } from 'node:zlib';
import type { ScoreTerms } from '../../shared/jobs/contract.js';
import { resolveOptions } from '../../shared/chemistry/resolve-options.js';
import { parseSmiles } from '../../shared/chemistry/smiles.js';
import { evidenceDocument, type EvidenceDocument, type EvidenceInput } from '../../shared/schemas/evidence.js';
import type { MolecularGraph } from '../../shared/types/molecular-graph.js';
import { ProblemError } from '../../workers/enumeration/problem.js';
import { createSearch, enumerateShard, planShards, type Search } from '../../workers/enumeration/search.js';
import { constitutionKey } from '../../workers/graph/constitution-key.js';
import { packGraph } from '../../workers/graph/pack.js';
import { createEvaluator } from '../../workers/ranking/evaluator.js';
import { createRandom } from '../../workers/enumeration/random-descent.js';
import { foldOf } from './nmr-data.js';

/** A real compound with its evidence document; see the README of the data beside the checkout. */
export interface RankingCase {
  readonly id: number;
  readonly heavyAtoms: number;
  readonly truth: string;
  readonly variant: 'spectra' | 'fragments';
  readonly evidence: EvidenceInput;
  /** As for the predictor's data: fold 0 was never fitted on. */
  readonly fold: number;
}

const folder = resolve(import.meta.dirname, '../../../shared/data/nmr');

function readLines<T>(path: string): T[] {
  const bytes = readFileSync(path);
  const text = (path.endsWith('.gz') ? gunzipSync(bytes) : bytes).toString('utf8');
  return text
    .trim()
    .split('\n')
    .map((line) => JSON.parse(line) as T);
}

/**
 * Reads the ranking cases; null, with one line that says so, when the data are not there.
 *
 * @param file - another file of the same form (plain or gzipped JSON lines); its cases get fold 0 when their compound is not known.
 */
export function readRankingCases(file = resolve(folder, 'evidence-train.jsonl.gz')): RankingCase[] | null {
  if (!existsSync(file)) {
    console.info(`skipped: ${file} is not there`);
    return null;
  }
  const records = resolve(folder, 'cases-train.jsonl.gz');
  const folds = new Map(
    existsSync(records) ? readLines<{ id: number; inchikey: string }>(records).map(({ id, inchikey }) => [id, foldOf(inchikey)]) : [],
  );
  return readLines<Omit<RankingCase, 'fold'>>(file)
    .filter(({ truth }) => parseSmiles(truth).ok)
    .map((entry) => ({ ...entry, fold: folds.get(entry.id) ?? 0 }));
}

/** A survivor as the bench looks at it. */
export interface SampledCandidate {
  readonly packed: string;
  readonly score: number;
  readonly terms: ScoreTerms;
  /** Survivors it stands for: 1 for the best, more for a random sample of the others. */
  readonly weight: number;
}

export interface CaseResult {
  readonly evidence: EvidenceDocument;
  readonly truth: MolecularGraph;
  /** 1 = first; equal scores count against it. null when the true structure was rejected or cannot be enumerated. */
  readonly rank: number | null;
  readonly isFinished: boolean;
  readonly constitutions: number;
  readonly survivors: number;
  readonly logSumExp: number;
  readonly truthScore: number | null;
  readonly truthTerms: ScoreTerms;
  /** The best survivors and a weighted sample of the rest, without the truth. */
  readonly candidates: readonly SampledCandidate[];
  readonly cpuSeconds: number;
}

/**
 * Enumerates and scores one case in this thread; null when the product refuses the evidence (a fragment with a lone charge).
 *
 * @param maxSeconds - CPU time after which the case counts as unfinished.
 * @param sampleSize - best survivors kept, and as many of the others at random (seeded).
 */
export function runCase({ truth, evidence: input, id }: RankingCase, maxSeconds: number, sampleSize = 0): CaseResult | null {
  const evidence = resolveOptions(evidenceDocument.parse(input), 'rank');
  const parsed = parseSmiles(truth);
  if (!parsed.ok) throw new Error(`${truth}: ${parsed.message}`);
  const started = process.cpuUsage().user;
  const elapsed = (): number => (process.cpuUsage().user - started) / 1e6;
  const evaluator = createEvaluator(evidence, { keep: 1, maxSeconds: null, mode: 'rank' });
  const truthKey = constitutionKey(parsed.graph, true);
  const own = evaluator.evaluate(parsed.graph);
  const truthScore = own.kind === 'scored' ? own.score : null;
  const truthTerms = own.kind === 'scored' ? { ...own.terms } : {};
  const random = createRandom(id);
  const best: { packed: string; score: number; terms: ScoreTerms }[] = [];
  const others: { packed: string; score: number; terms: ScoreTerms }[] = [];
  let constitutions = 0;
  let survivors = 0;
  let atLeastAsGood = 0;
  let wasSeen = false;
  let logSumExp = -Infinity;
  let isOver = false;
  const search = tryCreateSearch(evidence);
  if (search === null) return null;
  for (const shard of planShards(search, 1)) {
    enumerateShard(search, shard, {
      onMultigraphs: () => {},
      onConstitution(graph) {
        constitutions++;
        if (constitutions % 256 === 0 && elapsed() > maxSeconds) isOver = true;
        const evaluation = evaluator.evaluate(graph);
        if (evaluation.kind === 'rejected') return;
        survivors++;
        const { score } = evaluation;
        logSumExp =
          logSumExp > score ? logSumExp + Math.log1p(Math.exp(score - logSumExp)) : score + Math.log1p(Math.exp(logSumExp - score));
        // Only what scores like the truth can be the truth: keys cost more than scores.
        const isTruth = !wasSeen && truthScore !== null && Math.abs(score - truthScore) < 1e-6 && constitutionKey(graph, true) === truthKey;
        if (isTruth) {
          wasSeen = true;
          return;
        }
        if (truthScore !== null && score > truthScore - 1e-9) atLeastAsGood++;
        if (sampleSize === 0) return;
        let displaced: (typeof best)[number] | undefined;
        if (best.length < sampleSize || score > best[best.length - 1].score) {
          let at = best.length;
          while (at > 0 && best[at - 1].score < score) at--;
          best.splice(at, 0, { packed: packGraph(graph), score, terms: { ...evaluation.terms } });
          displaced = best.length > sampleSize ? best.pop() : undefined;
          if (displaced === undefined) return;
        }
        // Reservoir sampling of everything that is not among the best.
        const rest = survivors - best.length - (wasSeen ? 1 : 0);
        const slot = others.length < sampleSize ? others.length : Math.floor(random() * rest);
        if (slot < sampleSize) others[slot] = displaced ?? { packed: packGraph(graph), score, terms: { ...evaluation.terms } };
      },
      shouldStop: () => isOver,
      stopRequested: () => isOver,
    });
  }
  const rest = survivors - best.length - (wasSeen ? 1 : 0);
  return {
    evidence,
    truth: parsed.graph,
    rank: wasSeen && !isOver ? 1 + atLeastAsGood : null,
    isFinished: !isOver,
    constitutions,
    survivors,
    logSumExp,
    truthScore: wasSeen ? truthScore : null,
    truthTerms,
    candidates: [
      ...best.map((candidate) => ({ ...candidate, weight: 1 })),
      ...others.map((candidate) => ({ ...candidate, weight: rest / others.length })),
    ],
    cpuSeconds: elapsed(),
  };
}

function tryCreateSearch(evidence: EvidenceDocument): Search | null {
  try {
    return createSearch(evidence);
  } catch (error) {
    if (error instanceof ProblemError) return null;
    throw error;
  }
}
