import type { EvidenceDocument } from '../../shared/schemas/evidence.js';
import { MAX_ATOMS, NEIGHBOUR_STRIDE, type StructureAnalysis } from '../graph/analysis.js';
import { findEquivalence, type Equivalence } from '../graph/equivalence.js';
import type { Environments } from './environments.js';
import { readCarbonObservations, readProtonObservations, UNKNOWN_HYDROGENS, type CarbonObservations, type ProtonObservations } from './observations.js';
import { ALL_TYPES, SIGNAL_REASONS, type SignalReasonKind } from './signal-reasons.js';

const CARBON = 6;
const TYPE_COUNT = 4;

/** A contradiction between signals and structure, and the atoms it is about. */
export interface SignalContradiction {
  readonly reason: string;
  readonly atoms: readonly number[];
}

/**
 * Hard tests of the number of signals against a structure: what the observation really excludes, whatever the shifts
 * are (SCIENCE.md 2.5). Signals may coincide, so there are upper bounds only; the one lower bound, "no signal of a type,
 * no carbon of that type", holds when the list says it is complete, and never for quaternary carbons.
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
  private readonly exchangeableUnder: number;
  private readonly boundUnder: number;

  private readonly atoms = new Int32Array(TYPE_COUNT);
  private readonly classes = new Int32Array(TYPE_COUNT);
  private readonly largestClass = new Int32Array(TYPE_COUNT);
  private readonly sizes = new Uint8Array(MAX_ATOMS);
  private exact: Equivalence | null = null;

  constructor(evidence: EvidenceDocument) {
    this.carbons = readCarbonObservations(evidence);
    this.protons = readProtonObservations(evidence);
    let total = 0;
    for (let i = 0; i < this.carbons.size; i++) {
      const type = this.carbons.hydrogens[i];
      const count = this.carbons.count[i];
      total += Math.max(count, 1);
      if (type === UNKNOWN_HYDROGENS) continue;
      this.signals[type]++;
      this.carbonsUnder[type] += Math.max(count, 1);
      if (count === 0) this.isCounted[type] = 0;
      this.largestCount[type] = Math.max(this.largestCount[type], count);
    }
    this.totalCarbonsUnder = total;
    let exchangeable = 0;
    let bound = 0;
    for (let i = 0; i < this.protons.size; i++) {
      const count = Math.max(this.protons.count[i], 1);
      if (this.protons.exchangeable[i] === 1) exchangeable += count;
      if (this.protons.exchangeable[i] === 0) bound += count;
    }
    this.exchangeableUnder = exchangeable;
    this.boundUnder = bound;
  }

  /** Exact equivalence of the structure tested last, null when no test had to ask for it. */
  get equivalence(): Equivalence | null {
    return this.exact;
  }

  /**
   * First contradiction, cheapest tests first.
   *
   * @param s - read only. @param environments - of the same structure, read only.
   * @returns its reason code, null when the structure fits.
   */
  check(s: StructureAnalysis, environments: Environments): string | null {
    return this.run(s, environments, null);
  }

  /** All contradictions with the atoms they are about. */
  checkAll(s: StructureAnalysis, environments: Environments): SignalContradiction[] {
    const all: SignalContradiction[] = [];
    this.run(s, environments, all);
    return all;
  }

  /** Collects into `all`, or returns the first reason when that is null. */
  private run(s: StructureAnalysis, environments: Environments, all: SignalContradiction[] | null): string | null {
    this.exact = null;
    this.countCarbons(s, environments);
    const { signals, carbonsUnder, isCounted, largestCount, atoms, classes, largestClass, carbons } = this;
    let totalAtoms = 0;
    let totalClasses = 0;
    for (let type = 0; type < TYPE_COUNT; type++) {
      totalAtoms += atoms[type];
      totalClasses += classes[type];
      const isShown = carbons.isComplete && type > 0;
      if (carbonsUnder[type] > atoms[type] && this.meet('tooFewCarbons', type, s, all)) return SIGNAL_REASONS.tooFewCarbons[type];
      if (isShown && signals[type] === 0 && atoms[type] > 0 && this.meet('carbonAbsent', type, s, all)) return SIGNAL_REASONS.carbonAbsent[type];
      if (isShown && signals[type] > 0 && isCounted[type] === 1 && carbonsUnder[type] < atoms[type] && this.meet('carbonCount', type, s, all)) {
        return SIGNAL_REASONS.carbonCount[type];
      }
    }
    if (this.totalCarbonsUnder > totalAtoms && this.meet('tooFewCarbons', ALL_TYPES, s, all)) return SIGNAL_REASONS.tooFewCarbons[ALL_TYPES];
    if (this.exchangeableUnder > 0 || this.boundUnder > 0) {
      const bound = countBoundHydrogens(s);
      const exchangeable = countHydrogens(s) - bound;
      if (this.exchangeableUnder > exchangeable && this.meet('exchangeableProtons', ALL_TYPES, s, all)) return SIGNAL_REASONS.exchangeableProtons[ALL_TYPES];
      if (this.boundUnder > bound && this.meet('boundProtons', ALL_TYPES, s, all)) return SIGNAL_REASONS.boundProtons[ALL_TYPES];
    }
    for (let type = 0; type < TYPE_COUNT; type++) {
      // The hashed classes are never more than the exact ones: only where they fall short, the exact ones are asked for.
      if (signals[type] > classes[type] && signals[type] > this.countExactClasses(s, type) && this.meet('carbonEnvironments', type, s, all)) {
        return SIGNAL_REASONS.carbonEnvironments[type];
      }
      const mustShowAlike = carbons.isComplete && type > 0 && signals[type] > 0 && isCounted[type] === 1;
      if (mustShowAlike && largestClass[type] > largestCount[type] && this.largestExactClass(s, type) > largestCount[type]) {
        if (this.meet('equivalentCarbons', type, s, all)) return SIGNAL_REASONS.equivalentCarbons[type];
      }
    }
    if (!carbons.isTyped && carbons.size > totalClasses && carbons.size > this.countExactClasses(s, ALL_TYPES)) {
      if (this.meet('carbonEnvironments', ALL_TYPES, s, all)) return SIGNAL_REASONS.carbonEnvironments[ALL_TYPES];
    }
    if (this.protons.size > countProtonClasses(s, environments) && this.protons.size > this.countExactProtons(s)) {
      if (this.meet('protonEnvironments', ALL_TYPES, s, all)) return SIGNAL_REASONS.protonEnvironments[ALL_TYPES];
    }
    return null;
  }

  /** Notes a contradiction; true when the first one is enough. */
  private meet(kind: SignalReasonKind, type: number, s: StructureAnalysis, all: SignalContradiction[] | null): boolean {
    if (all === null) return true;
    all.push({ reason: SIGNAL_REASONS[kind][type], atoms: atomsConcerned(kind, type, s) });
    return false;
  }

  private countCarbons(s: StructureAnalysis, environments: Environments): void {
    const { atoms, classes, largestClass } = this;
    atoms.fill(0);
    classes.fill(0);
    largestClass.fill(0);
    const { atomicNumbers, hydrogens } = s.graph;
    for (let c = 0; c < environments.classCount; c++) {
      const atom = environments.first[c];
      if (atomicNumbers[atom] !== CARBON) continue;
      const type = carbonType(hydrogens[atom]);
      const size = environments.size[c];
      atoms[type] += size;
      classes[type]++;
      if (size > largestClass[type]) largestClass[type] = size;
    }
  }

  private exactOf(s: StructureAnalysis): Equivalence {
    this.exact ??= findEquivalence(s.graph, s);
    return this.exact;
  }

  /**
   * Fills `sizes` with the carbons of a type in each exact shift class; returns how many signals these can give at most:
   * one each, two where something beyond the constitution can part the members.
   */
  private countExactClasses(s: StructureAnalysis, type: number): number {
    const { atomCount: n, atomicNumbers, hydrogens } = s.graph;
    const { shiftClasses, shiftClassCount } = this.exactOf(s);
    const most = this.mayPart(s) ? 2 : 1;
    this.sizes.fill(0, 0, shiftClassCount);
    let count = 0;
    for (let a = 0; a < n; a++) {
      if (atomicNumbers[a] !== CARBON || (type !== ALL_TYPES && carbonType(hydrogens[a]) !== type)) continue;
      if (this.sizes[shiftClasses[a]]++ < most) count++;
    }
    return count;
  }

  /**
   * True when constitutionally equivalent groups may show apart although the substitution test finds them alike:
   * slow rotation about N–C(=X) and N–N=O, slow inversion of nitrogen in three-membered rings, allenes, cages whose
   * bridges differ, and pairs of equivalent stereocentres, which have unsymmetrical stereoisomers or come as a mixture.
   */
  private mayPart(s: StructureAnalysis): boolean {
    const { orbits, stereocentres } = this.exactOf(s);
    for (let i = 0; i < stereocentres.length; i++) {
      for (let j = i + 1; j < stereocentres.length; j++) if (orbits[stereocentres[i]] === orbits[stereocentres[j]]) return true;
    }
    return hasSlowNitrogen(s) || hasAllene(s) || hasCage(s);
  }

  private largestExactClass(s: StructureAnalysis, type: number): number {
    this.countExactClasses(s, type);
    let largest = 0;
    for (let c = 0; c < this.exactOf(s).shiftClassCount; c++) if (this.sizes[c] > largest) largest = this.sizes[c];
    return largest;
  }

  /** Most ¹H signals the structure can show: one for each class, two where the hydrogens of a CH2 differ. */
  private countExactProtons(s: StructureAnalysis): number {
    const { atomCount: n, atomicNumbers, hydrogens } = s.graph;
    const { shiftClasses, shiftClassCount, hydrogenTopicity } = this.exactOf(s);
    const isParted = this.mayPart(s);
    this.sizes.fill(0, 0, shiftClassCount);
    let count = 0;
    for (let a = 0; a < n; a++) {
      if (hydrogens[a] === 0) continue;
      // The hydrogens of NH2 and the like differ when the bond to them does not turn, as in primary amides.
      const canDiffer = hydrogens[a] === 2 && (atomicNumbers[a] !== CARBON || isParted || hydrogenTopicity[a] === 'diastereotopic');
      const most = (canDiffer ? 2 : 1) * (isParted ? 2 : 1);
      const given = Math.min(canDiffer ? 2 : 1, most - this.sizes[shiftClasses[a]]);
      this.sizes[shiftClasses[a]] += given;
      count += given;
    }
    return count;
  }
}

/** Methane counts as CH3: no signal can say more. */
const carbonType = (hydrogens: number): number => Math.min(hydrogens, TYPE_COUNT - 1);

/** Classes with hydrogen: a lower bound of the proton environments. */
function countProtonClasses(s: StructureAnalysis, environments: Environments): number {
  let count = 0;
  for (let c = 0; c < environments.classCount; c++) if (s.graph.hydrogens[environments.first[c]] > 0) count++;
  return count;
}

function countHydrogens(s: StructureAnalysis): number {
  let count = 0;
  for (let a = 0; a < s.graph.atomCount; a++) count += s.graph.hydrogens[a];
  return count;
}

/** Hydrogens that do not exchange: those on carbon and silicon. */
function countBoundHydrogens(s: StructureAnalysis): number {
  const { atomCount: n, atomicNumbers, hydrogens } = s.graph;
  let count = 0;
  for (let a = 0; a < n; a++) if (atomicNumbers[a] === CARBON || atomicNumbers[a] === 14) count += hydrogens[a];
  return count;
}

/** Tertiary nitrogen that turns slowly (lone pair taken up by a double bond beside it) or inverts slowly (aziridines). */
function hasSlowNitrogen(s: StructureAnalysis): boolean {
  const { atomCount: n, atomicNumbers, charges } = s.graph;
  for (let a = 0; a < n; a++) {
    if (atomicNumbers[a] !== 7 || charges[a] !== 0 || s.degrees[a] !== 3 || s.hybridisation[a] !== 3) continue;
    if (s.smallestRingOfAtom[a] === 3) return true;
    for (let k = 0; k < 3; k++) {
      const b = s.neighbours[a * NEIGHBOUR_STRIDE + k];
      if (s.hybridisation[b] === 2 && s.aromaticAtoms[b] === 0 && charges[b] === 0) return true;
    }
  }
  return false;
}

/** C=C=C, whose ends lie in crossed planes. */
function hasAllene(s: StructureAnalysis): boolean {
  const { atomCount: n, atomicNumbers } = s.graph;
  for (let a = 0; a < n; a++) {
    if (atomicNumbers[a] === CARBON && s.hybridisation[a] === 1 && s.degrees[a] === 2 && s.graph.bondOrders[a * n + s.neighbours[a * NEIGHBOUR_STRIDE]] === 2) return true;
  }
  return false;
}

/** Two rings with more than one common bond, such as norbornane. */
function hasCage(s: StructureAnalysis): boolean {
  let fusionAtoms = 0;
  for (let a = 0; a < s.graph.atomCount; a++) if (s.ringBondCounts[a] >= 3) fusionAtoms++;
  if (fusionAtoms < 2) return false;
  const { rings } = s;
  for (let i = 0; i < rings.length; i++) {
    for (let j = i + 1; j < rings.length; j++) {
      let shared = 0;
      for (const atom of rings[i]) if (rings[j].includes(atom)) shared++;
      if (shared > 2) return true;
    }
  }
  return false;
}

function atomsConcerned(kind: SignalReasonKind, type: number, s: StructureAnalysis): number[] {
  const { atomCount: n, atomicNumbers, hydrogens } = s.graph;
  const atoms: number[] = [];
  for (let a = 0; a < n; a++) {
    const isCarbon = atomicNumbers[a] === CARBON;
    const concerns =
      kind === 'protonEnvironments' ? hydrogens[a] > 0
      : kind === 'exchangeableProtons' ? !isCarbon && hydrogens[a] > 0
      : kind === 'boundProtons' ? isCarbon && hydrogens[a] > 0
      : isCarbon && (type === ALL_TYPES || carbonType(hydrogens[a]) === type);
    if (concerns) atoms.push(a);
  }
  return atoms;
}
