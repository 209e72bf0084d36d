import { countOf, parseFormula } from '../../shared/chemistry/formula.js';
import { windowOf } from '../../shared/chemistry/shift-windows.js';
import { type CarbonWindow, type EvidenceDocument, HYBRIDISATIONS } from '../../shared/schemas/evidence.js';
import { SHIFT_RANGES } from '../../shared/chemistry/shift-window-table.js';
import { hybridisationBits, hybridisationOf } from '../enumeration/carbon-census.js';
import { GROUP_SHIFT_RANGES, isGroupCarbon } from '../enumeration/group-shift-ranges.js';
import { SlotMatching } from '../enumeration/slot-matching.js';
import { MAX_ATOMS, NEIGHBOUR_STRIDE, type StructureAnalysis } from '../graph/analysis.js';
import type { Environments } from './environments.js';
import type { CarbonObservations } from './observations.js';
import { UNKNOWN_HYDROGENS } from './observations.js';
import type { SignalBounds } from './signal-bounds.js';
import { ALL_TYPES, SIGNAL_REASONS, windowReason } from './signal-reasons.js';

const CARBON = 6;
const MOST_TYPE = 3;

/** What speaks against a structure, and the atoms it is about. */
interface WindowContradiction {
  readonly reason: string;
  readonly atoms: readonly number[];
}

/**
 * The windows of the 13C signals against a finished structure: every signal needs as many carbons as it stands for, and a
 * carbon environment of its own, with hybridisation and heteroatoms in its window; where the list is complete every carbon
 * with hydrogens needs a signal it fits. Signals that may be the solvent's do not count.
 *
 * Scratch is reused from structure to structure: not re-entrant.
 */
export class WindowCensus {
  /** The test of a document's windows; null when no signal has one that restricts anything. */
  static of(evidence: EvidenceDocument, carbons: CarbonObservations): WindowCensus | null {
    const formula = parseFormula(evidence.formula);
    const counts = formula.ok ? formula.counts : new Map<string, number>();
    const windows = evidence.carbonSignals.map((signal) => windowOf(signal, evidence.options, counts));
    const isRestricting = (window: CarbonWindow | null): boolean =>
      window !== null &&
      (window.hybridisations.length < HYBRIDISATIONS.length || window.heteroNeighbours.min > 0 || window.heteroNeighbours.max < 4);
    if (!windows.some((window, i) => carbons.maybeSolvent[i] === 0 && isRestricting(window))) return null;
    const ofGroups = evidence.carbonSignals.map((signal) =>
      windowOf(signal, evidence.options, counts, [...SHIFT_RANGES, ...GROUP_SHIFT_RANGES]),
    );
    return new WindowCensus(evidence, carbons, windows, ofGroups, formula.ok ? countOf(counts, 'C') : MAX_ATOMS);
  }

  private readonly size: number;
  private readonly isComplete: boolean;
  private readonly hydrogens: Int8Array;
  private readonly count: Uint8Array;
  private readonly limits: WindowLimits;
  /** The same with the shifts of isocyanides, diazo groups and nitrile oxides let in: for their carbons only. */
  private readonly groupLimits: WindowLimits;
  /** Reason when no, or too few, carbons fit a signal. */
  private readonly reasons: readonly string[];
  private readonly environments: SlotMatching;
  /** Signals as often as the carbons they stand for; null where each stands for one. */
  private readonly carbonsUnder: SlotMatching | null;
  private readonly fitting: Int32Array;

  private constructor(
    evidence: EvidenceDocument,
    carbons: CarbonObservations,
    windows: readonly (CarbonWindow | null)[],
    windowsOfGroups: readonly (CarbonWindow | null)[],
    private readonly carbonCount: number,
  ) {
    const own = windows.map((_, i) => i).filter((i) => carbons.maybeSolvent[i] === 0);
    this.size = own.length;
    this.isComplete = carbons.isComplete;
    this.hydrogens = Int8Array.from(own, (i) => carbons.hydrogens[i]);
    this.count = Uint8Array.from(own, (i) => Math.max(carbons.count[i], 1));
    this.limits = limitsOf(own.map((i) => windows[i]));
    this.groupLimits = limitsOf(own.map((i) => windowsOfGroups[i]));
    this.reasons = own.map((i) => windowReason(evidence.carbonSignals[i], windows[i]));
    const counts = Array.from(this.count);
    this.environments = new SlotMatching(new Array<number>(own.length).fill(1), carbonCount);
    this.carbonsUnder = counts.some((count) => count > 1) ? new SlotMatching(counts, carbonCount) : null;
    this.fitting = new Int32Array(own.length);
  }

  /** First contradiction; null when the structure fits. */
  check(s: StructureAnalysis, environments: Environments, bounds: SignalBounds): string | null {
    return this.run(s, environments, bounds, null);
  }

  checkAll(s: StructureAnalysis, environments: Environments, bounds: SignalBounds): WindowContradiction[] {
    const all: WindowContradiction[] = [];
    this.run(s, environments, bounds, all);
    return all;
  }

  /** Collects into `all`, or returns the first reason when that is null. */
  private run(s: StructureAnalysis, environments: Environments, bounds: SignalBounds, all: WindowContradiction[] | null): string | null {
    const { size, hydrogens, count, fitting, reasons, isComplete } = this;
    const { classCount, first, size: sizeOf } = environments;
    const { graph } = s;
    fitting.fill(0);
    let place = 0;
    let carbon = 0;
    let uncovered = -1;
    for (let c = 0; c < classCount; c++) {
      const atom = first[c];
      if (graph.atomicNumbers[atom] !== CARBON) continue;
      const type = Math.min(graph.hydrogens[atom], MOST_TYPE);
      let piBonds = 0;
      let hetero = 0;
      for (let k = 0; k < s.degrees[atom]; k++) {
        const other = s.neighbours[atom * NEIGHBOUR_STRIDE + k];
        piBonds += graph.bondOrders[atom * graph.atomCount + other] - 1;
        if (graph.atomicNumbers[other] !== CARBON) hetero++;
      }
      const bit = 1 << hybridisationOf(piBonds);
      const { bits, leastHetero, mostHetero } = isGroupCarbon(graph, atom) ? this.groupLimits : this.limits;
      const signals = bounds.carbonSignals[c];
      let isShown = false;
      for (let i = 0; i < size; i++) {
        const fits =
          (hydrogens[i] === UNKNOWN_HYDROGENS || hydrogens[i] === type) &&
          (bits[i] & bit) !== 0 &&
          hetero >= leastHetero[i] &&
          hetero <= mostHetero[i];
        if (fits) {
          isShown = true;
          fitting[i] += sizeOf[c];
        }
        for (let k = 0; k < signals; k++) this.environments.allow(i, place + k, fits);
        if (this.carbonsUnder !== null) for (let k = 0; k < sizeOf[c]; k++) this.carbonsUnder.allow(i, carbon + k, fits);
      }
      place += signals;
      carbon += sizeOf[c];
      if (isShown || !isComplete || type === 0) continue;
      if (all === null) uncovered = uncovered === -1 ? type : Math.min(uncovered, type);
      else all.push({ reason: SIGNAL_REASONS.windowAbsent[type], atoms: membersOf(environments, c, graph.atomCount) });
    }
    for (let i = 0; i < size; i++) {
      if (fitting[i] >= count[i]) continue;
      if (all === null) return reasons[i];
      all.push({ reason: reasons[i], atoms: carbonsOfType(s, hydrogens[i]) });
    }
    if (uncovered !== -1) return SIGNAL_REASONS.windowAbsent[uncovered];
    for (let i = 0; i < size; i++) {
      for (let rest = place; rest < this.carbonCount; rest++) this.environments.allow(i, rest, false);
      if (this.carbonsUnder !== null) for (let rest = carbon; rest < this.carbonCount; rest++) this.carbonsUnder.allow(i, rest, false);
    }
    const isShared = (this.carbonsUnder === null || this.carbonsUnder.isPossible()) && this.environments.isPossible();
    if (isShared) return null;
    const reason = SIGNAL_REASONS.windowsTogether[ALL_TYPES];
    if (all === null) return reason;
    if (all.length === 0) all.push({ reason, atoms: carbonsOfType(s, UNKNOWN_HYDROGENS) });
    return null;
  }
}

/** Windows as columns, one entry a signal. */
interface WindowLimits {
  readonly bits: Uint8Array;
  readonly leastHetero: Uint8Array;
  readonly mostHetero: Uint8Array;
}

function limitsOf(windows: readonly (CarbonWindow | null)[]): WindowLimits {
  return {
    bits: Uint8Array.from(windows, (window) => (window === null ? 255 : hybridisationBits(window))),
    leastHetero: Uint8Array.from(windows, (window) => window?.heteroNeighbours.min ?? 0),
    mostHetero: Uint8Array.from(windows, (window) => window?.heteroNeighbours.max ?? 4),
  };
}

function membersOf({ classOf }: Environments, wanted: number, n: number): number[] {
  return Array.from({ length: n }, (_, atom) => atom).filter((atom) => classOf[atom] === wanted);
}

function carbonsOfType(s: StructureAnalysis, type: number): number[] {
  const { atomCount, atomicNumbers, hydrogens } = s.graph;
  return Array.from({ length: atomCount }, (_, atom) => atom).filter(
    (atom) => atomicNumbers[atom] === CARBON && (type === UNKNOWN_HYDROGENS || Math.min(hydrogens[atom], MOST_TYPE) === type),
  );
}
