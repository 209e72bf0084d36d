import type { MolecularGraph } from '../../shared/types/molecular-graph.js';
import type { StructureAnalysis } from '../graph/analysis.js';
import { MAX_ATOMS } from '../graph/analysis.js';

/**
 * Shifts of one constitution as plain arrays over its heavy atoms, in ppm against tetramethylsilane. Entries of atoms
 * that are no carbon (13C) or carry no hydrogen (1H) are 0. The arrays may be longer than the structure.
 */
export interface PredictedShifts {
  readonly carbonShift: Float64Array;
  /** Standard deviation of each carbon shift; grows with the distance from what the rule was made for. */
  readonly carbonSd: Float64Array;
  /** Mean shift of the hydrogens on each heavy atom. */
  readonly protonShift: Float64Array;
  readonly protonSd: Float64Array;
  /** Rule behind each carbon shift and proton shift, index into `carbonRules` / `protonRules` of the predictor. */
  readonly carbonRule: Uint8Array;
  readonly protonRule: Uint8Array;
}

/** The seam between ranking and whatever model predicts: replace the model, keep this. */
export interface ShiftPredictor {
  /**
   * Predicts all shifts of one constitution. Allocates nothing; not re-entrant, one predictor a thread.
   *
   * @param graph - read only.
   * @param context - analysis of the same graph, read only.
   * @param out - entries [0, n) are overwritten.
   */
  predictInto(graph: MolecularGraph, context: StructureAnalysis, out: PredictedShifts): void;
  /** Names of the rules for people, by index. */
  readonly carbonRules: readonly string[];
  readonly protonRules: readonly string[];
}

/** Makes the buffer that `predictInto` fills. @param maxAtoms - largest structure it is used for. */
export function createPredictedShifts(maxAtoms: number = MAX_ATOMS): PredictedShifts {
  return {
    carbonShift: new Float64Array(maxAtoms),
    carbonSd: new Float64Array(maxAtoms),
    protonShift: new Float64Array(maxAtoms),
    protonSd: new Float64Array(maxAtoms),
    carbonRule: new Uint8Array(maxAtoms),
    protonRule: new Uint8Array(maxAtoms),
  };
}
