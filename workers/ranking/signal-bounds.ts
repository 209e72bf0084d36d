import { MAX_ATOMS, NEIGHBOUR_STRIDE, type StructureAnalysis } from '../graph/analysis.js';
import type { Environments } from './environments.js';

const CARBON = 6;
const NITROGEN = 7;
const SILICON = 14;
const PHOSPHORUS = 15;
const SULFUR = 16;
const NONE = -1;

/**
 * Most signals that each class of equivalent atoms can show: an upper bound for the hot path, never below what the exact
 * substitution test of `workers/graph/equivalence` gives and mostly equal to it (SCIENCE.md 2.5).
 *
 * A class shows twice at most: when its members sit in like branches of one atom, the pivot, and something in the
 * structure tells the branches apart (another stereocentre, the far end of a double bond), or when bonds that turn
 * slowly, cages or pairs of like stereocentres do so everywhere (`isParted`). Scratch and result in one; nothing is
 * allocated.
 */
export class SignalBounds {
  /** Per class, for its carbons and for the hydrogens on its atoms. 0 hydrogens = 0 signals. */
  readonly carbonSignals = new Uint8Array(MAX_ATOMS);
  readonly protonSignals = new Uint8Array(MAX_ATOMS);

  private readonly canSplit = new Uint8Array(MAX_ATOMS);
  private readonly inProchiralBranch = new Uint8Array(MAX_ATOMS);
  private hasCentre = false;
  /** Ring atoms with two unlike groups between two like ring bonds, as C1 of methylcyclohexane. */
  private readonly isRingCentre = new Uint8Array(MAX_ATOMS);
  private ringCentreCount = 0;
  private isParted = false;

  /** @param s - read only. @param environments - of the same structure, read only. */
  find(s: StructureAnalysis, environments: Environments): void {
    this.findUnits(s, environments);
    this.findSplitBranches(s, environments);
    const { classCount, first, size } = environments;
    for (let c = 0; c < classCount; c++) {
      const atom = first[c];
      const groups = size[c] > 1 && (this.isParted || this.canSplit[c] === 1) ? 2 : 1;
      this.carbonSignals[c] = s.graph.atomicNumbers[atom] === CARBON ? groups : 0;
      this.protonSignals[c] = s.graph.hydrogens[atom] === 0 ? 0 : groups * this.hydrogenKinds(s, environments, c, atom);
    }
  }

  /** Looks for what makes groups elsewhere in the structure diastereotopic. */
  private findUnits(s: StructureAnalysis, environments: Environments): void {
    const { classCount, first, size, classOf } = environments;
    this.hasCentre = this.isParted = false;
    this.ringCentreCount = 0;
    this.isRingCentre.fill(0, 0, classCount);
    for (let c = 0; c < classCount; c++) {
      const atom = first[c];
      if (!isCentre(s, atom) || s.graph.hydrogens[atom] > 1) continue;
      const pair = likeNeighbours(s, classOf, atom);
      if (pair === NONE) {
        this.hasCentre = true;
        // Two like stereocentres: some stereoisomer is unsymmetrical, or the sample is a mixture of them.
        if (size[c] > 1) this.isParted = true;
      } else if (s.ringBondCounts[atom] === 4 && joinsUnevenRings(s, atom, pair, classOf)) this.hasCentre = true;
      else if (isRingPair(s, classOf, atom, classOf[pair]) && otherNeighboursDiffer(s, classOf, atom, classOf[pair])) {
        this.isRingCentre[c] = 1;
        this.ringCentreCount += size[c];
      }
    }
    if (!this.isParted) this.isParted = hasSlowNitrogen(s) || hasAllene(s) || hasCage(s);
  }

  /** Marks the classes whose members lie in like branches that can be told apart, and those in branches of a prochiral atom. */
  private findSplitBranches(s: StructureAnalysis, environments: Environments): void {
    const { classCount, first, classOf } = environments;
    const { canSplit, inProchiralBranch } = this;
    canSplit.fill(0, 0, classCount);
    inProchiralBranch.fill(0, 0, classCount);
    let found = false;
    for (let c = 0; c < classCount; c++) {
      const pivot = first[c];
      if (!isCentre(s, pivot) || s.graph.hydrogens[pivot] > 1) continue;
      for (let k = 0; k < s.degrees[pivot]; k++) {
        const branch = classOf[s.neighbours[pivot * NEIGHBOUR_STRIDE + k]];
        if (
          inProchiralBranch[branch] === 1 ||
          !hasLaterOfClass(s, classOf, pivot, k, branch) ||
          !otherNeighboursDiffer(s, classOf, pivot, branch)
        )
          continue;
        inProchiralBranch[branch] = 1;
        found = true;
      }
    }
    if (found) spreadOutwards(s, environments, inProchiralBranch);
    found = false;
    for (let c = 0; c < classCount; c++) {
      const pivot = first[c];
      for (let k = 0; k < s.degrees[pivot]; k++) {
        const branch = classOf[s.neighbours[pivot * NEIGHBOUR_STRIDE + k]];
        if (canSplit[branch] === 1 || !hasLaterOfClass(s, classOf, pivot, k, branch) || !this.pivotSplits(s, classOf, pivot, branch))
          continue;
        canSplit[branch] = 1;
        found = true;
      }
    }
    if (found) spreadOutwards(s, environments, canSplit);
  }

  /** Can the like branches on a pivot be told apart? */
  private pivotSplits(s: StructureAnalysis, classOf: Uint8Array, pivot: number, branch: number): boolean {
    if (isCentre(s, pivot)) {
      // Three like groups turn past each other.
      if (countOfClass(s, classOf, pivot, branch) !== 2) return false;
      if (this.hasCentre || this.inProchiralBranch[classOf[pivot]] === 1) return true;
      // Like groups on a ring atom are cis and trans to what another ring atom carries.
      if (s.ringBondCounts[pivot] === 0 || this.ringCentreCount <= this.isRingCentre[classOf[pivot]]) return false;
      return s.ringBondCounts[pivot] === 4 || !isRingPair(s, classOf, pivot, branch);
    }
    if (s.hybridisation[pivot] !== 2 || s.aromaticAtoms[pivot] === 1) return false;
    for (let k = 0; k < s.degrees[pivot]; k++) {
      const far = s.neighbours[pivot * NEIGHBOUR_STRIDE + k];
      if (s.graph.bondOrders[pivot * s.graph.atomCount + far] === 2)
        return classOf[far] !== branch && farEndHasSides(s, classOf, far, pivot);
    }
    return false;
  }

  /** Hydrogens on one atom of a class that can show apart: 1, or 2 for CH2 and NH2. */
  private hydrogenKinds(s: StructureAnalysis, environments: Environments, c: number, atom: number): number {
    if (s.graph.hydrogens[atom] !== 2) return 1;
    // The hydrogens of NH2 differ when the bond to them does not turn, as in primary amides.
    if (s.graph.atomicNumbers[atom] !== CARBON && s.graph.atomicNumbers[atom] !== SILICON) return 2;
    if (this.isParted) return 2;
    if (s.hybridisation[atom] === 3) {
      return this.hasCentre || (this.ringCentreCount > 0 && s.ringBondCounts[atom] > 0) || this.inProchiralBranch[c] === 1 ? 2 : 1;
    }
    if (s.degrees[atom] !== 1) return 1;
    return farEndHasSides(s, environments.classOf, s.neighbours[atom * NEIGHBOUR_STRIDE], atom) ? 2 : 1;
  }
}

/** Atom with four fixed places: sp3 carbon, silicon, phosphorus, quaternary nitrogen; sulfoxide-type sulfur. */
function isCentre(s: StructureAnalysis, atom: number): boolean {
  const z = s.graph.atomicNumbers[atom];
  if (z === SULFUR) return s.degrees[atom] === 3;
  if (z !== CARBON && z !== SILICON && z !== PHOSPHORUS && !(z === NITROGEN && s.graph.charges[atom] === 1)) return false;
  return s.hybridisation[atom] === 3 && s.degrees[atom] + s.graph.hydrogens[atom] === 4;
}

/** A neighbour that has another one of its class beside it, NONE if all differ. */
function likeNeighbours(s: StructureAnalysis, classOf: Uint8Array, atom: number): number {
  for (let k = 0; k < s.degrees[atom]; k++) {
    const a = s.neighbours[atom * NEIGHBOUR_STRIDE + k];
    if (hasLaterOfClass(s, classOf, atom, k, classOf[a])) return a;
  }
  return NONE;
}

function hasLaterOfClass(s: StructureAnalysis, classOf: Uint8Array, atom: number, k: number, wanted: number): boolean {
  for (let l = k + 1; l < s.degrees[atom]; l++) if (classOf[s.neighbours[atom * NEIGHBOUR_STRIDE + l]] === wanted) return true;
  return false;
}

function countOfClass(s: StructureAnalysis, classOf: Uint8Array, atom: number, wanted: number): number {
  let count = 0;
  for (let k = 0; k < s.degrees[atom]; k++) if (classOf[s.neighbours[atom * NEIGHBOUR_STRIDE + k]] === wanted) count++;
  return count;
}

/** Marks the classes farther out in marked branches: those of the same or a greater size next to a marked one. */
function spreadOutwards(s: StructureAnalysis, environments: Environments, marked: Uint8Array): void {
  const { classCount, first, size, classOf } = environments;
  for (let changed = true; changed;) {
    changed = false;
    for (let c = 0; c < classCount; c++) {
      if (size[c] < 2 || marked[c] === 1) continue;
      const atom = first[c];
      for (let k = 0; k < s.degrees[atom]; k++) {
        const inner = classOf[s.neighbours[atom * NEIGHBOUR_STRIDE + k]];
        if (marked[inner] === 0 || size[inner] < 2 || size[inner] > size[c]) continue;
        marked[c] = 1;
        changed = true;
        break;
      }
    }
  }
}

/** Spiro atom whose like neighbours lie in different rings: each ring has two different sides, as in 1,6-dioxaspiro[4.4]nonane. */
function joinsUnevenRings(s: StructureAnalysis, atom: number, like: number, classOf: Uint8Array): boolean {
  for (const ring of s.rings) {
    if (!ring.includes(atom) || !ring.includes(like)) continue;
    return !ring.some(
      (other) => other !== like && classOf[other] === classOf[like] && s.graph.bondOrders[atom * s.graph.atomCount + other] > 0,
    );
  }
  return false;
}

/** Are all bonds from the atom to neighbours of this class ring bonds? */
function isRingPair(s: StructureAnalysis, classOf: Uint8Array, atom: number, wanted: number): boolean {
  for (let k = 0; k < s.degrees[atom]; k++) {
    const a = s.neighbours[atom * NEIGHBOUR_STRIDE + k];
    if (classOf[a] === wanted && s.smallestRingOfBond[atom * s.graph.atomCount + a] === 0) return false;
  }
  return true;
}

/** Two substituents of the class, and the two others (one may be hydrogen) unlike each other and unlike the pair. */
function otherNeighboursDiffer(s: StructureAnalysis, classOf: Uint8Array, atom: number, pair: number): boolean {
  let ofPair = 0;
  let other = NONE;
  for (let k = 0; k < s.degrees[atom]; k++) {
    const c = classOf[s.neighbours[atom * NEIGHBOUR_STRIDE + k]];
    if (c === pair) ofPair++;
    else if (c === other) return false;
    else other = c;
  }
  return ofPair === 2;
}

/** Does the far end of a double bond have two different sides? A lone pair or a single hydrogen is a side. */
function farEndHasSides(s: StructureAnalysis, classOf: Uint8Array, far: number, near: number): boolean {
  const z = s.graph.atomicNumbers[far];
  if (z !== CARBON && z !== NITROGEN) return false;
  if (s.hybridisation[far] !== 2) return false;
  let a = NONE;
  let b = NONE;
  for (let k = 0; k < s.degrees[far]; k++) {
    const next = s.neighbours[far * NEIGHBOUR_STRIDE + k];
    if (next === near) continue;
    if (a === NONE) a = classOf[next];
    else b = classOf[next];
  }
  if (a === NONE) return z === NITROGEN && s.graph.hydrogens[far] === 1;
  return a !== b;
}

/** Tertiary nitrogen that turns slowly (lone pair taken up by a double bond beside it) or inverts slowly (aziridines). */
function hasSlowNitrogen(s: StructureAnalysis): boolean {
  const { atomCount: n, atomicNumbers, charges } = s.graph;
  for (let a = 0; a < n; a++) {
    if (atomicNumbers[a] !== NITROGEN || charges[a] !== 0 || s.degrees[a] !== 3 || s.hybridisation[a] !== 3) continue;
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
  const { atomCount: n, atomicNumbers, bondOrders } = s.graph;
  for (let a = 0; a < n; a++) {
    if (
      atomicNumbers[a] === CARBON &&
      s.hybridisation[a] === 1 &&
      s.degrees[a] === 2 &&
      bondOrders[a * n + s.neighbours[a * NEIGHBOUR_STRIDE]] === 2
    )
      return true;
  }
  return false;
}

/**
 * Two rings with more than one common bond, such as norbornane. Told without listing rings: some atom has three ring
 * bonds whose pairs all close rings, and no two fusion atoms that are bonded explain them.
 */
function hasCage(s: StructureAnalysis): boolean {
  let fusionAtoms = 0;
  let unpaired = 0;
  const n = s.graph.atomCount;
  for (let a = 0; a < n; a++) {
    if (s.ringBondCounts[a] !== 3) {
      // Four ring bonds: spiro when no ring bond leads to another fusion atom, else a propellane-like cage.
      if (s.ringBondCounts[a] > 3) unpaired++;
      continue;
    }
    fusionAtoms++;
    let partners = 0;
    for (let k = 0; k < s.degrees[a]; k++) {
      const b = s.neighbours[a * NEIGHBOUR_STRIDE + k];
      if (s.ringBondCounts[b] >= 3 && s.smallestRingOfBond[a * n + b] > 0) partners++;
    }
    if (partners === 0) unpaired++;
  }
  return fusionAtoms >= 2 && unpaired > 0;
}
