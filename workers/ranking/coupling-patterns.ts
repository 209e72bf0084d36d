import { NEIGHBOUR_STRIDE, type StructureAnalysis } from '../graph/analysis.js';

const CARBON = 6;
const FLUORINE = 9;
/** Couplings below this (Hz) come and go with resolution and path: SCIENCE.md 3.3, four-bond and CH–CHO couplings. */
const SMALL_COUPLING = 3.2;
const MAX_GROUPS = 4;
const LETTERS: Readonly<Record<string, number>> = { s: 0, d: 1, t: 2, q: 3, quint: 4, sext: 5, sept: 6, oct: 7, non: 8 };

/** A reported multiplicity as numbers of coupling partners. */
export interface ObservedPattern {
  /** Partners by letter (t = 2), without those whose J is small; empty = singlet. */
  readonly partners: readonly number[];
  readonly total: number;
  /** Partners whose J is small: long-range couplings, or none at all at lower resolution. */
  readonly smallTotal: number;
  readonly isBroad: boolean;
}

/**
 * Reads `s d t q … dd dt`, optionally with `br ` in front.
 *
 * @param couplings - J in Hz in the order of the letters; used only when there is one for each letter.
 * @returns null where the pattern says nothing: absent, `m`, `br`.
 */
export function readPattern(multiplicity: string | undefined, couplings: readonly number[] | undefined): ObservedPattern | null {
  if (multiplicity === undefined) return null;
  const isBroad = multiplicity.startsWith('br');
  const text = multiplicity.replace(/^br ?/, '');
  if (text === 'm' || text === '') return null;
  const letters = text.match(/quint|sext|sept|oct|non|[sdtq]/g) ?? [];
  const numbers = letters.map((letter) => LETTERS[letter]).filter((partners) => partners > 0);
  const isSmall = (index: number): boolean => couplings?.length === numbers.length && couplings[index] < SMALL_COUPLING;
  const partners = numbers.filter((_, index) => !isSmall(index)).sort((a, b) => b - a);
  const sum = (list: readonly number[]): number => list.reduce((total, value) => total + value, 0);
  return { partners, total: sum(partners), smallTotal: sum(numbers) - sum(partners), isBroad };
}

/** Coupling partners of the hydrogens on one atom by the first-order rules of SCIENCE.md 3.4; reused, not re-entrant. */
export interface PredictedPattern {
  /** Partners with J above about 3 Hz in groups of equivalent hydrogens, [0, groupCount). */
  readonly groups: Int32Array;
  groupCount: number;
  total: number;
  /** Partners whose coupling may show or not: OH and NH, CH–CHO, long-range and geminal ones. */
  optional: number;
  /** Flexible or fixed rings change J: a missing vicinal coupling is less telling there. */
  isInRing: boolean;
  /** Neighbouring hydrogens couple strongly with each other, so that the pattern is often no longer first order. */
  isAromatic: boolean;
}

export function createPredictedPattern(): PredictedPattern {
  return { groups: new Int32Array(MAX_GROUPS), groupCount: 0, total: 0, optional: 0, isInRing: false, isAromatic: false };
}

const groupClass = new Int32Array(MAX_GROUPS);

/**
 * Works out the partners of the hydrogens on `atom`.
 *
 * @param classOf - class of each atom; hydrogens of one class do not split each other. Read only.
 * @param out - overwritten.
 */
export function predictPattern(s: StructureAnalysis, classOf: Uint8Array, atom: number, out: PredictedPattern): void {
  const { atomicNumbers, hydrogens } = s.graph;
  out.groupCount = out.total = out.optional = 0;
  out.isInRing = s.ringBondCounts[atom] > 0;
  out.isAromatic = s.aromaticAtoms[atom] === 1;
  const isCarbon = atomicNumbers[atom] === CARBON;
  const isSp2 = s.hybridisation[atom] === 2;
  // Long-range partners of sp2 hydrogens (meta, allylic), the geminal partner of a CH2.
  if (isCarbon && isSp2) out.optional += s.aromaticAtoms[atom] === 1 ? 2 : 1;
  if (isCarbon && s.hybridisation[atom] === 1) out.optional += 3;
  if (isCarbon && hydrogens[atom] === 2) out.optional += 1;
  const degree = s.degrees[atom];
  for (let k = 0; k < degree; k++) {
    const b = s.neighbours[atom * NEIGHBOUR_STRIDE + k];
    if (atomicNumbers[b] === FLUORINE) {
      addGroup(out, classOf[b], 1);
      continue;
    }
    if (atomicNumbers[b] === CARBON && s.hybridisation[b] !== 3) out.optional += 1;
    if (hydrogens[b] === 0 || classOf[b] === classOf[atom]) continue;
    const isWeak = !isCarbon || atomicNumbers[b] !== CARBON || isAldehyde(s, atom) || isAldehyde(s, b);
    if (isWeak) out.optional += hydrogens[b];
    else addGroup(out, classOf[b], hydrogens[b]);
  }
}

function addGroup(out: PredictedPattern, groupOf: number, partners: number): void {
  out.total += partners;
  for (let g = 0; g < out.groupCount; g++) {
    if (groupClass[g] !== groupOf) continue;
    out.groups[g] += partners;
    return;
  }
  if (out.groupCount === MAX_GROUPS) return;
  groupClass[out.groupCount] = groupOf;
  out.groups[out.groupCount++] = partners;
}

function isAldehyde(s: StructureAnalysis, atom: number): boolean {
  if (s.graph.atomicNumbers[atom] !== CARBON || s.graph.hydrogens[atom] === 0 || s.hybridisation[atom] !== 2) return false;
  for (let k = 0; k < s.degrees[atom]; k++) {
    const b = s.neighbours[atom * NEIGHBOUR_STRIDE + k];
    if (s.graph.atomicNumbers[b] === 8 && s.graph.bondOrders[atom * s.graph.atomCount + b] === 2) return true;
  }
  return false;
}

/** Costs (−ln probability) by kind of disagreement; judgement after SCIENCE.md 3.4, "score multiplicity softly". */
const MERGED = 0.2;
const BY_OPTIONAL = 0.5;
const OFF_BY_ONE = 1.5;
const OFF_FURTHER = 2.5;
const SINGLET_WITH_NEIGHBOURS = 4;
const RING_RELIEF = 0.5;
const SECOND_ORDER_RELIEF = 0.5;
const BROAD_RELIEF = 0.5;

/**
 * How badly a reported pattern agrees with the partners of a structure: 0 = as expected. Accepted at little cost: merged
 * couplings (sext for CH3CH2CH2), long-range partners that show, small ones that do not. Dear: a clean singlet beside
 * vicinal hydrogens, and numbers of partners that nothing explains.
 */
export function patternCost(observed: ObservedPattern, predicted: PredictedPattern): number {
  const extra = observed.total - predicted.total;
  let cost: number;
  if (extra === 0) cost = isSameGrouping(observed, predicted) ? 0 : MERGED;
  else if (extra > 0 && extra <= predicted.optional) cost = BY_OPTIONAL;
  // What is missing may be among the observed couplings that were too small to count.
  else if (extra < 0 && -extra <= observed.smallTotal) cost = BY_OPTIONAL;
  else if (observed.total === 0) cost = SINGLET_WITH_NEIGHBOURS;
  else cost = Math.abs(extra) === 1 ? OFF_BY_ONE : OFF_FURTHER;
  if (extra < 0) {
    if (predicted.isAromatic) cost *= SECOND_ORDER_RELIEF;
    else if (predicted.isInRing) cost *= RING_RELIEF;
  }
  return observed.isBroad ? cost * BROAD_RELIEF : cost;
}

function isSameGrouping(observed: ObservedPattern, predicted: PredictedPattern): boolean {
  if (observed.partners.length !== predicted.groupCount) return false;
  for (const partners of observed.partners) {
    let difference = 0;
    for (const other of observed.partners) if (other === partners) difference++;
    for (let g = 0; g < predicted.groupCount; g++) if (predicted.groups[g] === partners) difference--;
    if (difference !== 0) return false;
  }
  return true;
}
