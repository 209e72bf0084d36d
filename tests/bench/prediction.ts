/*
 * Errors and speed of the shift predictor: npm run bench -- prediction
 * Scored on fold 0 of the open data, which the committed increments were not fitted on.
 */
import { analyseStructure, AnalysisScratch } from '../../workers/graph/analysis.js';
import { createShiftPredictor } from '../../workers/prediction/create-shift-predictor.js';
import { createPredictedShifts } from '../../workers/prediction/predicted-shifts.js';
import { readNmrData, type NmrRecord } from '../support/nmr-data.js';
import { scorePredictor, type ErrorSet } from '../support/prediction-errors.js';
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
  measureSpeed(records.filter((record) => record.heavyAtoms === 12));
}

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

/** Analysis + prediction of real 12-atom molecules on one thread, best of three. */
function measureSpeed(molecules: readonly NmrRecord[]): void {
  const predictor = createShiftPredictor();
  const scratch = new AnalysisScratch();
  const out = createPredictedShifts();
  const times = { analysis: Infinity, both: Infinity };
  for (let round = 0; round < 5; round++) {
    let start = performance.now();
    for (const { graph } of molecules) analyseStructure(graph, scratch);
    times.analysis = Math.min(times.analysis, performance.now() - start);
    start = performance.now();
    for (const { graph } of molecules) predictor.predictInto(graph, analyseStructure(graph, scratch), out);
    times.both = Math.min(times.both, performance.now() - start);
  }
  const rate = (milliseconds: number): string => Math.round((1000 * molecules.length) / milliseconds).toLocaleString('en');
  console.log(
    `speed, ${molecules.length} real molecules of 12 heavy atoms: analysis alone ${rate(times.analysis)}/s, analysis + prediction ${rate(times.both)}/s`,
  );
}
