import { MAX_ATOMS } from '../graph/analysis.js';
import type { CorrelationModel } from './correlation-model.js';

/** Sets of atoms are two 32-bit words: atoms 0–31 and 32–39. */
export const WORDS = 2;
const MASKS = MAX_ATOMS * WORDS;

/** Outcome of a match. */
export const MET = 1;
export const FAILED = 0;
/** The search grew too long; nothing is known. */
export const UNSETTLED = 2;

/** Relations between two ends of a pair: HMBC from the proton's atom, HMBC from the carbon, COSY. */
const FROM_PROTON = 0;
const FROM_CARBON = 1;
const COSY = 2;
const RELATIONS = 3;

const NONE = -1;

export function setBit(masks: Int32Array, k: number, atom: number): void {
  masks[k * WORDS + (atom >> 5)] |= 1 << (atom & 31);
}
export function hasBit(masks: Int32Array, k: number, atom: number): boolean {
  return ((masks[k * WORDS + (atom >> 5)] >> (atom & 31)) & 1) === 1;
}
/** Do two atoms have the same neighbours, each other left out? */
export function areTwins(adjacency: Int32Array, a: number, b: number): boolean {
  for (let w = 0; w < WORDS; w++) {
    const both = (a >> 5 === w ? 1 << (a & 31) : 0) | (b >> 5 === w ? 1 << (b & 31) : 0);
    if (((adjacency[a * WORDS + w] ^ adjacency[b * WORDS + w]) & ~both) !== 0) return false;
  }
  return true;
}
function countBits(x: number): number {
  x -= (x >>> 1) & 0x55555555;
  x = (x & 0x33333333) + ((x >>> 2) & 0x33333333);
  return Math.imul((x + (x >>> 4)) & 0x0f0f0f0f, 0x01010101) >>> 24;
}

/**
 * Tells whether signals can be laid on the atoms of a structure so that at most the allowed number of COSY and HMBC pairs
 * goes unmet.
 *
 * A pair is met when some atom of one signal and some atom of the other are near enough. Each signal gets as many atoms as
 * it has slots, each carbon goes to one 13C signal, and where classes of equivalent atoms are given, no class gets more
 * signals than it can show. Backtracking, the signal with the fewest places first; what a pair that must be met leaves of
 * its other end's places is carried forward. (Forward checking: Haralick & Elliott, Artif. Intell. 1980, 14, 263.)
 *
 * The caller describes a structure in the public arrays and calls `match`. Bonds may stand for bonds that are merely
 * possible: then `FAILED` holds for every structure with some of them. Nothing is allocated by `match`; not re-entrant.
 */
export class CorrelationMatcher {
  /** Atoms bonded to each atom. */
  readonly adjacency = new Int32Array(MASKS);
  /** Atoms with hydrogen. */
  readonly protonated = new Int32Array(WORDS);
  /** Atoms on which two hydrogens can show apart. */
  readonly geminal = new Int32Array(WORDS);
  /** Per site: atoms it may lie on. */
  readonly places: Int32Array;
  /** Per site: 1 when it stands for its atoms and all that are alike. */
  readonly isOpen: Uint8Array;
  /** Atoms that are, or may be, equivalent to each atom, itself included. Read only where a site is open. */
  readonly alike = new Int32Array(MASKS);
  /** Lowest atom with which an atom can change places without changing anything else; itself if there is none. */
  readonly twinOf = new Uint8Array(MAX_ATOMS);
  /** Classes of equivalent atoms with the 13C and 1H signals that each can show; null = not known, no limit. */
  classes: { readonly classOf: Uint8Array; readonly carbonSignals: Uint8Array; readonly protonSignals: Uint8Array } | null = null;

  /** Result of a match that was met: atom of each slot, and 1 for each constraint that is not met. */
  readonly atomOfSlot: Int8Array;
  readonly isUnmet: Uint8Array;
  readonly firstSlot: Int32Array;

  private readonly siteCount: number;
  private readonly slotCount: number;
  private readonly siteOfSlot: Int32Array;
  private readonly isCarbon: Uint8Array;
  private readonly tiedProtons: Uint8Array;
  /** Alternatives of constraint p: entries [endStart[p], endStart[p + 1]) of endA, endB. */
  private readonly endStart: Int32Array;
  private readonly endA: Int32Array;
  private readonly endB: Int32Array;
  private readonly isHmbc: Uint8Array;
  /** 1 for a constraint between two different sites of one slot each, without alternatives. */
  private readonly isSimple: Uint8Array;
  /** Constraints of each site. */
  private readonly constraintStart: Int32Array;
  private readonly constraintsOf: Int32Array;
  /** Sites by falling number of constraints: of those with equally few places, the first is laid first. */
  private readonly order: Int32Array;
  private readonly hmbcSteps: number;
  private readonly cosySteps: number;

  private readonly reach = new Int32Array(MASKS);
  private readonly wider = new Int32Array(MASKS);
  /** near[((relation * 4 + first end open * 2 + second end open) * MAX_ATOMS + atom) * WORDS]: where the other end may be. */
  private readonly near = new Int32Array(RELATIONS * 4 * MASKS);
  /** Places left to each slot, a copy for each depth. */
  private readonly left: Int32Array;
  /** 13C slots on each atom are one at most; slots of any kind are counted. */
  private readonly taken = new Int32Array(WORDS);
  private readonly uses = new Uint8Array(MAX_ATOMS);
  private readonly carbonLoad = new Uint8Array(MAX_ATOMS);
  private readonly protonLoad = new Uint8Array(MAX_ATOMS);
  private readonly unmetAt: Int32Array;
  /** Per depth: twins that were tried. */
  private readonly triedTwins: Int32Array;
  private atomCount = 0;
  private exceptions = 0;
  private nodes = 0;

  constructor(model: CorrelationModel) {
    const { sites, constraints } = model;
    this.siteCount = sites.length;
    this.hmbcSteps = model.hmbcBonds - 1;
    this.cosySteps = model.cosyBonds - 2;
    this.places = new Int32Array(sites.length * WORDS);
    this.isOpen = new Uint8Array(sites.length);
    this.isCarbon = Uint8Array.from(sites, (site) => (site.isCarbon ? 1 : 0));
    this.tiedProtons = Uint8Array.from(sites, (site) => (site.isCarbon ? site.tiedProtons : 1));
    this.firstSlot = new Int32Array(sites.length + 1);
    sites.forEach(({ slots }, k) => (this.firstSlot[k + 1] = this.firstSlot[k] + slots));
    this.slotCount = this.firstSlot[sites.length];
    this.siteOfSlot = Int32Array.from(sites.flatMap(({ slots }, k) => new Array<number>(slots).fill(k)));
    this.atomOfSlot = new Int8Array(this.slotCount).fill(NONE);
    this.left = new Int32Array((this.slotCount + 1) * this.slotCount * WORDS);
    this.triedTwins = new Int32Array((this.slotCount + 1) * WORDS);

    this.endStart = new Int32Array(constraints.length + 1);
    constraints.forEach(({ alternatives }, p) => (this.endStart[p + 1] = this.endStart[p] + alternatives.length));
    this.endA = Int32Array.from(constraints.flatMap(({ alternatives }) => alternatives.map(([a]) => a)));
    this.endB = Int32Array.from(constraints.flatMap(({ alternatives }) => alternatives.map(([, b]) => b)));
    this.isHmbc = Uint8Array.from(constraints, ({ kind }) => (kind === 'hmbc' ? 1 : 0));
    this.isSimple = Uint8Array.from(constraints, ({ alternatives }) => {
      const [a, b] = alternatives[0];
      return alternatives.length === 1 && a !== b && sites[a].slots === 1 && sites[b].slots === 1 ? 1 : 0;
    });
    this.isUnmet = new Uint8Array(constraints.length);
    this.unmetAt = new Int32Array(constraints.length).fill(NONE);
    const ofSite = sites.map((_, k) =>
      constraints.flatMap(({ alternatives }, p) => (alternatives.some(([a, b]) => a === k || b === k) ? [p] : [])),
    );
    this.constraintStart = new Int32Array(sites.length + 1);
    ofSite.forEach((list, k) => (this.constraintStart[k + 1] = this.constraintStart[k] + list.length));
    this.constraintsOf = Int32Array.from(ofSite.flat());
    this.order = Int32Array.from(sites.keys()).sort((a, b) => ofSite[b].length - ofSite[a].length || a - b);
  }

  /**
   * @param atomCount - atoms described, at most MAX_ATOMS.
   * @param exceptions - pairs that may go unmet.
   * @param nodeLimit - places tried before giving up.
   * @returns MET, FAILED or UNSETTLED.
   */
  match(atomCount: number, exceptions: number, nodeLimit: number): number {
    this.atomCount = atomCount;
    this.exceptions = exceptions;
    this.nodes = nodeLimit;
    this.findNear();
    const { left, places, siteOfSlot, slotCount } = this;
    for (let slot = 0; slot < slotCount; slot++) {
      left[slot * WORDS] = places[siteOfSlot[slot] * WORDS];
      left[slot * WORDS + 1] = places[siteOfSlot[slot] * WORDS + 1];
    }
    this.atomOfSlot.fill(NONE);
    this.unmetAt.fill(NONE);
    this.taken[0] = this.taken[1] = 0;
    this.uses.fill(0, 0, atomCount);
    this.carbonLoad.fill(0, 0, atomCount);
    this.protonLoad.fill(0, 0, atomCount);
    return this.search(0, 0);
  }

  // ---- distances ----

  private findNear(): void {
    const { reach, near, protonated, geminal, atomCount: n } = this;
    this.spread(this.hmbcSteps);
    const fromCarbon = FROM_CARBON * 4 * MASKS;
    for (let a = 0; a < n; a++) {
      const isProtonated = ((protonated[a >> 5] >> (a & 31)) & 1) === 1;
      for (let w = 0; w < WORDS; w++) {
        const mask = reach[a * WORDS + w];
        near[a * WORDS + w] = isProtonated ? mask : 0;
        near[fromCarbon + a * WORDS + w] = mask & protonated[w];
      }
    }
    this.spread(this.cosySteps);
    const cosy = COSY * 4 * MASKS;
    for (let a = 0; a < n; a++) {
      const isProtonated = ((protonated[a >> 5] >> (a & 31)) & 1) === 1;
      for (let w = 0; w < WORDS; w++) {
        const self = a >> 5 === w ? (1 << (a & 31)) & geminal[w] : 0;
        near[cosy + a * WORDS + w] = isProtonated ? (reach[a * WORDS + w] & protonated[w]) | self : 0;
      }
    }
    let hasOpen = false;
    for (let k = 0; k < this.siteCount; k++) hasOpen ||= this.isOpen[k] === 1;
    if (!hasOpen) return;
    for (let relation = 0; relation < RELATIONS; relation++) {
      const plain = relation * 4 * MASKS;
      this.closeFirst(plain, plain + 2 * MASKS);
      this.closeSecond(plain, plain + MASKS);
      this.closeSecond(plain + 2 * MASKS, plain + 3 * MASKS);
    }
  }

  /** `reach`: other atoms within so many bonds of each atom. */
  private spread(steps: number): void {
    const { reach, wider, adjacency, atomCount: n } = this;
    if (steps === 0) {
      reach.fill(0, 0, n * WORDS);
      return;
    }
    for (let k = 0; k < n * WORDS; k++) reach[k] = adjacency[k];
    for (let step = 1; step < steps; step++) {
      for (let a = 0; a < n; a++) {
        let low = reach[a * WORDS];
        let high = reach[a * WORDS + 1];
        for (let bits = adjacency[a * WORDS]; bits !== 0; bits &= bits - 1) {
          const b = 31 - Math.clz32(bits & -bits);
          low |= reach[b * WORDS];
          high |= reach[b * WORDS + 1];
        }
        for (let bits = adjacency[a * WORDS + 1]; bits !== 0; bits &= bits - 1) {
          const b = 63 - Math.clz32(bits & -bits);
          low |= reach[b * WORDS];
          high |= reach[b * WORDS + 1];
        }
        wider[a * WORDS] = low;
        wider[a * WORDS + 1] = high;
      }
      for (let k = 0; k < n * WORDS; k++) reach[k] = wider[k];
    }
    for (let a = 0; a < n; a++) reach[a * WORDS + (a >> 5)] &= ~(1 << (a & 31));
  }

  /** The first end stands for all atoms alike. */
  private closeFirst(from: number, to: number): void {
    const { near, alike, atomCount: n } = this;
    for (let a = 0; a < n; a++) {
      let low = 0;
      let high = 0;
      for (let b = 0; b < n; b++) {
        if (!hasBit(alike, a, b)) continue;
        low |= near[from + b * WORDS];
        high |= near[from + b * WORDS + 1];
      }
      near[to + a * WORDS] = low;
      near[to + a * WORDS + 1] = high;
    }
  }

  /** The second end stands for all atoms alike. */
  private closeSecond(from: number, to: number): void {
    const { near, alike, atomCount: n } = this;
    for (let a = 0; a < n; a++) {
      const low = near[from + a * WORDS];
      const high = near[from + a * WORDS + 1];
      near[to + a * WORDS] = near[to + a * WORDS + 1] = 0;
      for (let b = 0; b < n; b++) {
        if (((alike[b * WORDS] & low) | (alike[b * WORDS + 1] & high)) !== 0) near[to + a * WORDS + (b >> 5)] |= 1 << (b & 31);
      }
    }
  }

  /** Start in `near` of where the other end of a constraint may be, seen from an atom of one end. */
  private nearFrom(constraint: number, site: number, isFirst: boolean, other: number, atom: number): number {
    const relation = this.isHmbc[constraint] === 0 ? COSY : isFirst ? FROM_PROTON : FROM_CARBON;
    return ((relation * 4 + this.isOpen[site] * 2 + this.isOpen[other]) * MAX_ATOMS + atom) * WORDS;
  }

  // ---- search ----

  /** Lays the slots that are left; `unmet` constraints are lost already. */
  private search(depth: number, unmet: number): number {
    const { left, siteOfSlot, firstSlot, atomOfSlot, isCarbon, taken, slotCount, triedTwins, twinOf, uses } = this;
    const level = depth * slotCount * WORDS;
    let slot = NONE;
    let fewest = Infinity;
    let low = 0;
    let high = 0;
    for (let i = 0; i < this.siteCount; i++) {
      const k = this.order[i];
      let s = firstSlot[k];
      const end = firstSlot[k + 1];
      while (s < end && atomOfSlot[s] !== NONE) s++;
      if (s === end) continue;
      let x = left[level + s * WORDS];
      let y = left[level + s * WORDS + 1];
      if (isCarbon[k] === 1) {
        x &= ~taken[0];
        y &= ~taken[1];
      }
      if (s > firstSlot[k]) {
        // Slots of one site take rising atoms; those of a lone proton may fall together.
        const previous = atomOfSlot[s - 1];
        const first = isCarbon[k] === 1 ? previous + 1 : previous;
        x &= first > 31 ? 0 : -1 << first;
        y &= first < 32 ? -1 : -1 << (first - 32);
      }
      const size = countBits(x) + countBits(y);
      if (size >= fewest) continue;
      if (size === 0) return FAILED;
      fewest = size;
      slot = s;
      low = x;
      high = y;
    }
    if (slot === NONE) {
      for (let p = 0; p < this.isUnmet.length; p++) this.isUnmet[p] = this.unmetAt[p] === NONE ? 0 : 1;
      return MET;
    }
    const site = siteOfSlot[slot];
    triedTwins[depth * WORDS] = triedTwins[depth * WORDS + 1] = 0;
    while ((low | high) !== 0) {
      const isLow = low !== 0;
      const bits = isLow ? low : high;
      const atom = (isLow ? 31 : 63) - Math.clz32(bits & -bits);
      if (isLow) low &= low - 1;
      else high &= high - 1;
      if (uses[atom] === 0) {
        // What failed on an atom fails on its twin while nothing else lies on either.
        const twin = twinOf[atom];
        if (hasBit(triedTwins, depth, twin)) continue;
        setBit(triedTwins, depth, twin);
      }
      if (--this.nodes < 0) return UNSETTLED;
      const result = this.lay(slot, site, atom, depth, unmet);
      if (result !== FAILED) return result;
    }
    return FAILED;
  }

  /** Lays one slot on an atom, follows what comes of it, and takes it back unless all could be laid. */
  private lay(slot: number, site: number, atom: number, depth: number, unmet: number): number {
    const { atomOfSlot, isCarbon, taken, uses } = this;
    const loads = this.loadClass(slot, site, atom);
    if (loads < 0) return FAILED;
    atomOfSlot[slot] = atom;
    uses[atom]++;
    const word = atom >> 5;
    const bit = isCarbon[site] === 1 ? 1 << (atom & 31) : 0;
    taken[word] |= bit;
    const total = this.countUnmet(site, depth, unmet);
    let result: number = FAILED;
    if (total <= this.exceptions && this.carryForward(site, atom, depth, total)) result = this.search(depth + 1, total);
    if (result === MET) return MET;
    for (let k = this.constraintStart[site]; k < this.constraintStart[site + 1]; k++) {
      const p = this.constraintsOf[k];
      if (this.unmetAt[p] === depth) this.unmetAt[p] = NONE;
    }
    taken[word] &= ~bit;
    uses[atom]--;
    atomOfSlot[slot] = NONE;
    this.unloadClass(atom, loads);
    return result;
  }

  /** Books a signal on the class of an atom. Returns what was booked: 1 = a 13C signal, + 2 × the 1H signals; −1 = no room. */
  private loadClass(slot: number, site: number, atom: number): number {
    if (this.classes === null) return 0;
    const { classOf, carbonSignals, protonSignals } = this.classes;
    const c = classOf[atom];
    for (let s = this.firstSlot[site]; s < slot; s++) if (classOf[this.atomOfSlot[s]] === c) return 0;
    const carbons = this.isCarbon[site];
    const protons = this.tiedProtons[site];
    if (this.carbonLoad[c] + carbons > (carbons === 1 ? carbonSignals[c] : MAX_ATOMS)) return -1;
    if (protons > 0 && this.protonLoad[c] + protons > protonSignals[c]) return -1;
    this.carbonLoad[c] += carbons;
    this.protonLoad[c] += protons;
    return carbons + 2 * protons;
  }

  private unloadClass(atom: number, loads: number): void {
    if (this.classes === null || loads === 0) return;
    const c = this.classes.classOf[atom];
    this.carbonLoad[c] -= loads & 1;
    this.protonLoad[c] -= loads >> 1;
  }

  /** Marks the constraints of a site that can no longer be met; returns the new total. */
  private countUnmet(site: number, depth: number, unmet: number): number {
    const { constraintStart, constraintsOf, unmetAt, isSimple, exceptions } = this;
    let total = unmet;
    for (let k = constraintStart[site]; k < constraintStart[site + 1]; k++) {
      const p = constraintsOf[k];
      // Where every pair must be met, what was carried forward leaves only places that meet the simple ones.
      if ((exceptions === 0 && isSimple[p] === 1) || unmetAt[p] !== NONE || this.canBeMet(p, depth)) continue;
      unmetAt[p] = depth;
      if (++total > exceptions) return total;
    }
    return total;
  }

  /** Is some alternative met, or still possible with the places that are left? */
  private canBeMet(p: number, depth: number): boolean {
    const { endStart, endA, endB, firstSlot, atomOfSlot, near, left, taken, isCarbon } = this;
    const level = depth * this.slotCount * WORDS;
    for (let e = endStart[p]; e < endStart[p + 1]; e++) {
      const a = endA[e];
      const b = endB[e];
      for (let s = firstSlot[a]; s < firstSlot[a + 1]; s++) {
        const u = atomOfSlot[s];
        for (let t = firstSlot[b]; t < firstSlot[b + 1]; t++) {
          const v = atomOfSlot[t];
          if (u === NONE && v === NONE) return true;
          if (u !== NONE && v !== NONE) {
            const at = this.nearFrom(p, a, true, b, u);
            if (((near[at + (v >> 5)] >> (v & 31)) & 1) === 1) return true;
            continue;
          }
          const at = u !== NONE ? this.nearFrom(p, a, true, b, u) : this.nearFrom(p, b, false, a, v);
          const free = u !== NONE ? t : s;
          const mask = isCarbon[u !== NONE ? b : a] === 1 ? -1 : 0;
          const place = level + free * WORDS;
          const low = near[at] & left[place] & ~(taken[0] & mask);
          const high = near[at + 1] & left[place + 1] & ~(taken[1] & mask);
          if ((low | high) !== 0) return true;
        }
      }
    }
    return false;
  }

  /** Copies the places to the next depth and narrows those that a pair which must be met leaves; false when one is empty. */
  private carryForward(site: number, atom: number, depth: number, unmet: number): boolean {
    const { left, slotCount, near, atomOfSlot, firstSlot, constraintStart, constraintsOf, isSimple, endStart, endA, endB } = this;
    const level = depth * slotCount * WORDS;
    const next = level + slotCount * WORDS;
    for (let k = 0; k < slotCount * WORDS; k++) left[next + k] = left[level + k];
    if (unmet < this.exceptions) return true;
    for (let k = constraintStart[site]; k < constraintStart[site + 1]; k++) {
      const p = constraintsOf[k];
      if (isSimple[p] === 0 || this.unmetAt[p] !== NONE) continue;
      const isFirst = endA[endStart[p]] === site;
      const other = isFirst ? endB[endStart[p]] : endA[endStart[p]];
      const free = firstSlot[other];
      if (atomOfSlot[free] !== NONE) continue;
      const at = this.nearFrom(p, site, isFirst, other, atom);
      const place = next + free * WORDS;
      left[place] &= near[at];
      left[place + 1] &= near[at + 1];
      if ((left[place] | left[place + 1]) === 0) return false;
    }
    return true;
  }
}
