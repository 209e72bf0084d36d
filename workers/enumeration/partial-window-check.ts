import { MAX_ATOMS } from '../graph/analysis.js';
import { hybridisationsAt } from './bond-patterns.js';
import { ANY_HYDROGENS, type CarbonDemand, type CarbonWindows, isOfType } from './carbon-census.js';
import type { SearchLayout } from './distributions.js';
import { FILL_STRIDE } from './fill.js';
import type { PartialCheck } from './partial-checks.js';
import type { SearchProblem } from './problem.js';
import { SlotMatching } from './slot-matching.js';
import { mostSignalsOfTwins } from './twin-methyls.js';

const CARBON = 6;
const ANY_ORDER = 255;

const range = (count: number): number[] => Array.from({ length: count }, (_, k) => k);

/**
 * Tests whether the carbons, as far as they are bonded, can still be assigned to the 13C signals: each signal needs carbons
 * of its own whose bonded heteroatoms lie, or may come to lie, in its window; equivalent methyl groups do not count
 * apart; and where the list is complete each carbon with hydrogens needs a signal. Hybridisation is settled before by the
 * distribution.
 *
 * @returns null where the distribution has settled everything.
 */
export function createPartialWindowCheck(problem: SearchProblem, layout: SearchLayout): PartialCheck | null {
  const assignment = new PartialAssignment(problem.census.windows, layout);
  if (assignment.isSettled) return null;
  return {
    reason: 'signals:assignment',
    text: 'Its carbons, as far as they are bonded, cannot be assigned to the ¹³C signals: the heteroatoms on them and the number of different carbons taken together.',
    test: (filled, known) => assignment.exists(filled, known),
  };
}

/** State of the test for one layout; nothing is allocated while it runs. */
class PartialAssignment {
  /** Nothing is left to test. */
  readonly isSettled: boolean;
  private readonly open: number;
  private readonly tied: number;
  private readonly isComplete: boolean;
  /** Graph vertices of the carbons that a restriction reaches. */
  private readonly carbons: Int32Array;
  private readonly isHetero = new Uint8Array(MAX_ATOMS);
  private readonly isProtonated: Uint8Array;
  private readonly heteroatoms: Int32Array;
  private readonly freeValence: Uint8Array;
  /** Number of bonds of each open vertex when it is complete, 0 = not prescribed. */
  private readonly fullDegree = new Uint8Array(MAX_ATOMS);
  /** Bonds inside the unit, and those of them to heteroatoms. */
  private readonly innerDegree = new Uint8Array(MAX_ATOMS);
  private readonly innerHetero = new Uint8Array(MAX_ATOMS);
  /** Of each incomplete vertex: free valence that is left, and bonds so far. */
  private readonly left = new Uint8Array(MAX_ATOMS);
  private readonly degree = new Uint8Array(MAX_ATOMS);
  /** Carbons that fit some demand. */
  private readonly isShown: Uint8Array;
  private readonly leastHetero: Uint8Array;
  private readonly mostHetero: Uint8Array;
  /** Demands as columns, and whether a carbon's type fits one: `typed[demand * carbons + carbon]`. */
  private readonly demandLeast: Uint8Array;
  private readonly demandMost: Uint8Array;
  private readonly typed: Uint8Array;
  private readonly signals: SlotMatching;
  /** Signals as often as the carbons they stand for; null where each stands for one. */
  private readonly carbonsUnder: SlotMatching | null;
  /** Positions of the methyl groups among the carbons. */
  private readonly methyls: readonly number[];
  /** Most signals that the methyl groups on an atom show together. */
  private readonly mostOfTwins: Uint8Array;
  private readonly methylsOn = new Uint8Array(MAX_ATOMS);
  /** Neighbour of each closed methyl group. */
  private readonly innerPivot = new Uint8Array(MAX_ATOMS);
  /** Heteroatoms among the open vertices from each on. */
  private readonly heteroFrom = new Uint8Array(MAX_ATOMS + 1);
  /** Slots whose demand restricts heteroatoms, each with its demand: of `signals` and of `carbonsUnder`. */
  private readonly watchedSignals: Uint8Array;
  private readonly watchedUnder: Uint8Array;
  /** Carbons of a complete list that only demands with such restrictions can show. */
  private readonly unsure: readonly number[];
  /** Whether the matchings hold an assignment that was right for some row. */
  private hasAssignment = false;
  private readonly dropped: Uint8Array;
  private droppedCount = 0;
  private openCarbons = -1;

  constructor({ demands: all, isComplete }: CarbonWindows, layout: SearchLayout) {
    const { base, open, tied, bondQuota, freeValence } = layout;
    const n = base.atomCount;
    this.open = open;
    this.tied = tied;
    this.freeValence = freeValence;
    this.isComplete = isComplete;
    for (let v = 0; v < n; v++) if (base.atomicNumbers[v] !== CARBON) this.isHetero[v] = 1;
    this.heteroatoms = Int32Array.from(range(open).filter((v) => this.isHetero[v] === 1));
    for (let v = open - 1; v >= 0; v--) this.heteroFrom[v] = this.heteroFrom[v + 1] + this.isHetero[v];
    for (let v = 0; v < n; v++) {
      for (let w = 0; w < n; w++) {
        if (base.bondOrders[v * n + w] === 0) continue;
        this.innerDegree[v]++;
        this.innerHetero[v] += this.isHetero[w];
        this.innerPivot[v] = w;
      }
      if (v < open && bondQuota[4 * v] !== ANY_ORDER)
        this.fullDegree[v] = this.innerDegree[v] + bondQuota[4 * v + 1] + bondQuota[4 * v + 2] + bondQuota[4 * v + 3];
    }
    const isTyped = (demand: CarbonDemand, v: number): boolean => isOfType(demand, base.hydrogens[v], hybridisationsAt(layout, v));
    /** Does the demand refuse some numbers of heteroatoms that the carbon may get? */
    const restricts = ({ leastHetero, mostHetero }: CarbonDemand, v: number): boolean => {
      const bonds = v >= open ? 0 : this.fullDegree[v] > 0 ? this.fullDegree[v] - this.innerDegree[v] : freeValence[v];
      return leastHetero > this.innerHetero[v] || mostHetero < this.innerHetero[v] + Math.min(bonds, this.heteroatoms.length);
    };
    const carbonAtoms = range(n).filter((v) => base.atomicNumbers[v] === CARBON);
    this.mostOfTwins = mostSignalsOfTwins(layout);
    const methylAtoms = carbonAtoms.filter((v) => base.hydrogens[v] === 3);
    const methylSignals = all.reduce(
      (sum, { hydrogens, signals }) => sum + (hydrogens === 3 || hydrogens === ANY_HYDROGENS ? signals : 0),
      0,
    );
    // Two methyl groups show one signal only where nothing can tell them apart, three two at most.
    const tellsTwins = methylSignals >= 2 && methylAtoms.length >= (this.mostOfTwins.includes(1) ? 2 : 3);

    // What no restriction reaches, not even by way of carbons that several demands may take, is settled by the distribution.
    const demands = all.filter((demand) =>
      carbonAtoms.some((v) => isTyped(demand, v) && (restricts(demand, v) || (tellsTwins && base.hydrogens[v] === 3))),
    );
    const reached = (): number[] => carbonAtoms.filter((v) => demands.some((demand) => isTyped(demand, v)));
    for (let before = -1; before !== demands.length;) {
      before = demands.length;
      const within = reached();
      demands.push(...all.filter((demand) => !demands.includes(demand) && within.some((v) => isTyped(demand, v))));
    }
    this.carbons = Int32Array.from(reached());
    const count = this.carbons.length;
    this.isSettled = demands.length === 0;
    this.isProtonated = Uint8Array.from(this.carbons, (v) => (base.hydrogens[v] > 0 ? 1 : 0));
    this.isShown = new Uint8Array(count);
    this.leastHetero = new Uint8Array(count);
    this.mostHetero = new Uint8Array(count);
    this.demandLeast = Uint8Array.from(demands, ({ leastHetero }) => leastHetero);
    this.demandMost = Uint8Array.from(demands, ({ mostHetero }) => mostHetero);
    this.typed = Uint8Array.from(demands.flatMap((demand) => Array.from(this.carbons, (v) => (isTyped(demand, v) ? 1 : 0))));
    const perSignal = demands.map(({ signals }) => signals);
    const perCarbon = demands.map(({ signals, carbons }) => signals * carbons);
    this.signals = new SlotMatching(perSignal, count);
    this.carbonsUnder = demands.some(({ carbons }) => carbons > 1) ? new SlotMatching(perCarbon, count) : null;
    this.methyls = tellsTwins ? range(count).filter((c) => base.hydrogens[this.carbons[c]] === 3) : [];
    this.dropped = new Uint8Array(this.methyls.length);
    const isRestricting = demands.map((demand) => Array.from(this.carbons).some((v) => isTyped(demand, v) && restricts(demand, v)));
    const watched = (slots: readonly number[]): Uint8Array => {
      const kindOfSlot = slots.flatMap((number, kind) => new Array<number>(number).fill(kind));
      return Uint8Array.from(kindOfSlot.flatMap((kind, slot) => (isRestricting[kind] ? [slot, kind] : [])));
    };
    this.watchedSignals = watched(perSignal);
    this.watchedUnder = watched(perCarbon);
    this.unsure = range(count).filter((c) => {
      const v = this.carbons[c];
      return isComplete && this.isProtonated[c] === 1 && !demands.some((demand) => isTyped(demand, v) && !restricts(demand, v));
    });
    this.carbons.forEach((v, c) => this.setHetero(c, this.innerHetero[v], this.innerHetero[v]));
  }

  /**
   * Mostly the assignment found for an earlier row still holds, and seeing that takes a look at few carbons. It may miss
   * what the full test would see, but not once all rows are complete.
   */
  exists(filled: Uint8Array, known: number): boolean {
    this.openCarbons = -1;
    this.findTwins(filled, known);
    if (this.stillHolds(filled, known)) return true;
    this.countHetero(filled, known);
    const { carbons, isShown, isProtonated, carbonsUnder, signals, dropped } = this;
    this.hasAssignment = false;
    if (this.isComplete) for (let c = 0; c < carbons.length; c++) if (isShown[c] === 0 && isProtonated[c] === 1) return false;
    if (carbonsUnder !== null && !carbonsUnder.isPossible()) return false;
    for (let k = 0; k < this.droppedCount; k++)
      for (let demand = 0; demand < this.demandLeast.length; demand++) signals.allow(demand, dropped[k], false);
    this.hasAssignment = signals.isPossible();
    for (let k = 0; k < this.droppedCount; k++) this.setHetero(dropped[k], this.leastHetero[dropped[k]], this.mostHetero[dropped[k]]);
    return this.hasAssignment;
  }

  private stillHolds(filled: Uint8Array, known: number): boolean {
    if (!this.hasAssignment) return false;
    const { signals, carbonsUnder, watchedSignals, watchedUnder, dropped, unsure, typed, carbons, demandLeast } = this;
    for (let k = 0; k < this.droppedCount; k++) if (!signals.isVacant(dropped[k])) return false;
    for (let k = 0; k < watchedSignals.length; k += 2)
      if (!this.mayFit(signals.placeOf(watchedSignals[k]), watchedSignals[k + 1], filled, known)) return false;
    if (carbonsUnder !== null) {
      for (let k = 0; k < watchedUnder.length; k += 2)
        if (!this.mayFit(carbonsUnder.placeOf(watchedUnder[k]), watchedUnder[k + 1], filled, known)) return false;
    }
    for (let k = 0; k < unsure.length; k++) {
      const c = unsure[k];
      let isShown = false;
      for (let demand = 0; demand < demandLeast.length && !isShown; demand++) {
        if (typed[demand * carbons.length + c] === 0) continue;
        isShown = this.mayFit(c, demand, filled, known);
      }
      if (!isShown) return false;
    }
    return true;
  }

  /** May the carbon, which is of the type, get as many heteroatoms as the demand allows? */
  private mayFit(c: number, demand: number, filled: Uint8Array, known: number): boolean {
    const v = this.carbons[c];
    const { open, heteroatoms } = this;
    let hetero = this.innerHetero[v];
    if (v < open) for (let k = 0; k < heteroatoms.length; k++) if (filled[v * FILL_STRIDE + heteroatoms[k]] !== 0) hetero++;
    const least = this.demandLeast[demand];
    const most = this.demandMost[demand];
    if (hetero > most) return false;
    if (v < known || v >= open) return hetero >= least;
    // Enough bonds are left for neither limit to be passed.
    const fullDegree = this.fullDegree[v];
    if (hetero >= least && fullDegree > 0 && hetero + fullDegree - this.innerDegree[v] <= most) return true;
    const scanned = known > this.tied ? known : this.tied;
    let left = this.freeValence[v];
    let bonds = this.innerDegree[v];
    for (let w = 0; w < scanned; w++) {
      const order = filled[v * FILL_STRIDE + w];
      if (order === 0) continue;
      left -= order;
      bonds++;
    }
    if (left === 0) return hetero >= least;
    const bondsLeft = fullDegree > 0 ? fullDegree - bonds : left;
    if (hetero + Math.min(bondsLeft, this.heteroFrom[known]) < least) return false;
    const bondsDue = fullDegree > 0 ? bondsLeft : Math.trunc((left + 2) / 3);
    return hetero + bondsDue <= most || hetero + bondsDue - (this.openCarbonsFrom(filled, known) - 1) <= most;
  }

  /** Incomplete carbons; counted once in a test. */
  private openCarbonsFrom(filled: Uint8Array, known: number): number {
    if (this.openCarbons >= 0) return this.openCarbons;
    const { open, tied, freeValence, isHetero } = this;
    const scanned = known > tied ? known : tied;
    this.openCarbons = 0;
    for (let v = known; v < open; v++) {
      if (isHetero[v] === 1) continue;
      let left = freeValence[v];
      for (let w = 0; w < scanned; w++) left -= filled[v * FILL_STRIDE + w];
      if (left > 0) this.openCarbons++;
    }
    return this.openCarbons;
  }

  /** Heteroatoms that each carbon has at least and can have at most when all is bonded, and which demands it fits then. */
  private countHetero(filled: Uint8Array, known: number): void {
    const { open, tied, freeValence, fullDegree, innerHetero, innerDegree, isHetero, heteroatoms, carbons, left, degree } = this;
    // Bonds between two incomplete atoms lie in the block of tied vertices.
    const scanned = known > tied ? known : tied;
    let openHetero = 0;
    let openCarbons = 0;
    for (let v = known; v < open; v++) {
      let valence = freeValence[v];
      let bonds = innerDegree[v];
      for (let w = 0; w < scanned; w++) {
        const order = filled[v * FILL_STRIDE + w];
        if (order === 0) continue;
        valence -= order;
        bonds++;
      }
      left[v] = valence;
      degree[v] = bonds;
      if (valence === 0) continue;
      if (isHetero[v] === 1) openHetero++;
      else openCarbons++;
    }
    for (let c = 0; c < carbons.length; c++) {
      const v = carbons[c];
      if (v >= open) continue;
      let least = innerHetero[v];
      for (let k = 0; k < heteroatoms.length; k++) if (filled[v * FILL_STRIDE + heteroatoms[k]] !== 0) least++;
      let most = least;
      if (v >= known && left[v] > 0) {
        // Where the orders are not prescribed a bond takes one to three valences.
        const isPrescribed = fullDegree[v] > 0;
        const bondsLeft = isPrescribed ? fullDegree[v] - degree[v] : left[v];
        const bondsDue = isPrescribed ? bondsLeft : Math.trunc((left[v] + 2) / 3);
        most += bondsLeft < openHetero ? bondsLeft : openHetero;
        if (bondsDue > openCarbons - 1) least += bondsDue - (openCarbons - 1);
      }
      if (least !== this.leastHetero[c] || most !== this.mostHetero[c]) this.setHetero(c, least, most);
    }
  }

  private setHetero(c: number, least: number, most: number): void {
    const { typed, carbons, demandLeast, demandMost, signals, carbonsUnder } = this;
    this.leastHetero[c] = least;
    this.mostHetero[c] = most;
    let isShown = 0;
    for (let demand = 0; demand < demandLeast.length; demand++) {
      const fits = typed[demand * carbons.length + c] === 1 && most >= demandLeast[demand] && least <= demandMost[demand];
      if (fits) isShown = 1;
      signals.allow(demand, c, fits);
      carbonsUnder?.allow(demand, c, fits);
    }
    this.isShown[c] = isShown;
  }

  /** Finds the methyl groups on one atom that are more than the signals they can show. */
  private findTwins(filled: Uint8Array, known: number): void {
    const { open, tied, carbons, methyls, mostOfTwins, methylsOn, dropped, innerPivot } = this;
    this.droppedCount = 0;
    if (methyls.length === 0) return;
    const scanned = known > tied ? known : tied;
    methylsOn.fill(0);
    for (let k = 0; k < methyls.length; k++) {
      const v = carbons[methyls[k]];
      let pivot = innerPivot[v];
      if (v < open) {
        const end = v < scanned ? open : scanned;
        pivot = 0;
        while (pivot < end && filled[v * FILL_STRIDE + pivot] === 0) pivot++;
        if (pivot === end) continue;
      }
      if (++methylsOn[pivot] > mostOfTwins[pivot]) dropped[this.droppedCount++] = methyls[k];
    }
  }
}
