/*
 * Fits corrections to the published increments on the open NMR data and writes workers/prediction/fitted-increments.ts:
 * npm run bench -- fit-increments
 * Fold 0 is never used. Deterministic: no random numbers, records in file order.
 */
import { writeFileSync } from 'node:fs';
import { resolve } from 'node:path';
import { format } from 'prettier';
import { analyseStructure, AnalysisScratch } from '../../workers/graph/analysis.js';
import { ATOM_TYPE_COUNT, fillAtomTypes } from '../../workers/prediction/atom-types.js';
import { createTextbookTables } from '../../workers/prediction/create-shift-predictor.js';
import { createTermScratch, fillTerms, MAX_TERMS, TERM_COUNT, termName } from '../../workers/prediction/features.js';
import {
  CARBON_SPREAD,
  priorSpreadOf,
  PROTON_SPREAD,
  type IncrementTable,
  type PriorSpread,
  termVariance,
} from '../../workers/prediction/increment-table.js';
import { createPredictedShifts } from '../../workers/prediction/predicted-shifts.js';
import { carbonClassOf, modeOf, protonClassOf } from '../../workers/prediction/shift-classes.js';
import { createIncrementPredictor } from '../../workers/prediction/shift-predictor.js';
import { readNmrData, type NmrRecord } from '../support/nmr-data.js';
import { matchCarbons } from '../support/prediction-errors.js';

/** An observed shift with the terms of its atom. */
interface Sample {
  readonly row: number;
  readonly terms: Int32Array;
  readonly shift: number;
  readonly weight: number;
  readonly fold: number;
}

/** Beyond this many spreads an observation loses weight as in a Cauchy error law: the data hold gross errors. */
const ROBUST_WIDTH = 2.5;
const ROUNDS = 6;

const folder = import.meta.dirname;
const records = readNmrData('train.jsonl.gz');
if (records === null) throw new Error('The open NMR data are not beside this checkout.');
const fitting = records.filter((record) => record.fold !== 0);

const analysisScratch = new AnalysisScratch();
const types = new Uint8Array(64);
const termScratch = createTermScratch();
const buffer = new Int32Array(MAX_TERMS);

function termsOf(record: NmrRecord, atom: number): { carbonRow: number; protonRow: number; terms: Int32Array } {
  const analysis = analyseStructure(record.graph, analysisScratch);
  fillAtomTypes(analysis, types);
  const count = fillTerms(analysis, types, atom, modeOf(types[atom]), termScratch, buffer);
  return {
    carbonRow: record.graph.atomicNumbers[atom] === 6 ? carbonClassOf(analysis, types, atom) : -1,
    protonRow: protonClassOf(analysis, types, atom),
    terms: buffer.slice(0, count),
  };
}

function assignedCarbons(): Sample[] {
  return fitting.flatMap((record) =>
    (record.carbons ?? []).flatMap(({ atoms, shift }) => {
      if (atoms === null || atoms.length === 0 || record.graph.atomicNumbers[atoms[0]] !== 6) return [];
      const { carbonRow, terms } = termsOf(record, atoms[0]);
      return [{ row: carbonRow, terms, shift, weight: 1, fold: record.fold }];
    }),
  );
}

/** Signals of complete lists without atoms, laid on the predictions of the last fit; counted less than known ones. */
function matchedCarbons(table: IncrementTable, weight: number): Sample[] {
  const { proton } = createTextbookTables();
  const predictor = createIncrementPredictor(table, proton, {
    carbonFloor: new Float32Array(table.classes.length).fill(2),
    protonFloor: new Float32Array(proton.classes.length).fill(1),
  });
  const out = createPredictedShifts();
  return fitting.flatMap((record) => {
    if (record.carbonAssignment === 'molfile') return [];
    predictor.predictInto(record.graph, analyseStructure(record.graph, analysisScratch), out);
    const known = new Set((record.carbons ?? []).flatMap(({ atoms }) => atoms ?? []));
    return (matchCarbons(record, out.carbonShift, out.carbonSd) ?? []).flatMap(({ atoms, observed }) => {
      if (known.has(atoms[0])) return [];
      const { carbonRow, terms } = termsOf(record, atoms[0]);
      return [{ row: carbonRow, terms, shift: observed, weight, fold: record.fold }];
    });
  });
}

function assignedProtons(): Sample[] {
  return fitting.flatMap((record) =>
    (record.protons ?? []).flatMap(({ atoms, shift }) => {
      const atom = atoms?.[0];
      if (atom === undefined || record.graph.hydrogens[atom] === 0) return [];
      const { protonRow, terms } = termsOf(record, atom);
      return [{ row: protonRow, terms, shift, weight: 1, fold: record.fold }];
    }),
  );
}

interface FittedClass {
  /** Correction and spread by term, for terms that occur. */
  readonly terms: Map<number, { correction: number; spread: number }>;
  readonly sigma: number;
}

/** Robust ridge regression of one class towards the published values. */
function fitClass(samples: readonly Sample[], start: Float32Array, spread: PriorSpread, sigmaFloor: number): FittedClass {
  const active = [...new Set(samples.flatMap((sample) => Array.from(sample.terms)))].sort((a, b) => a - b);
  const column = new Map(active.map((term, index) => [term, index]));
  const p = active.length;
  const rows = samples.map((sample) => Int32Array.from(sample.terms, (term) => column.get(term)!));
  const target = samples.map((sample) => sample.shift - sample.terms.reduce((sum, term) => sum + start[term], 0));
  const solution = new Float64Array(p);
  let residuals = target.slice();
  let sigma = Math.max(sigmaFloor, spreadOf(residuals));
  const counts = new Float64Array(p);
  for (let round = 0; round < ROUNDS; round++) {
    const matrix = new Float64Array(p * p);
    const right = new Float64Array(p);
    counts.fill(0);
    for (let s = 0; s < samples.length; s++) {
      const weight = samples[s].weight / (1 + (residuals[s] / (ROBUST_WIDTH * sigma)) ** 2);
      for (const i of rows[s]) {
        right[i] += weight * target[s];
        counts[i] += weight;
        for (const j of rows[s]) matrix[i * p + j] += weight;
      }
    }
    for (let i = 0; i < p; i++) matrix[i * p + i] += (sigma / priorSpreadOf(active[i], spread)) ** 2;
    solveCholesky(matrix, right, p, solution);
    residuals = target.map((value, s) => value - rows[s].reduce((sum, i) => sum + solution[i], 0));
    sigma = Math.max(sigmaFloor, spreadOf(residuals));
  }
  const terms = new Map(
    active.map((term, i) => [
      term,
      { correction: solution[i], spread: sigma / Math.sqrt(counts[i] + (sigma / priorSpreadOf(term, spread)) ** 2) },
    ]),
  );
  return { terms, sigma };
}

/** Robust standard deviation: the 68.3 % quantile of the absolute values. */
function spreadOf(values: readonly number[]): number {
  const sorted = values.map(Math.abs).sort((a, b) => a - b);
  return sorted[Math.floor(0.683 * sorted.length)] ?? 0;
}

/** Solves A x = b for symmetric positive definite A (overwritten). */
function solveCholesky(a: Float64Array, b: Float64Array, n: number, x: Float64Array): void {
  for (let j = 0; j < n; j++) {
    for (let i = j; i < n; i++) {
      let sum = a[i * n + j];
      for (let k = 0; k < j; k++) sum -= a[i * n + k] * a[j * n + k];
      a[i * n + j] = i === j ? Math.sqrt(sum) : sum / a[j * n + j];
    }
  }
  for (let i = 0; i < n; i++) {
    let sum = b[i];
    for (let k = 0; k < i; k++) sum -= a[i * n + k] * x[k];
    x[i] = sum / a[i * n + i];
  }
  for (let i = n - 1; i >= 0; i--) {
    let sum = x[i];
    for (let k = i + 1; k < n; k++) sum -= a[k * n + i] * x[k];
    x[i] = sum / a[i * n + i];
  }
}

/** Fits every class; returns the table and the classes. */
function fitTable(
  samples: readonly Sample[],
  start: IncrementTable,
  spread: PriorSpread,
  sigmaFloor: number,
): { table: IncrementTable; classes: (FittedClass | null)[] } {
  const values = Float32Array.from(start.values);
  const variances = Float32Array.from(start.variances);
  const classes = start.classes.map((_, row) => {
    const own = samples.filter((sample) => sample.row === row);
    if (own.length === 0) return null;
    const fitted = fitClass(own, start.values.subarray(row * TERM_COUNT, (row + 1) * TERM_COUNT), spread, sigmaFloor);
    for (const [term, { correction, spread: width }] of fitted.terms) {
      values[row * TERM_COUNT + term] += correction;
      variances[row * TERM_COUNT + term] = width * width;
    }
    return fitted;
  });
  return { table: { values, variances, classes: start.classes }, classes };
}

/** Weights of the term variances that are tried. */
const WEIGHTS = [0.1, 0.2, 0.3, 0.5, 0.8, 1.2, 2, 3, 5, 8, 12, 20];

/** Error of a prediction for a sample that was left out, with the term variance under each of WEIGHTS. */
interface Check {
  readonly row: number;
  readonly error: number;
  readonly variances: Float64Array;
}

function evaluate(table: IncrementTable, sample: Sample, spread: PriorSpread): Check {
  let shift = 0;
  const variances = new Float64Array(WEIGHTS.length);
  for (const term of sample.terms) {
    shift += table.values[sample.row * TERM_COUNT + term];
    const prior = priorSpreadOf(term, spread);
    WEIGHTS.forEach((weight, k) => (variances[k] += termVariance(table.variances[sample.row * TERM_COUNT + term], weight, prior)));
  }
  return { row: sample.row, error: sample.shift - shift, variances };
}

/**
 * Spread model from errors on compounds not fitted: the weight of the term variances under which a Student-type
 * likelihood is best, and per class the floor that puts 68.3 % of the errors within one standard deviation.
 *
 * @param floorElsewhere - for classes with fewer than 30 errors, ppm: common practice for textbook rules.
 */
function calibrate(
  checks: readonly Check[],
  classes: readonly string[],
  digits: number,
  floorElsewhere: number,
): { floors: Record<string, number>; floorElsewhere: number; termWeight: number } {
  const floorFor = (own: readonly Check[], k: number): number => {
    let low = 0;
    let high = 50;
    for (let step = 0; step < 40; step++) {
      const middle = (low + high) / 2;
      const inside = own.filter(({ error, variances }) => error * error <= middle * middle + variances[k]).length;
      if (inside < 0.683 * own.length) low = middle;
      else high = middle;
    }
    return Math.max(high, 10 ** -digits * 5);
  };
  let best = { likelihood: -Infinity, k: 0 };
  for (let k = 0; k < WEIGHTS.length; k++) {
    const floor = floorFor(checks, k);
    let likelihood = 0;
    for (const { error, variances } of checks) {
      const scale = floor * floor + variances[k];
      likelihood -= 0.5 * Math.log(scale) + 2.5 * Math.log1p((error * error) / (4 * scale));
    }
    if (likelihood > best.likelihood) best = { likelihood, k };
  }
  const floors: Record<string, number> = {};
  classes.forEach((name, row) => {
    const own = checks.filter((check) => check.row === row);
    if (own.length >= 30) floors[name] = Number(floorFor(own, best.k).toFixed(digits));
  });
  return { floors, floorElsewhere, termWeight: WEIGHTS[best.k] };
}

/** Errors of assigned samples when their own third of the folds is left out. */
function crossValidate(
  samples: readonly Sample[],
  assignedCount: number,
  start: IncrementTable,
  spread: PriorSpread,
  sigmaFloor: number,
): Check[] {
  const checks: Check[] = [];
  for (let part = 0; part < 3; part++) {
    const { table } = fitTable(
      samples.filter((sample) => sample.fold % 3 !== part),
      start,
      spread,
      sigmaFloor,
    );
    for (const sample of samples.slice(0, assignedCount)) if (sample.fold % 3 === part) checks.push(evaluate(table, sample, spread));
  }
  return checks;
}

/** Text of applyCorrections; terms whose correction and gain in certainty are both negligible are left out. */
function writeCorrections(classes: readonly (FittedClass | null)[], names: readonly string[], spread: PriorSpread, digits: number): string {
  const resolution = 10 ** -digits;
  return classes
    .flatMap((fitted, row) => {
      if (fitted === null) return [];
      const items = [...fitted.terms]
        .filter(
          ([term, { correction, spread: width }]) => Math.abs(correction) >= resolution / 2 || width < 0.8 * priorSpreadOf(term, spread),
        )
        .map(([term, { correction, spread: width }]) => `${termName(term)}=${trim(correction, digits)}±${trim(width, digits)}`);
      return items.length === 0 ? [] : [`${names[row]}|${items.join(';')}`];
    })
    .join('\n');
}
const trim = (value: number, digits: number): string => String(Number(value.toFixed(digits)));

const summary = (checks: readonly { error: number }[]): string => {
  const sorted = checks.map(({ error }) => Math.abs(error)).sort((a, b) => a - b);
  return `${sorted.length} signals left out in turn: mean ${(sorted.reduce((s, v) => s + v, 0) / sorted.length).toFixed(3)}, median ${sorted[sorted.length >> 1].toFixed(3)}`;
};

const textbook = createTextbookTables();
const assigned = assignedCarbons();
let carbonSamples = assigned;
let carbonFit = fitTable(carbonSamples, textbook.carbon, CARBON_SPREAD, 0.5);
console.log('13C assigned only:', summary(crossValidate(assigned, assigned.length, textbook.carbon, CARBON_SPREAD, 0.5)));
for (const weight of [0.3, 0.5]) {
  carbonSamples = [...assigned, ...matchedCarbons(carbonFit.table, weight)];
  carbonFit = fitTable(carbonSamples, textbook.carbon, CARBON_SPREAD, 0.5);
  console.log(`13C with ${carbonSamples.length - assigned.length} matched signals`);
}
const carbonChecks = crossValidate(carbonSamples, assigned.length, textbook.carbon, CARBON_SPREAD, 0.5);
console.log('13C with matched signals:', summary(carbonChecks));
const protons = assignedProtons();
const protonFit = fitTable(protons, textbook.proton, PROTON_SPREAD, 0.03);
const protonChecks = crossValidate(protons, protons.length, textbook.proton, PROTON_SPREAD, 0.03);
console.log('1H assigned:', summary(protonChecks), `(${ATOM_TYPE_COUNT} atom types, ${TERM_COUNT} terms a class)`);

const literal = (name: string, corrections: string, model: ReturnType<typeof calibrate>): string =>
  `export const ${name}: FittedIncrements = {\n  corrections: \`\n${corrections}\n\`,\n  floors: ${JSON.stringify(model.floors)},\n  floorElsewhere: ${model.floorElsewhere},\n  termWeight: ${model.termWeight},\n};\n`;
const target = resolve(folder, '../../workers/prediction/fitted-increments.ts');
const text = `/*
 * Written by tests/bench/fit-increments.ts; do not edit. Corrections fitted on the open database nmrshiftdb2
 * (Kuhn & Schlörer, Magn. Reson. Chem. 2015, 53, 582), folds 1 to 9 by InChIKey skeleton, by robust ridge regression
 * towards the published increments. ${assigned.length} assigned and ${carbonSamples.length - assigned.length} matched 13C signals, ${protons.length} assigned 1H signals.
 */

/** Corrections to the published increments of one nucleus, with the scatter that was left. */
export interface FittedIncrements {
  /** See applyCorrections. */
  readonly corrections: string;
  /** Spread left per class when all terms are well known, ppm; 68 % of the errors on compounds left out. */
  readonly floors: Readonly<Record<string, number>>;
  /** For classes without enough data. */
  readonly floorElsewhere: number;
  /** See weightVariances. */
  readonly termWeight: number;
}

${literal('FITTED_CARBON', writeCorrections(carbonFit.classes, textbook.carbon.classes, CARBON_SPREAD, 1), calibrate(carbonChecks, textbook.carbon.classes, 1, 3))}
${literal('FITTED_PROTON', writeCorrections(protonFit.classes, textbook.proton.classes, PROTON_SPREAD, 2), calibrate(protonChecks, textbook.proton.classes, 2, 0.3))}`;
writeFileSync(target, await format(text, { parser: 'typescript', printWidth: 140, singleQuote: true }));
console.log('written', target);
