/*
 * How often the true structure comes first, on real compounds:
 * npm run bench -- ranking [--cases FILE] [--variant spectra|fragments] [--limit N] [--seconds S] [--from A] [--to B] [--folds 0|all] [--failures] [--without-groups]
 * FILE: evidence documents as JSON lines, plain or gzipped (default: the open NMR data beside the checkout). Cases are
 * taken evenly over the file, each on one thread with S seconds (default 60) of CPU time; unfinished counts as failed.
 * --without-groups: groups of higher valence come only with fragments.
 * By default only compounds that the predictor and the score were not fitted on (fold 0).
 */
import { parseArgs } from 'node:util';
import { noneOfTheseLogLikelihood } from '../../workers/ranking/none-of-these.js';
import { readCarbonObservations, readProtonObservations } from '../../workers/ranking/observations.js';
import { createPosterior } from '../../workers/ranking/posterior.js';
import { SCORE_MODEL } from '../../workers/ranking/score-model.js';
import { readRankingCases, runCase, type CaseResult, type RankingCase } from '../support/ranking-cases.js';

const { values } = parseArgs({
  args: process.argv.slice(2).filter((argument) => argument !== '--'),
  options: {
    cases: { type: 'string' },
    variant: { type: 'string', default: 'spectra' },
    limit: { type: 'string', default: '200' },
    seconds: { type: 'string', default: '60' },
    from: { type: 'string', default: '6' },
    to: { type: 'string', default: '12' },
    folds: { type: 'string', default: '0' },
    failures: { type: 'boolean', default: false },
    'without-groups': { type: 'boolean', default: false },
  },
});
const all = readRankingCases(values.cases);
if (all === null) process.exit(0);
const eligible = all.filter(
  ({ variant, heavyAtoms, fold }) =>
    variant === values.variant &&
    heavyAtoms >= Number(values.from) &&
    heavyAtoms <= Number(values.to) &&
    (values.folds === 'all' || fold === 0),
);
const count = Math.min(Number(values.limit), eligible.length);
const chosen = Array.from({ length: count }, (_, i) => eligible[Math.floor((i * eligible.length) / count)]);

interface Tally {
  cases: number;
  first: number;
  topThree: number;
  topTen: number;
  unfinished: number;
  absent: number;
  cpuSeconds: number;
}
const emptyTally = (): Tally => ({ cases: 0, first: 0, topThree: 0, topTen: 0, unfinished: 0, absent: 0, cpuSeconds: 0 });
const total = emptyTally();
const bySize = new Map<number, Tally>();
/** Stated probability of the best candidate, and whether it was right. */
const stated: { probability: number; isRight: boolean }[] = [];
const none: number[] = [];

for (const entry of chosen) {
  const { evidence } = entry;
  const input = values['without-groups'] ? { ...evidence, options: { ...evidence.options, valenceGroups: [] } } : evidence;
  const result = runCase({ ...entry, evidence: input }, Number(values.seconds), 1);
  const size = bySize.get(entry.heavyAtoms) ?? emptyTally();
  bySize.set(entry.heavyAtoms, size);
  for (const tally of [total, size]) countInto(tally, result);
  if (result === null) {
    if (values.failures) console.log(`${entry.id} refused: ${entry.truth}`);
    continue;
  }
  if (result.isFinished) noteProbabilities(result);
  if (values.failures && result.rank !== 1) console.log(failureLine(entry, result));
}

const percent = (part: number, whole: number): string => `${((100 * part) / Math.max(whole, 1)).toFixed(1)} %`;
const line = (name: string, tally: Tally): string =>
  `${name.padStart(12)}  ${String(tally.cases).padStart(5)} cases  first ${percent(tally.first, tally.cases)}  first three ${percent(tally.topThree, tally.cases)}  first ten ${percent(tally.topTen, tally.cases)}` +
  `  unfinished ${tally.unfinished}  truth refused, rejected or beyond the valences ${tally.absent}  ${(tally.cpuSeconds / Math.max(tally.cases, 1)).toFixed(2)} s each`;
for (const [size, tally] of [...bySize].sort(([a], [b]) => a - b)) console.log(line(`${size} atoms`, tally));
console.log(line(`all, ${values.variant}`, total));
console.log('stated probability of the best candidate against hits:');
for (const [low, high] of [
  [0, 0.5],
  [0.5, 0.7],
  [0.7, 0.9],
  [0.9, 1.01],
] as const) {
  const inside = stated.filter(({ probability }) => probability >= low && probability < high);
  const mean = inside.reduce((sum, { probability }) => sum + probability, 0) / Math.max(inside.length, 1);
  console.log(
    `  ${low.toFixed(1)} to ${Math.min(high, 1).toFixed(1)}: ${inside.length} cases, stated ${percent(mean, 1)}, right ${percent(inside.filter(({ isRight }) => isRight).length, inside.length)}`,
  );
}
console.log(
  `"none of these", mean over finished cases: ${percent(
    none.reduce((sum, value) => sum + value, 0),
    none.length,
  )}`,
);

function countInto(tally: Tally, result: CaseResult | null): void {
  tally.cases++;
  if (result === null) {
    tally.absent++;
    return;
  }
  const { rank, isFinished, cpuSeconds } = result;
  tally.cpuSeconds += cpuSeconds;
  if (!isFinished) tally.unfinished++;
  else if (rank === null) tally.absent++;
  else {
    if (rank === 1) tally.first++;
    if (rank <= 3) tally.topThree++;
    if (rank <= 10) tally.topTen++;
  }
}

function noteProbabilities({ evidence, survivors, logSumExp, rank, truthScore, candidates }: CaseResult): void {
  const posterior = createPosterior({
    logSumExp: survivors === 0 ? null : logSumExp,
    survivorCount: survivors,
    noneOfTheseLogLikelihood: noneOfTheseLogLikelihood(readCarbonObservations(evidence), readProtonObservations(evidence), SCORE_MODEL),
    noneOfThesePrior: SCORE_MODEL.noneOfThesePrior,
  });
  none.push(posterior.noneOfTheseProbability);
  const best = Math.max(rank === 1 ? truthScore! : -Infinity, candidates[0]?.score ?? -Infinity);
  stated.push({ probability: posterior.probabilityOf(best), isRight: rank === 1 });
}

function failureLine({ id, truth, evidence }: RankingCase, { rank, survivors, isFinished, truthScore, candidates }: CaseResult): string {
  const state = !isFinished ? 'unfinished' : rank === null ? 'absent' : `rank ${rank}`;
  return `${id} ${evidence.formula} ${state} of ${survivors}: ${truth} ${truthScore?.toFixed(2) ?? ''} against ${candidates[0]?.score.toFixed(2) ?? ''}`;
}
