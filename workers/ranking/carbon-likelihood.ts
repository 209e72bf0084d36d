import { MAX_ATOMS, type StructureAnalysis } from '../graph/analysis.js';
import type { PredictedShifts } from '../prediction/predicted-shifts.js';
import { TransportSolver } from './assignment.js';
import type { Environments } from './environments.js';
import { UNKNOWN_HYDROGENS, type CarbonObservations } from './observations.js';
import type { ScoreModel } from './score-model.js';
import type { SignalBounds } from './signal-bounds.js';
import { StudentT } from './student-t.js';

const TYPE_COUNT = 4;
/** What became of an environment in the best assignment. */
export const OWN_SIGNAL = 0;
export const UNDER_ANOTHER = 1;
export const NOT_SEEN = 2;

/**
 * Log-likelihood of a 13C list under a structure: each environment of the structure has a signal of its own, lies under
 * another signal, or (quaternary, or list incomplete) is not seen; each signal has an environment or is an outlier.
 * The best assignment within each attached-hydrogen type is exact (SCIENCE.md 8.1).
 *
 * Rows are environments, ordered by type, shift and size, so the result depends on neither the numbering of the atoms
 * nor the order of the signals. Scratch and details are overwritten by each structure; nothing is allocated.
 */
export class CarbonLikelihood {
  /** Environments of the structure scored last: first atom, carbons, and what became of each. */
  rowCount = 0;
  readonly rowAtom = new Int32Array(MAX_ATOMS);
  readonly rowSize = new Int32Array(MAX_ATOMS);
  readonly rowFate = new Uint8Array(MAX_ATOMS);
  /** Observed signal of a row (index into the evidence list), −1 when it is not seen. */
  readonly rowSignal = new Int32Array(MAX_ATOMS);
  /** Cost of each row, and of each observed signal by evidence index (0 = it has an environment). */
  readonly rowCost = new Float64Array(MAX_ATOMS);
  readonly signalCost: Float64Array;

  private readonly density: StudentT;
  private readonly overlap: number;
  private readonly solver: TransportSolver;
  private readonly rowType = new Int32Array(MAX_ATOMS);
  private readonly rowShift = new Float64Array(MAX_ATOMS);
  private readonly rowScale = new Float64Array(MAX_ATOMS);
  private readonly rowIsTwin = new Uint8Array(MAX_ATOMS);
  private readonly nearest = new Int32Array(MAX_ATOMS);
  private readonly classesOfType = new Int32Array(TYPE_COUNT);
  private readonly covered: Int32Array;
  /** Signals by shift: all of them, and those of each type. */
  private readonly all: Int32Array;
  private readonly byType: readonly Int32Array[];

  constructor(
    private readonly observed: CarbonObservations,
    private readonly model: ScoreModel['carbon'],
  ) {
    this.density = new StudentT(model.degreesOfFreedom);
    this.overlap = -Math.log(model.resolution);
    this.solver = new TransportSolver(MAX_ATOMS, Math.max(observed.size, 1));
    this.signalCost = new Float64Array(observed.size);
    this.covered = new Int32Array(observed.size);
    this.all = Int32Array.from({ length: observed.size }, (_, i) => i).sort(
      (a, b) => observed.shift[a] - observed.shift[b] || observed.count[a] - observed.count[b],
    );
    this.byType = Array.from({ length: TYPE_COUNT }, (_, type) => this.all.filter((i) => observed.hydrogens[i] === type));
  }

  /**
   * @param s - structure. @param environments, bounds - of it. @param shifts - predicted for it. All read only.
   * @returns ln likelihood, untempered.
   */
  score(s: StructureAnalysis, environments: Environments, bounds: SignalBounds, shifts: PredictedShifts): number {
    this.addRows(s, environments, bounds, shifts);
    this.signalCost.fill(0);
    this.covered.fill(0);
    let cost = 0;
    if (this.observed.isTyped) {
      let start = 0;
      for (let type = 0; type < TYPE_COUNT; type++) {
        let end = start;
        while (end < this.rowCount && this.rowType[end] === type) end++;
        cost += this.solveBlock(start, end, this.byType[type]);
        start = end;
      }
    } else cost = this.solveBlock(0, this.rowCount, this.all);
    return -(cost + this.countMismatches());
  }

  /** A row for each class; two for a class that can show twice, where the list has more signals of the type than classes. */
  private addRows(s: StructureAnalysis, environments: Environments, bounds: SignalBounds, shifts: PredictedShifts): void {
    const { classesOfType, observed, byType } = this;
    this.rowCount = 0;
    classesOfType.fill(0);
    let classes = 0;
    for (let c = 0; c < environments.classCount; c++) {
      if (bounds.carbonSignals[c] === 0) continue;
      classesOfType[Math.min(s.graph.hydrogens[environments.first[c]], TYPE_COUNT - 1)]++;
      classes++;
    }
    for (let c = 0; c < environments.classCount; c++) {
      if (bounds.carbonSignals[c] === 0) continue;
      const atom = environments.first[c];
      const type = Math.min(s.graph.hydrogens[atom], TYPE_COUNT - 1);
      const showsTwice =
        bounds.carbonSignals[c] === 2 && (observed.isTyped ? byType[type].length > classesOfType[type] : observed.size > classes);
      const size = environments.size[c];
      if (!showsTwice) {
        this.addRow(s, atom, size, 0, shifts);
        continue;
      }
      this.addRow(s, atom, size >> 1, 0, shifts);
      this.addRow(s, atom, size - (size >> 1), 1, shifts);
    }
  }

  /** Inserts a row in order of type, shift and size. */
  private addRow(s: StructureAnalysis, atom: number, size: number, isTwin: number, shifts: PredictedShifts): void {
    const { rowAtom, rowSize, rowType, rowShift, rowScale, rowIsTwin } = this;
    const type = Math.min(s.graph.hydrogens[atom], TYPE_COUNT - 1);
    const shift = shifts.carbonShift[atom];
    let at = this.rowCount++;
    while (
      at > 0 &&
      (rowType[at - 1] > type ||
        (rowType[at - 1] === type && (rowShift[at - 1] > shift || (rowShift[at - 1] === shift && rowSize[at - 1] > size))))
    ) {
      rowAtom[at] = rowAtom[at - 1];
      rowSize[at] = rowSize[at - 1];
      rowType[at] = rowType[at - 1];
      rowShift[at] = rowShift[at - 1];
      rowScale[at] = rowScale[at - 1];
      rowIsTwin[at] = rowIsTwin[at - 1];
      at--;
    }
    rowAtom[at] = atom;
    rowSize[at] = size;
    rowType[at] = type;
    rowShift[at] = shift;
    rowScale[at] = shifts.carbonSd[atom] * this.model.scale;
    rowIsTwin[at] = isTwin;
  }

  /** Assigns rows [start, end) and the given signals to each other; returns the cost. */
  private solveBlock(start: number, end: number, signals: Int32Array): number {
    const { solver, observed, model, density, rowShift, rowScale, rowType, rowFate, rowSignal, rowCost, nearest } = this;
    const rows = end - start;
    const columns = signals.length;
    for (let c = 0; c < columns; c++) {
      solver.demand[c] = 1;
      solver.columnRest[c] = observed.maybeSolvent[signals[c]] === 1 ? model.solventOutlier : model.outlier;
    }
    for (let r = 0; r < rows; r++) {
      const row = start + r;
      let least = Infinity;
      let at = -1;
      for (let c = 0; c < columns; c++) {
        const i = signals[c];
        let cost = density.cost(observed.shift[i] - rowShift[row], rowScale[row]);
        if (observed.hydrogens[i] !== rowType[row] && observed.hydrogens[i] !== UNKNOWN_HYDROGENS) cost += model.wrongType;
        solver.cost[r * columns + c] = cost;
        if (cost < least) {
          least = cost;
          at = c;
        }
      }
      const missing = rowType[row] === 0 ? model.missingQuaternary : observed.isComplete ? Infinity : model.missingProtonated;
      const under = this.rowIsTwin[row] === 1 ? model.twinsTogether : least + this.overlap;
      // Protonated carbons of a complete list always have a signal of their type to lie under: the census has seen to that.
      nearest[row] = under <= missing ? at : -1;
      solver.rowRest[r] = Math.min(under, missing, model.outlier);
      solver.supply[r] = 1;
    }
    const total = solver.solve(rows, columns);
    for (let c = 0; c < columns; c++) if (solver.columnLeft[c] > 0) this.signalCost[signals[c]] = solver.columnRest[c];
    for (let r = 0; r < rows; r++) {
      const row = start + r;
      rowFate[row] = NOT_SEEN;
      rowSignal[row] = -1;
      rowCost[row] = solver.rowRest[r];
      if (solver.rowLeft[r] > 0) {
        if (nearest[row] === -1) continue;
        rowFate[row] = UNDER_ANOTHER;
        rowSignal[row] = signals[nearest[row]];
      } else {
        for (let c = 0; c < columns; c++) {
          if (solver.flow[r * columns + c] === 0) continue;
          rowFate[row] = OWN_SIGNAL;
          rowSignal[row] = signals[c];
          rowCost[row] = solver.cost[r * columns + c];
        }
      }
      this.covered[rowSignal[row]] += this.rowSize[row];
    }
    return total;
  }

  /** Signals that state for how many carbons they stand, and cover another number. */
  private countMismatches(): number {
    let missed = 0;
    for (let i = 0; i < this.observed.size; i++) {
      const stated = this.observed.count[i];
      if (stated > 0 && this.signalCost[i] === 0) missed += Math.abs(this.covered[i] - stated);
    }
    return missed * this.model.countMismatch;
  }
}
