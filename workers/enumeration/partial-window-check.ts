import { MAX_ATOMS } from '../graph/analysis.js';
import { countHeteroatoms, hybridisationsAt } from './bond-patterns.js';
import { ANY_HYDROGENS, type CarbonWindows, isOfType } from './carbon-census.js';
import type { SearchLayout } from './distributions.js';
import type { PartialCheck } from './partial-checks.js';
import type { SearchProblem } from './problem.js';
import { SlotMatching } from './slot-matching.js';
import { mostSignalsOfTwins } from './twin-methyls.js';

const CARBON = 6;
const ANY_ORDER = 255;

/**
 * Tests whether the carbons, as far as they are bonded, can still be assigned to the 13C signals: each signal needs carbons
 * of its own whose bonded heteroatoms lie, or may come to lie, in its window; equivalent methyl groups do not count
 * apart; and where the list is complete each carbon with hydrogens needs a signal. Hybridisation is settled before by the
 * distribution.
 *
 * @returns null where the distribution has settled everything.
 */
export function createPartialWindowCheck(problem: SearchProblem, layout: SearchLayout): PartialCheck | null {
  const { windows } = problem.census;
  const { demands } = windows;
  const { atomicNumbers, hydrogens } = layout.base;
  const methylCount = hydrogens.filter((h, atom) => h === 3 && atomicNumbers[atom] === CARBON).length;
  const methylSignals = demands.reduce((sum, demand) => sum + (demand.hydrogens === 3 ? demand.signals : 0), 0);
  const tellsTwins = methylCount >= 2 && (methylSignals >= 2 || demands.some((demand) => demand.hydrogens === ANY_HYDROGENS));
  const heteroatoms = countHeteroatoms(problem);
  const tellsHetero = demands.some(({ leastHetero, mostHetero }) => leastHetero > 0 || mostHetero < Math.min(4, heteroatoms));
  if (!tellsTwins && !tellsHetero) return null;
  const assignment = new PartialAssignment(windows, layout, tellsTwins);
  return {
    reason: 'signals:assignment',
    text: 'Its carbons, as far as they are bonded, cannot be assigned to the ¹³C signals: the heteroatoms on them and the number of different carbons taken together.',
    test: (_filled, known, molecule) => assignment.exists(known, molecule),
  };
}

/** State of the test for one layout; nothing is allocated while it runs. */
class PartialAssignment {
  private readonly open: number;
  private readonly n: number;
  private readonly isComplete: boolean;
  /** Graph vertex of each carbon. */
  private readonly carbons: Int32Array;
  private readonly isHetero = new Uint8Array(MAX_ATOMS);
  private readonly isProtonated: Uint8Array;
  /** Of each open vertex when it is complete: sum of its bond orders, and its number of bonds, 0 = not prescribed. */
  private readonly fullValence = new Uint8Array(MAX_ATOMS);
  private readonly fullDegree = new Uint8Array(MAX_ATOMS);
  private readonly left = new Uint8Array(MAX_ATOMS);
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
  private readonly methylsOn = new Uint8Array(MAX_ATOMS + 1);

  constructor({ demands, isComplete }: CarbonWindows, layout: SearchLayout, tellsTwins: boolean) {
    const { base, open, bondQuota, freeValence } = layout;
    const n = base.atomCount;
    this.open = open;
    this.n = n;
    this.isComplete = isComplete;
    this.carbons = Int32Array.from(Array.from({ length: n }, (_, v) => v).filter((v) => base.atomicNumbers[v] === CARBON));
    for (let v = 0; v < n; v++) {
      if (base.atomicNumbers[v] !== CARBON) this.isHetero[v] = 1;
      if (v >= open) continue;
      const inside = base.bondOrders.subarray(v * n, v * n + n);
      this.fullValence[v] = freeValence[v] + inside.reduce((sum, order) => sum + order, 0);
      if (bondQuota[4 * v] === ANY_ORDER) continue;
      this.fullDegree[v] = inside.filter((order) => order > 0).length + bondQuota[4 * v + 1] + bondQuota[4 * v + 2] + bondQuota[4 * v + 3];
    }
    const count = this.carbons.length;
    this.isProtonated = Uint8Array.from(this.carbons, (v) => (base.hydrogens[v] > 0 ? 1 : 0));
    this.leastHetero = new Uint8Array(count);
    this.mostHetero = new Uint8Array(count);
    this.demandLeast = Uint8Array.from(demands, ({ leastHetero }) => leastHetero);
    this.demandMost = Uint8Array.from(demands, ({ mostHetero }) => mostHetero);
    this.typed = Uint8Array.from(
      demands.flatMap((demand) =>
        Array.from(this.carbons, (v) => (isOfType(demand, base.hydrogens[v], hybridisationsAt(layout, v)) ? 1 : 0)),
      ),
    );
    this.signals = new SlotMatching(
      demands.map(({ signals }) => signals),
      count,
    );
    this.carbonsUnder = demands.some(({ carbons }) => carbons > 1)
      ? new SlotMatching(
          demands.map(({ signals, carbons }) => signals * carbons),
          count,
        )
      : null;
    this.methyls = tellsTwins ? Array.from({ length: count }, (_, c) => c).filter((c) => base.hydrogens[this.carbons[c]] === 3) : [];
    this.mostOfTwins = mostSignalsOfTwins(layout);
  }

  exists(known: number, molecule: Uint8Array): boolean {
    this.countHetero(known, molecule);
    const { typed, carbons, leastHetero, mostHetero, demandLeast, demandMost, isProtonated, signals, carbonsUnder } = this;
    const count = carbons.length;
    for (let c = 0; c < count; c++) {
      const least = leastHetero[c];
      const most = mostHetero[c];
      let isShown = false;
      for (let demand = 0; demand < demandLeast.length; demand++) {
        const fits = typed[demand * count + c] === 1 && most >= demandLeast[demand] && least <= demandMost[demand];
        isShown ||= fits;
        signals.allow(demand, c, fits);
        carbonsUnder?.allow(demand, c, fits);
      }
      if (!isShown && this.isComplete && isProtonated[c] === 1) return false;
    }
    if (carbonsUnder !== null && !carbonsUnder.isPossible()) return false;
    this.dropTwins(molecule);
    return signals.isPossible();
  }

  /** Heteroatoms that each carbon has at least and can have at most when all is bonded. */
  private countHetero(known: number, molecule: Uint8Array): void {
    const { open, n, isHetero, fullValence, fullDegree, carbons, leastHetero, mostHetero, left } = this;
    let openHetero = 0;
    let openCarbons = 0;
    for (let v = known; v < open; v++) {
      let valence = fullValence[v];
      for (let w = 0; w < n; w++) valence -= molecule[v * n + w];
      left[v] = valence;
      if (valence === 0) continue;
      if (isHetero[v] === 1) openHetero++;
      else openCarbons++;
    }
    for (let c = 0; c < carbons.length; c++) {
      const v = carbons[c];
      const isOpen = v >= known && v < open && left[v] > 0;
      let hetero = 0;
      let degree = 0;
      let heteroLeft = openHetero;
      let carbonsLeft = isOpen ? openCarbons - 1 : openCarbons;
      for (let w = 0; w < n; w++) {
        if (molecule[v * n + w] === 0) continue;
        degree++;
        hetero += isHetero[w];
        if (w < known || w >= open || left[w] === 0) continue;
        if (isHetero[w] === 1) heteroLeft--;
        else carbonsLeft--;
      }
      leastHetero[c] = mostHetero[c] = hetero;
      if (!isOpen) continue;
      // Where the orders are not prescribed a bond takes one to three valences.
      const isPrescribed = fullDegree[v] > 0;
      const bondsLeft = isPrescribed ? fullDegree[v] - degree : left[v];
      const bondsDue = isPrescribed ? bondsLeft : Math.ceil(left[v] / 3);
      if (bondsDue > carbonsLeft) leastHetero[c] += bondsDue - carbonsLeft;
      mostHetero[c] += bondsLeft < heteroLeft ? bondsLeft : heteroLeft;
    }
  }

  /** Takes out the methyl groups on one atom that are more than the signals they can show. */
  private dropTwins(molecule: Uint8Array): void {
    const { n, carbons, methyls, mostOfTwins, methylsOn, signals, demandLeast } = this;
    if (methyls.length === 0) return;
    methylsOn.fill(0, 0, n);
    for (let k = 0; k < methyls.length; k++) {
      const line = carbons[methyls[k]] * n;
      let pivot = 0;
      while (pivot < n && molecule[line + pivot] === 0) pivot++;
      if (pivot === n || ++methylsOn[pivot] <= mostOfTwins[pivot]) continue;
      for (let demand = 0; demand < demandLeast.length; demand++) signals.allow(demand, methyls[k], false);
    }
  }
}
