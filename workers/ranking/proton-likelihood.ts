import type { ProtonSignal } from '../../shared/schemas/evidence.js';
import { MAX_ATOMS, type StructureAnalysis } from '../graph/analysis.js';
import type { PredictedShifts } from '../prediction/predicted-shifts.js';
import { TransportSolver } from './assignment.js';
import {
  createPredictedPattern,
  patternCost,
  predictPattern,
  readPattern,
  type ObservedPattern,
  type PredictedPattern,
} from './coupling-patterns.js';
import type { Environments } from './environments.js';
import type { ProtonObservations } from './observations.js';
import type { ScoreModel } from './score-model.js';
import type { SignalBounds } from './signal-bounds.js';
import { StudentT } from './student-t.js';

/**
 * Log-likelihood of a 1H list under a structure, split into shift, multiplicity and integral terms.
 *
 * Rows are sets of equivalent hydrogens with their number as supply; signals take as many hydrogens as they integrate
 * for, so that one signal may stand for several environments ("7.3 m 5H") and an environment may show twice (the
 * hydrogens of a CH2 beside a stereocentre). Where a signal has no count, every environment counts once and those without
 * a signal of their own lie under another. Exchangeable hydrogens may be missing and weigh little (SCIENCE.md 3.1, 3.4).
 *
 * The multiplicity is weighed in the assignment itself; uneven sharing afterwards. Scratch and details are overwritten by
 * each structure; nothing is allocated.
 */
export class ProtonLikelihood {
  /** Log-likelihood terms of the structure scored last, untempered. */
  shiftTerm = 0;
  multiplicityTerm = 0;
  integralTerm = 0;

  /** Rows of the structure scored last: first heavy atom and number of hydrogens. */
  rowCount = 0;
  readonly rowAtom = new Int32Array(MAX_ATOMS);
  readonly rowSupply = new Int32Array(MAX_ATOMS);
  readonly rowIsExchangeable = new Uint8Array(MAX_ATOMS);
  /** Environment under another signal (only without counts): evidence index of that signal, else −1. */
  readonly rowUnder = new Int32Array(MAX_ATOMS);

  private readonly density: StudentT;
  private readonly overlap: number;
  private readonly solver: TransportSolver;
  private readonly patterns: readonly (ObservedPattern | null)[];
  private readonly hasPatterns: boolean;
  private readonly rowShift = new Float64Array(MAX_ATOMS);
  private readonly rowScale = new Float64Array(MAX_ATOMS);
  /** 1 where the hydrogens of the row can show as two signals. */
  private readonly rowShowsTwice = new Uint8Array(MAX_ATOMS);
  private readonly rowPatterns: readonly PredictedPattern[];
  private readonly nearest = new Int32Array(MAX_ATOMS);
  /** Shift and multiplicity cost of laying a row on a signal, whole row, row-major over columns. */
  private readonly shiftCost: Float64Array;
  private readonly patternCosts: Float64Array;
  /** Signals by shift. */
  private readonly order: Int32Array;

  constructor(
    private readonly observed: ProtonObservations,
    signals: readonly ProtonSignal[],
    private readonly model: ScoreModel['proton'],
  ) {
    const columns = Math.max(observed.size, 1);
    this.density = new StudentT(model.degreesOfFreedom);
    this.overlap = -Math.log(model.resolution);
    this.solver = new TransportSolver(MAX_ATOMS, columns);
    this.shiftCost = new Float64Array(MAX_ATOMS * columns);
    this.patternCosts = new Float64Array(MAX_ATOMS * columns);
    this.patterns = signals.map(({ multiplicity, couplings }) => readPattern(multiplicity, couplings));
    this.hasPatterns = this.patterns.some((pattern) => pattern !== null);
    this.rowPatterns = Array.from({ length: MAX_ATOMS }, createPredictedPattern);
    const text = signals.map(({ multiplicity, couplings }) => `${multiplicity ?? ''} ${(couplings ?? []).join(' ')}`);
    this.order = Int32Array.from({ length: observed.size }, (_, i) => i).sort(
      (a, b) =>
        observed.shift[a] - observed.shift[b] ||
        observed.count[a] - observed.count[b] ||
        (text[a] < text[b] ? -1 : text[a] > text[b] ? 1 : 0),
    );
  }

  /** Hydrogens of a row that were laid on the signal with this evidence index (with counts), or 1 (without). */
  laidOn(row: number, signal: number): number {
    return this.solver.flow[row * this.observed.size + this.order.indexOf(signal)];
  }

  /** What the signal with this evidence index costs in the best assignment, by term; overlap and outliers are in `shift`. */
  signalCost(signal: number): { shift: number; pattern: number } {
    const { solver, observed, rowSupply } = this;
    const column = this.order.indexOf(signal);
    let shift = solver.columnLeft[column] * solver.columnRest[column];
    let pattern = 0;
    let environments = 0;
    for (let r = 0; r < this.rowCount; r++) {
      const k = r * observed.size + column;
      const isUnder = this.rowUnder[r] === signal;
      if (solver.flow[k] === 0 && !isUnder) continue;
      const part = observed.isCounted ? solver.flow[k] / rowSupply[r] : 1;
      shift += isUnder ? solver.rowRest[r] - this.patternCosts[k] : part * this.shiftCost[k];
      pattern += part * this.patternCosts[k];
      environments++;
    }
    if (observed.isCounted && environments > 1) shift += (environments - 1) * this.overlap;
    return { shift, pattern };
  }

  /** Cost of a row that no signal shows. */
  missingCost(row: number): number {
    return this.restOf(row);
  }

  /** Scores a structure; results are in the term fields. Arguments as in CarbonLikelihood.score, read only. */
  score(s: StructureAnalysis, environments: Environments, bounds: SignalBounds, shifts: PredictedShifts): void {
    this.rowCount = 0;
    for (let c = 0; c < environments.classCount; c++) {
      if (bounds.protonSignals[c] > 0) this.addRow(s, environments, c, bounds.protonSignals[c] > 1 ? 1 : 0, shifts);
    }
    this.shiftTerm = this.multiplicityTerm = this.integralTerm = 0;
    this.fillCosts();
    if (this.observed.isCounted) this.solveCounted();
    else this.solveUncounted();
  }

  /** Inserts a row in order of shift, then of everything else that the result can depend on. */
  private addRow(s: StructureAnalysis, environments: Environments, c: number, showsTwice: number, shifts: PredictedShifts): void {
    const { rowAtom, rowSupply, rowIsExchangeable, rowShift, rowScale, rowShowsTwice, model } = this;
    const atom = environments.first[c];
    const supply = environments.size[c] * s.graph.hydrogens[atom];
    const z = s.graph.atomicNumbers[atom];
    const isExchangeable = z === 7 || z === 8 || z === 16 ? 1 : 0;
    const shift = shifts.protonShift[atom];
    const scale = (isExchangeable === 1 ? Math.max(shifts.protonSd[atom], model.exchangeableSpread) : shifts.protonSd[atom]) * model.scale;
    let at = this.rowCount++;
    while (
      at > 0 &&
      (rowShift[at - 1] > shift || (rowShift[at - 1] === shift && rowSupply[at - 1] * 2 + rowShowsTwice[at - 1] > supply * 2 + showsTwice))
    ) {
      rowAtom[at] = rowAtom[at - 1];
      rowSupply[at] = rowSupply[at - 1];
      rowIsExchangeable[at] = rowIsExchangeable[at - 1];
      rowShift[at] = rowShift[at - 1];
      rowScale[at] = rowScale[at - 1];
      rowShowsTwice[at] = rowShowsTwice[at - 1];
      if (this.hasPatterns) copyPattern(this.rowPatterns[at - 1], this.rowPatterns[at]);
      at--;
    }
    rowAtom[at] = atom;
    rowSupply[at] = supply;
    rowIsExchangeable[at] = isExchangeable;
    rowShift[at] = shift;
    rowScale[at] = scale;
    rowShowsTwice[at] = showsTwice;
    if (this.hasPatterns) predictPattern(s, environments.classOf, atom, this.rowPatterns[at]);
  }

  private fillCosts(): void {
    const { observed, model, density, order, shiftCost, patternCosts, rowShift, rowScale, rowIsExchangeable } = this;
    const columns = observed.size;
    for (let r = 0; r < this.rowCount; r++) {
      for (let c = 0; c < columns; c++) {
        const i = order[c];
        let cost = density.cost(observed.shift[i] - rowShift[r], rowScale[r]);
        if (observed.exchangeable[i] !== -1 && observed.exchangeable[i] !== rowIsExchangeable[r]) cost += model.wrongExchange;
        shiftCost[r * columns + c] = cost;
        const pattern = this.patterns[i];
        // Exchangeable hydrogens are broad or split as water and temperature have it: their pattern says nothing.
        patternCosts[r * columns + c] = pattern === null || rowIsExchangeable[r] === 1 ? 0 : patternCost(pattern, this.rowPatterns[r]);
      }
    }
  }

  private restOf(row: number): number {
    return this.rowIsExchangeable[row] === 1 ? this.model.exchangeableMissing : this.model.missing;
  }

  /** Every signal has a count: hydrogens are shared out. A row's cost counts once, in equal parts for its hydrogens. */
  private solveCounted(): void {
    const { solver, observed, model, order, shiftCost, patternCosts, rowSupply } = this;
    const columns = observed.size;
    for (let c = 0; c < columns; c++) {
      solver.demand[c] = observed.count[order[c]];
      solver.columnRest[c] = model.outlier / observed.count[order[c]];
    }
    for (let r = 0; r < this.rowCount; r++) {
      solver.supply[r] = rowSupply[r];
      solver.rowRest[r] = this.restOf(r) / rowSupply[r];
      for (let k = r * columns; k < (r + 1) * columns; k++) solver.cost[k] = (shiftCost[k] + patternCosts[k]) / rowSupply[r];
      this.rowUnder[r] = -1;
    }
    solver.solve(this.rowCount, columns);
    let shift = 0;
    let pattern = 0;
    let sharing = 0;
    for (let r = 0; r < this.rowCount; r++) {
      let parts = solver.rowLeft[r] > 0 ? 1 : 0;
      let largest = solver.rowLeft[r];
      shift += solver.rowLeft[r] * solver.rowRest[r];
      for (let c = 0; c < columns; c++) {
        const k = r * columns + c;
        const laid = solver.flow[k];
        if (laid === 0) continue;
        parts++;
        if (laid > largest) largest = laid;
        shift += (laid * shiftCost[k]) / rowSupply[r];
        pattern += (laid * patternCosts[k]) / rowSupply[r];
      }
      if (parts > 1) {
        // Two halves: CH2 hydrogens or groups that stereochemistry tells apart. Anything else does not happen by itself.
        const isHalved = parts === 2 && largest * 2 === rowSupply[r] && this.rowShowsTwice[r] === 1;
        sharing += isHalved ? model.split : (parts - 1) * model.unevenSplit;
      }
    }
    for (let c = 0; c < columns; c++) {
      shift += solver.columnLeft[c] * solver.columnRest[c];
      let environments = 0;
      for (let r = 0; r < this.rowCount; r++) if (solver.flow[r * columns + c] > 0) environments++;
      if (environments > 1) shift += (environments - 1) * this.overlap;
    }
    this.shiftTerm = -shift;
    this.multiplicityTerm = -pattern;
    this.integralTerm = -sharing;
  }

  /** Some count is unknown: environments count once, those without a signal of their own lie under another. */
  private solveUncounted(): void {
    const { solver, observed, model, shiftCost, patternCosts, nearest, order } = this;
    const columns = observed.size;
    for (let c = 0; c < columns; c++) {
      solver.demand[c] = 1;
      solver.columnRest[c] = observed.maybeSolvent[order[c]] === 1 ? model.solventOutlier : model.outlier;
    }
    for (let r = 0; r < this.rowCount; r++) {
      let least = Infinity;
      let at = -1;
      for (let c = 0; c < columns; c++) {
        const k = r * columns + c;
        solver.cost[k] = shiftCost[k] + patternCosts[k];
        if (solver.cost[k] < least) {
          least = solver.cost[k];
          at = c;
        }
      }
      const under = least + this.overlap;
      const missing = this.restOf(r);
      nearest[r] = under < missing ? at : -1;
      solver.rowRest[r] = Math.min(under, missing);
      solver.supply[r] = 1;
    }
    let shift = solver.solve(this.rowCount, columns);
    let pattern = 0;
    for (let r = 0; r < this.rowCount; r++) {
      this.rowUnder[r] = solver.rowLeft[r] > 0 && nearest[r] !== -1 ? order[nearest[r]] : -1;
      for (let c = 0; c < columns; c++) {
        const isLaid = solver.flow[r * columns + c] > 0 || (solver.rowLeft[r] > 0 && nearest[r] === c);
        if (isLaid) pattern += patternCosts[r * columns + c];
      }
    }
    shift -= pattern;
    let miscounted = 0;
    for (let c = 0; c < columns; c++) if (observed.count[order[c]] > 0) miscounted += this.miscount(c);
    this.shiftTerm = -shift;
    this.multiplicityTerm = -pattern;
    this.integralTerm = -miscounted;
  }

  /** A signal with a count among others without: hydrogens that cover it against those it stands for. */
  private miscount(column: number): number {
    let covered = 0;
    for (let r = 0; r < this.rowCount; r++) {
      if (this.solver.flow[r * this.observed.size + column] > 0 || (this.solver.rowLeft[r] > 0 && this.nearest[r] === column))
        covered += this.rowSupply[r];
    }
    const stated = this.observed.count[this.order[column]];
    return covered === stated || covered === 0 ? 0 : this.model.unevenSplit;
  }
}

function copyPattern(from: PredictedPattern, to: PredictedPattern): void {
  to.groups.set(from.groups);
  to.groupCount = from.groupCount;
  to.total = from.total;
  to.optional = from.optional;
  to.isInRing = from.isInRing;
  to.isAromatic = from.isAromatic;
}
