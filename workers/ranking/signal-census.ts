import { readCorrelations } from '../../shared/chemistry/correlations.js';
import type { EvidenceDocument } from '../../shared/schemas/evidence.js';
import type { StructureAnalysis } from '../graph/analysis.js';
import type { Environments } from './environments.js';
import {
  readCarbonObservations,
  readProtonObservations,
  UNKNOWN_HYDROGENS,
  type CarbonObservations,
  type ProtonObservations,
} from './observations.js';
import type { SignalBounds } from './signal-bounds.js';
import { ALL_TYPES, SIGNAL_REASONS, type SignalReasonKind } from './signal-reasons.js';
import { WindowCensus } from './window-census.js';

const CARBON = 6;
const TYPE_COUNT = 4;
/** Elements whose hydrogens do not exchange. */
const BINDS_FIRMLY: ReadonlySet<number> = new Set([CARBON, 14, 15]);

/** A contradiction between signals and structure, and the atoms it is about. */
export interface SignalContradiction {
  readonly reason: string;
  readonly atoms: readonly number[];
}

/**
 * Hard tests of the number of signals against a structure: what the observation really excludes, whatever the shifts
 * are (SCIENCE.md 2.5). Signals may coincide, so there are upper bounds only; the one lower bound, "no signal of a type,
 * no carbon of that type", holds when the list says it is complete, and never for quaternary carbons. Signals that may
 * be the solvent's do not count. What shifts say of their carbons comes in by the windows of the signals.
 *
 * Scratch is reused from structure to structure: not re-entrant.
 */
export class SignalCensus {
  readonly carbons: CarbonObservations;
  readonly protons: ProtonObservations;
  /** Signals by attached hydrogens, and the carbons they stand for at least. */
  private readonly signals = new Int32Array(TYPE_COUNT);
  private readonly carbonsUnder = new Int32Array(TYPE_COUNT);
  private readonly isCounted = new Uint8Array(TYPE_COUNT).fill(1);
  private readonly largestCount = new Int32Array(TYPE_COUNT);
  private readonly totalCarbonsUnder: number;
  /** Carbons under signals with attached hydrogens, by their number or by an HSQC pair. */
  private readonly protonatedUnder: number;
  private readonly carbonSignalCount: number;
  private readonly protonSignalCount: number;
  private readonly exchangeableUnder: number;
  private readonly boundUnder: number;

  private readonly windows: WindowCensus | null;

  private readonly atoms = new Int32Array(TYPE_COUNT);
  /** Most signals the structure can show of a type, and the most carbons that one of them must stand for. */
  private readonly most = new Int32Array(TYPE_COUNT);
  private readonly largest = new Int32Array(TYPE_COUNT);

  constructor(evidence: EvidenceDocument) {
    this.carbons = readCarbonObservations(evidence);
    this.protons = readProtonObservations(evidence);
    this.windows = WindowCensus.of(evidence, this.carbons);
    const { attached } = readCorrelations(evidence);
    let total = 0;
    let protonated = 0;
    let carbonSignals = 0;
    for (let i = 0; i < this.carbons.size; i++) {
      if (this.carbons.maybeSolvent[i] === 1) continue;
      carbonSignals++;
      const type = this.carbons.hydrogens[i];
      const count = this.carbons.count[i];
      total += Math.max(count, 1);
      if (attached[i].least > 0) protonated += Math.max(count, 1);
      if (type === UNKNOWN_HYDROGENS) continue;
      this.signals[type]++;
      this.carbonsUnder[type] += Math.max(count, 1);
      if (count === 0) this.isCounted[type] = 0;
      this.largestCount[type] = Math.max(this.largestCount[type], count);
    }
    this.totalCarbonsUnder = total;
    this.protonatedUnder = protonated;
    this.carbonSignalCount = carbonSignals;
    let exchangeable = 0;
    let bound = 0;
    let protonSignals = 0;
    for (let i = 0; i < this.protons.size; i++) {
      if (this.protons.maybeSolvent[i] === 1) continue;
      protonSignals++;
      const count = Math.max(this.protons.count[i], 1);
      if (this.protons.exchangeable[i] === 1) exchangeable += count;
      if (this.protons.exchangeable[i] === 0) bound += count;
    }
    this.exchangeableUnder = exchangeable;
    this.boundUnder = bound;
    this.protonSignalCount = protonSignals;
  }

  /**
   * First contradiction, cheapest tests first.
   *
   * @param s - read only. @param environments, bounds - of the same structure, read only.
   * @returns its reason code, null when the structure fits.
   */
  check(s: StructureAnalysis, environments: Environments, bounds: SignalBounds): string | null {
    return this.run(s, environments, bounds, null);
  }

  /** All contradictions with the atoms they are about. */
  checkAll(s: StructureAnalysis, environments: Environments, bounds: SignalBounds): SignalContradiction[] {
    const all: SignalContradiction[] = [];
    this.run(s, environments, bounds, all);
    return all;
  }

  /** Collects into `all`, or returns the first reason when that is null. */
  private run(s: StructureAnalysis, environments: Environments, bounds: SignalBounds, all: SignalContradiction[] | null): string | null {
    this.countCarbons(s, environments, bounds);
    const { signals, carbonsUnder, isCounted, largestCount, atoms, most, largest, carbons } = this;
    let totalAtoms = 0;
    let totalMost = 0;
    for (let type = 0; type < TYPE_COUNT; type++) {
      totalAtoms += atoms[type];
      totalMost += most[type];
      const isShown = carbons.isComplete && type > 0;
      if (carbonsUnder[type] > atoms[type] && this.meet('tooFewCarbons', type, s, all)) return SIGNAL_REASONS.tooFewCarbons[type];
      if (isShown && signals[type] === 0 && atoms[type] > 0 && this.meet('carbonAbsent', type, s, all))
        return SIGNAL_REASONS.carbonAbsent[type];
      if (signals[type] > most[type] && signals[type] <= atoms[type] && this.meet('carbonEnvironments', type, s, all)) {
        return SIGNAL_REASONS.carbonEnvironments[type];
      }
      if (!isShown || signals[type] === 0 || isCounted[type] === 0) continue;
      if (carbonsUnder[type] < atoms[type] && this.meet('carbonCount', type, s, all)) return SIGNAL_REASONS.carbonCount[type];
      if (largest[type] > largestCount[type] && this.meet('equivalentCarbons', type, s, all)) return SIGNAL_REASONS.equivalentCarbons[type];
    }
    if (this.totalCarbonsUnder > totalAtoms && this.meet('tooFewCarbons', ALL_TYPES, s, all))
      return SIGNAL_REASONS.tooFewCarbons[ALL_TYPES];
    // The atoms concerned are the carbons without hydrogens, of which it has too many.
    if (this.protonatedUnder > totalAtoms - atoms[0] && this.meet('tooFewProtonated', 0, s, all)) return SIGNAL_REASONS.tooFewProtonated[0];
    if (
      !carbons.isTyped &&
      this.carbonSignalCount > totalMost &&
      this.carbonSignalCount <= totalAtoms &&
      this.meet('carbonEnvironments', ALL_TYPES, s, all)
    ) {
      return SIGNAL_REASONS.carbonEnvironments[ALL_TYPES];
    }
    if (this.windows !== null) {
      if (all !== null) all.push(...this.windows.checkAll(s, environments, bounds));
      else {
        const reason = this.windows.check(s, environments, bounds);
        if (reason !== null) return reason;
      }
    }
    if (this.exchangeableUnder > 0 || this.boundUnder > 0) {
      const bound = countBoundHydrogens(s);
      const exchangeable = countHydrogens(s) - bound;
      if (this.exchangeableUnder > exchangeable && this.meet('exchangeableProtons', ALL_TYPES, s, all))
        return SIGNAL_REASONS.exchangeableProtons[ALL_TYPES];
      if (this.boundUnder > bound && this.meet('boundProtons', ALL_TYPES, s, all)) return SIGNAL_REASONS.boundProtons[ALL_TYPES];
    }
    if (this.protonSignalCount > 0) {
      let protonSignals = 0;
      for (let c = 0; c < environments.classCount; c++) protonSignals += bounds.protonSignals[c];
      if (this.protonSignalCount > protonSignals && this.meet('protonEnvironments', ALL_TYPES, s, all))
        return SIGNAL_REASONS.protonEnvironments[ALL_TYPES];
    }
    return null;
  }

  /** Notes a contradiction; true when the first one is enough. */
  private meet(kind: SignalReasonKind, type: number, s: StructureAnalysis, all: SignalContradiction[] | null): boolean {
    if (all === null) return true;
    all.push({ reason: SIGNAL_REASONS[kind][type], atoms: atomsConcerned(kind, type, s) });
    return false;
  }

  private countCarbons(s: StructureAnalysis, environments: Environments, bounds: SignalBounds): void {
    const { atoms, most, largest } = this;
    atoms.fill(0);
    most.fill(0);
    largest.fill(0);
    for (let c = 0; c < environments.classCount; c++) {
      const signals = bounds.carbonSignals[c];
      if (signals === 0) continue;
      const type = carbonType(s.graph.hydrogens[environments.first[c]]);
      const size = environments.size[c];
      atoms[type] += size;
      most[type] += signals;
      // Members that can show apart need not all lie under one signal.
      const together = Math.ceil(size / signals);
      if (together > largest[type]) largest[type] = together;
    }
  }
}

/** Methane counts as CH3: no signal can say more. */
const carbonType = (hydrogens: number): number => Math.min(hydrogens, TYPE_COUNT - 1);

function countHydrogens(s: StructureAnalysis): number {
  let count = 0;
  for (let a = 0; a < s.graph.atomCount; a++) count += s.graph.hydrogens[a];
  return count;
}

/** Hydrogens that do not exchange: those on carbon, silicon and phosphorus. */
function countBoundHydrogens(s: StructureAnalysis): number {
  const { atomCount: n, atomicNumbers, hydrogens } = s.graph;
  let count = 0;
  for (let a = 0; a < n; a++) if (BINDS_FIRMLY.has(atomicNumbers[a])) count += hydrogens[a];
  return count;
}

function atomsConcerned(kind: SignalReasonKind, type: number, s: StructureAnalysis): number[] {
  const { atomCount: n, atomicNumbers, hydrogens } = s.graph;
  const atoms: number[] = [];
  for (let a = 0; a < n; a++) {
    const isCarbon = atomicNumbers[a] === CARBON;
    const concerns =
      kind === 'protonEnvironments'
        ? hydrogens[a] > 0
        : kind === 'exchangeableProtons'
          ? !BINDS_FIRMLY.has(atomicNumbers[a]) && hydrogens[a] > 0
          : kind === 'boundProtons'
            ? BINDS_FIRMLY.has(atomicNumbers[a]) && hydrogens[a] > 0
            : isCarbon && (type === ALL_TYPES || carbonType(hydrogens[a]) === type);
    if (concerns) atoms.push(a);
  }
  return atoms;
}
