/*
 * What windows of 13C shifts save, and what they cost: npm run bench -- windows [--limit N] [--seconds S] [--from A] [--to B] [--build-only]
 *
 * First the share of true structures that derived windows wrongly exclude, over all cases of fold 0 (compounds on which
 * neither the ranges nor the predictor were fitted). Then N of them (default 12), spectra alone, searched with and without
 * windows: constitutions built and CPU seconds, every one filtered and scored unless --build-only. A search is stopped after S seconds (default 30); its figures stand
 * with a +.
 */
import { parseArgs } from 'node:util';
import { parseSmiles } from '../../shared/chemistry/smiles.js';
import { evidenceDocument, type EvidenceDocument } from '../../shared/schemas/evidence.js';
import { createSearch, enumerateShard, planShards } from '../../workers/enumeration/search.js';
import { createEvaluator } from '../../workers/ranking/evaluator.js';
import { readRankingCases, type RankingCase } from '../support/ranking-cases.js';

const { values } = parseArgs({
  args: process.argv.slice(2).filter((argument) => argument !== '--'),
  options: {
    limit: { type: 'string', default: '12' },
    seconds: { type: 'string', default: '30' },
    from: { type: 'string', default: '10' },
    to: { type: 'string', default: '13' },
    'build-only': { type: 'boolean', default: false },
  },
});
const all = readRankingCases();
if (all === null) process.exit(0);
const unfitted = all.filter(({ variant, fold }) => variant === 'spectra' && fold === 0);
const SETTINGS = { keep: 1, maxSeconds: null, mode: 'rank' } as const;

function evidenceOf({ evidence }: RankingCase, shiftWindows: boolean): EvidenceDocument {
  const document = evidenceDocument.parse(evidence);
  return { ...document, options: { ...document.options, valenceGroups: [], shiftWindows } };
}

/** Reason for which the true structure falls, null when it survives. */
function rejectionOf(entry: RankingCase, shiftWindows: boolean): string | null {
  const truth = parseSmiles(entry.truth);
  if (!truth.ok) throw new Error(`${entry.truth}: ${truth.message}`);
  const evaluation = createEvaluator(evidenceOf(entry, shiftWindows), SETTINGS).evaluate(truth.graph);
  return evaluation.kind === 'rejected' ? evaluation.reason : null;
}

const excluded = unfitted.filter((entry) => rejectionOf(entry, false) === null && rejectionOf(entry, true) !== null);
console.log(
  `true structures excluded by windows alone: ${excluded.length} of ${unfitted.length} cases of fold 0 (${((100 * excluded.length) / unfitted.length).toFixed(2)} %)`,
);
for (const entry of excluded) console.log(`  ${entry.id} ${entry.truth} ${rejectionOf(entry, true)!}`);

/** Builds and scores every constitution of a document in this thread. */
function build(evidence: EvidenceDocument): { built: number; branches: number; seconds: number; isFinished: boolean } {
  const started = process.cpuUsage();
  const seconds = (): number => {
    const { user, system } = process.cpuUsage(started);
    return (user + system) / 1e6;
  };
  const search = createSearch(evidence);
  const evaluator = values['build-only'] ? null : createEvaluator(evidence, SETTINGS);
  let built = 0;
  const isLate = (): boolean => seconds() > Number(values.seconds);
  const isFinished = planShards(search, 1).every((shard) =>
    enumerateShard(search, shard, {
      onMultigraphs: () => {},
      onConstitution(graph) {
        built++;
        evaluator?.evaluate(graph);
      },
      shouldStop: isLate,
      stopRequested: () => built % 256 === 0 && isLate(),
    }),
  );
  return { built, branches: search.branches.length, seconds: seconds(), isFinished };
}

const eligible = unfitted.filter(({ heavyAtoms }) => heavyAtoms >= Number(values.from) && heavyAtoms <= Number(values.to));
const count = Math.min(Number(values.limit), eligible.length);
const show = ({ built, seconds, isFinished }: ReturnType<typeof build>): string =>
  `${`${built}${isFinished ? '' : '+'}`.padStart(11)} ${`${seconds.toFixed(2)}${isFinished ? '' : '+'}`.padStart(8)}`;
console.log('case       formula       built     s without   built        s with   branches  fewer  faster   truth');
let finished = 0;
let logFewer = 0;
let logFaster = 0;
for (let i = 0; i < count; i++) {
  const entry = eligible[Math.floor((i * eligible.length) / count)];
  const without = build(evidenceOf(entry, false));
  const within = build(evidenceOf(entry, true));
  const fewer = without.built / Math.max(within.built, 1);
  const faster = without.seconds / within.seconds;
  if (within.isFinished) {
    finished++;
    logFewer += Math.log(fewer);
    logFaster += Math.log(faster);
  }
  const atLeast = without.isFinished ? '' : '>';
  const ratio = (value: number): string => (within.isFinished ? `${atLeast}${value.toFixed(1)}` : '-');
  console.log(
    `${String(entry.id).padEnd(10)} ${entry.evidence.formula.padEnd(11)} ${show(without)} ${show(within)} ${String(within.branches).padStart(8)} ${ratio(fewer).padStart(8)} ${ratio(faster).padStart(8)}   ${entry.truth}`,
  );
}
console.log(
  `${finished} of ${count} finished with windows; over these, geometric mean of at least ${Math.exp(logFewer / finished).toFixed(1)} times fewer constitutions and ${Math.exp(logFaster / finished).toFixed(1)} times less time`,
);
