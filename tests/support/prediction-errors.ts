import { findEquivalence } from '../../workers/graph/equivalence.js';
import { analyseStructure, AnalysisScratch } from '../../workers/graph/analysis.js';
import { createPredictedShifts, type ShiftPredictor } from '../../workers/prediction/predicted-shifts.js';
import type { NmrRecord } from './nmr-data.js';
import { matchSorted } from './sorted-matching.js';

/** One predicted class laid on an observed signal. */
export interface CarbonMatch {
  /** Atoms of the class. */
  readonly atoms: readonly number[];
  readonly predicted: number;
  readonly sd: number;
  readonly observed: number;
}

/** Errors of a predictor on one nucleus. */
export interface ErrorSet {
  /** Mean absolute error per compound. */
  readonly perCompound: number[];
  readonly perSignal: number[];
  /** error / sd of every signal. */
  readonly scaled: number[];
}
const emptySet = (): ErrorSet => ({ perCompound: [], perSignal: [], scaled: [] });

const shiftClassCache = new WeakMap<NmrRecord, Uint8Array>();
function shiftClassesOf(record: NmrRecord): Uint8Array {
  let classes = shiftClassCache.get(record);
  if (classes === undefined) {
    classes = findEquivalence(record.graph).shiftClasses;
    shiftClassCache.set(record, classes);
  }
  return classes;
}

/** Lays the predicted carbon classes of a complete list on its signals, per number of attached H; null when that is impossible. */
export function matchCarbons(record: NmrRecord, shift: Float64Array, sd: Float64Array): CarbonMatch[] | null {
  const { graph, carbons } = record;
  if (carbons === null || record.carbonsComplete !== true || carbons.some((signal) => signal.hydrogens === null)) return null;
  const classes = shiftClassesOf(record);
  const members = new Map<number, number[]>();
  for (let a = 0; a < graph.atomCount; a++) {
    if (graph.atomicNumbers[a] === 6) members.set(classes[a], [...(members.get(classes[a]) ?? []), a]);
  }
  const matches: CarbonMatch[] = [];
  for (const hydrogens of [0, 1, 2, 3]) {
    const predicted = [...members.values()]
      .filter((atoms) => Math.min(3, graph.hydrogens[atoms[0]]) === hydrogens)
      .sort((a, b) => shift[a[0]] - shift[b[0]]);
    const observed = carbons
      .filter((signal) => signal.hydrogens === hydrogens)
      .map((signal) => signal.shift)
      .sort((a, b) => a - b);
    const pairs = matchSorted(
      predicted.map((atoms) => shift[atoms[0]]),
      observed,
    );
    if (pairs === null) return null;
    for (const [p, o] of pairs) {
      const atoms = predicted[p];
      matches.push({ atoms, predicted: shift[atoms[0]], sd: sd[atoms[0]], observed: observed[o] });
    }
  }
  return matches;
}

/** Scores a predictor: 13C matched and assigned, 1H assigned (hydrogens on carbon). */
export function scorePredictor(
  records: readonly NmrRecord[],
  predictor: ShiftPredictor,
): { matched: ErrorSet; assigned: ErrorSet; proton: ErrorSet } {
  const scratch = new AnalysisScratch();
  const out = createPredictedShifts();
  const result = { matched: emptySet(), assigned: emptySet(), proton: emptySet() };
  const push = (set: ErrorSet, errors: readonly (readonly [number, number])[]): void => {
    if (errors.length === 0) return;
    set.perCompound.push(errors.reduce((sum, [error]) => sum + Math.abs(error), 0) / errors.length);
    for (const [error, sd] of errors) {
      set.perSignal.push(Math.abs(error));
      set.scaled.push(error / sd);
    }
  };
  for (const record of records) {
    predictor.predictInto(record.graph, analyseStructure(record.graph, scratch), out);
    push(
      result.matched,
      (matchCarbons(record, out.carbonShift, out.carbonSd) ?? []).map((m) => [m.observed - m.predicted, m.sd] as const),
    );
    push(
      result.assigned,
      (record.carbons ?? []).flatMap((signal) =>
        signal.atoms === null || signal.atoms.length === 0
          ? []
          : [[signal.shift - out.carbonShift[signal.atoms[0]], out.carbonSd[signal.atoms[0]]] as const],
      ),
    );
    push(
      result.proton,
      (record.protons ?? []).flatMap((signal) => {
        const atom = signal.atoms?.[0];
        if (atom === undefined || record.graph.atomicNumbers[atom] !== 6) return [];
        return [[signal.shift - out.protonShift[atom], out.protonSd[atom]] as const];
      }),
    );
  }
  return result;
}
