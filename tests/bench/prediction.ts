/*
 * Errors and speed of the shift predictor: npm run bench -- prediction
 * Scored on fold 0 of the open data, which the committed increments were not fitted on.
 */
import type { MolecularGraph } from '../../shared/types/molecular-graph.js';
import { analyseStructure, AnalysisScratch } from '../../workers/graph/analysis.js';
import { createShiftPredictor } from '../../workers/prediction/create-shift-predictor.js';
import { createPredictedShifts } from '../../workers/prediction/predicted-shifts.js';
import { readNmrData, type NmrRecord } from '../support/nmr-data.js';
import { scorePredictor, type ErrorSet } from '../support/prediction-errors.js';
import { randomMolecule } from '../support/random-molecules.js';
import { summarise } from '../support/sorted-matching.js';

const records = readNmrData('train.jsonl.gz');
if (records === null) {
  console.log('The open NMR data are not beside this checkout: nothing to score.');
} else {
  const heldOut = records.filter((record) => record.fold === 0);
  const small = heldOut.filter((record) => record.heavyAtoms <= 16);
  for (const source of ['textbook', 'fitted'] as const) {
    for (const [name, set] of [
      ['all', heldOut],
      ['up to 16 heavy atoms', small],
    ] as const)
      report(`${source}, ${name}`, set, source);
  }
  measureSpeed(
    'real molecules of 12 heavy atoms',
    records.flatMap(({ heavyAtoms, graph }) => (heavyAtoms === 12 ? [graph] : [])),
  );
}

measureSpeed(
  'random molecules of 12 heavy atoms',
  Array.from({ length: 40_000 }, (_, seed) => randomMolecule(seed, 12)).filter(({ atomCount }) => atomCount === 12),
);

function report(title: string, set: readonly NmrRecord[], source: 'fitted' | 'textbook'): void {
  const scores = scorePredictor(set, createShiftPredictor(source));
  const line = (name: string, errors: ErrorSet, digits: number): string => {
    const { count, mean, median, p90 } = summarise(errors.perCompound);
    const inside = errors.scaled.filter((z) => Math.abs(z) <= 1).length / errors.scaled.length;
    return `  ${name}: ${count} compounds, ${errors.perSignal.length} signals; mean of compounds ${mean.toFixed(digits)}, median ${median.toFixed(digits)}, 90 % ${p90.toFixed(digits)} ppm; within 1 sd ${(100 * inside).toFixed(0)} %`;
  };
  console.log(
    `${title} (fold 0)\n${line('13C matched', scores.matched, 2)}\n${line('13C assigned', scores.assigned, 2)}\n${line('1H assigned', scores.proton, 3)}`,
  );
}

/** Analysis + prediction on one thread by processor time, which other work on the machine hardly touches; best of five. */
function measureSpeed(title: string, molecules: readonly MolecularGraph[]): void {
  const predictor = createShiftPredictor();
  const scratch = new AnalysisScratch();
  const out = createPredictedShifts();
  const best = { analysis: Infinity, both: Infinity };
  const time = (work: (graph: MolecularGraph) => void): number => {
    const start = process.cpuUsage();
    for (const graph of molecules) work(graph);
    const { user, system } = process.cpuUsage(start);
    return (user + system) / 1e6;
  };
  for (let round = 0; round < 5; round++) {
    best.analysis = Math.min(
      best.analysis,
      time((graph) => analyseStructure(graph, scratch)),
    );
    best.both = Math.min(
      best.both,
      time((graph) => predictor.predictInto(graph, analyseStructure(graph, scratch), out)),
    );
  }
  const rate = (seconds: number): string => Math.round(molecules.length / seconds).toLocaleString('en');
  console.log(`speed, ${molecules.length} ${title}: analysis alone ${rate(best.analysis)}/s, analysis + prediction ${rate(best.both)}/s`);
}
