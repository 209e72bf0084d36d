import {
  ALL_HYBRIDISATIONS,
  ANY_HYDROGENS,
  type CarbonDemand,
  type CarbonGroup,
  type CarbonWindows,
  hybridisationOf,
  meetsDemands,
} from './carbon-census.js';
import type { AtomClass, Distribution } from './distributions.js';
import type { FillLayout } from './layout.js';
import type { SearchProblem } from './problem.js';
import type { UnitKind } from './units.js';

const CARBON = 6;
const ANY_ORDER = 255;

/** Refined distributions of one distribution, and of a problem, at most: they are held in memory. */
const MOST_OF_ONE = 2000;
const MOST_IN_ALL = 20_000;

/** How many bonds of each order an atom has to other heavy atoms. */
export interface BondPattern {
  readonly singles: number;
  readonly doubles: number;
  readonly triples: number;
}

/** Patterns of a neutral carbon by its hydrogens: single bonds only, one double bond, a triple bond, two double bonds. */
const PATTERNS: readonly (readonly BondPattern[])[] = [0, 1, 2, 3, 4].map((hydrogens) =>
  [
    { singles: 4 - hydrogens, doubles: 0, triples: 0 },
    { singles: 2 - hydrogens, doubles: 1, triples: 0 },
    { singles: 1 - hydrogens, doubles: 0, triples: 1 },
    { singles: -hydrogens, doubles: 2, triples: 0 },
  ].filter(({ singles }) => singles >= 0),
);

function bondCount({ singles, doubles, triples }: BondPattern): number {
  return singles + doubles + triples;
}

const piBondsOf = ({ doubles, triples }: BondPattern): number => doubles + 2 * triples;

/** Bits of the hybridisations that a carbon with these hydrogens can have. */
export function hybridisationsOf(hydrogens: number, pattern: BondPattern | null): number {
  if (pattern !== null) return 1 << hybridisationOf(piBondsOf(pattern));
  return PATTERNS[hydrogens].reduce((bits, each) => bits | (1 << hybridisationOf(piBondsOf(each))), 0);
}

/** Bits of the hybridisations that a carbon of a layout can have, the same in any molecule that the layout becomes. */
export function hybridisationsAt({ base, open, bondQuota, freeValence }: FillLayout, carbon: number): number {
  if (carbon < open && bondQuota[4 * carbon] === ANY_ORDER) return hybridisationsOf(base.hydrogens[carbon], null);
  let piBonds = carbon < open ? freeValence[carbon] : 0;
  for (let order = 1; carbon < open && order <= 3; order++) piBonds -= bondQuota[4 * carbon + order];
  for (let other = 0; other < base.atomCount; other++) {
    const order = base.bondOrders[carbon * base.atomCount + other];
    if (order > 1) piBonds += order - 1;
  }
  return 1 << hybridisationOf(piBonds);
}

/**
 * Tells free carbons apart by their bond patterns where windows of 13C signals speak of hybridisation, and drops what
 * no assignment of the signals allows. A carbon has one pattern, the same in every Kekulé form, so each constitution
 * belongs to exactly one of the refined distributions.
 *
 * Where there would be very many, carbons of some kinds are left together; the test of the finished structure sees to them.
 *
 * @returns what distributions of this problem become, to be asked for in a fixed order; the distribution itself where no window restricts anything.
 */
export function createRefinement(problem: SearchProblem): (distribution: Distribution) => readonly Distribution[] {
  const { census, units, demands: atomDemands } = problem;
  const { windows } = census;
  if (!windows.demands.some(isRestricting)) return (distribution) => [distribution];
  const heteroatoms = countHeteroatoms(problem);
  const unitGroups = unitCarbons(units, heteroatoms);
  const refines = [0, 1, 2, 3, 4].map(
    (h) =>
      PATTERNS[h].length > 1 &&
      windows.demands.some(
        ({ hydrogens, hybridisations }) => (hydrogens === ANY_HYDROGENS || hydrogens === h) && hybridisations !== ALL_HYBRIDISATIONS,
      ),
  );
  const isTyped = windows.demands.every(({ hydrogens }) => hydrogens !== ANY_HYDROGENS);
  const groupOf = ({ hydrogens, bonds, count }: AtomClass): CarbonGroup => ({
    hydrogens,
    hybridisations: hybridisationsOf(hydrogens, bonds),
    leastHetero: 0,
    mostHetero: Math.min(bonds === null ? 4 - hydrogens : bondCount(bonds), heteroatoms),
    count,
  });
  /** Ways to share `count` carbons with h hydrogens out among their patterns that the signals of their own type allow. */
  const splitsOf = new Map<string, readonly (readonly AtomClass[])[]>();
  const splitsFor = (atomClass: AtomClass): readonly (readonly AtomClass[])[] => {
    const { hydrogens: h, count } = atomClass;
    const key = `${h}/${count}`;
    let splits = splitsOf.get(key);
    if (splits !== undefined) return splits;
    const ownWindows: CarbonWindows = { ...windows, demands: windows.demands.filter(({ hydrogens }) => hydrogens === Math.min(h, 3)) };
    const ownUnits = unitGroups.filter(({ hydrogens }) => hydrogens === h);
    splits = (refines[h] ? listSplits(PATTERNS[h], count) : [[count]])
      .map((counts) =>
        counts.flatMap((number, p) => (number === 0 ? [] : [{ ...atomClass, bonds: refines[h] ? PATTERNS[h][p] : null, count: number }])),
      )
      .filter(
        (classes) =>
          (!isTyped || meetsDemands(ownWindows, [...ownUnits, ...classes.map(groupOf)])) &&
          atomDemands.every(
            ({ atomicNumber, hydrogens, orders, count: wanted }) =>
              atomicNumber !== CARBON ||
              hydrogens !== h ||
              classes.some(({ bonds, count: has }) => has >= wanted && isPattern(bonds, orders)),
          ),
      );
    splitsOf.set(key, splits);
    return splits;
  };
  let total = 0;
  return (distribution) => {
    // Signals of a type that no free carbon has must be met by units.
    if (!isTyped || windows.demands.some(({ hydrogens }) => !distribution.some((each) => isCarbon(each) && each.hydrogens === hydrogens))) {
      if (!meetsDemands(windows, [...unitGroups, ...distribution.filter(isCarbon).map(groupOf)])) return [];
    }
    const splits = distribution.map((atomClass) => (isCarbon(atomClass) ? splitsFor(atomClass) : [[atomClass]]));
    if (splits.some((list) => list.length === 0)) return [];
    // Classes with few splits first: what would go beyond the limit stays as it is.
    let product = 1;
    const isSplit = new Array<boolean>(splits.length).fill(false);
    for (const k of splits.map((_, index) => index).sort((x, y) => splits[x].length - splits[y].length || x - y)) {
      product *= splits[k].length;
      isSplit[k] = product <= Math.min(MOST_OF_ONE, MOST_IN_ALL - total);
    }
    let refined: AtomClass[][] = [[]];
    distribution.forEach((atomClass, k) => {
      const ways = isSplit[k] ? splits[k] : [[atomClass]];
      refined = refined.flatMap((head) => ways.map((split) => [...head, ...split]));
    });
    refined = refined.filter(
      (classes) => canBond(classes, units) && (isTyped || meetsDemands(windows, [...unitGroups, ...classes.filter(isCarbon).map(groupOf)])),
    );
    total += refined.length;
    return refined;
  };
}

const isCarbon = ({ atomicNumber }: AtomClass): boolean => atomicNumber === CARBON;

/** Does the demand ask for more than a carbon with these hydrogens? */
function isRestricting({ hybridisations, leastHetero, mostHetero }: CarbonDemand): boolean {
  return hybridisations !== ALL_HYBRIDISATIONS || leastHetero > 0 || mostHetero < 4;
}

function isPattern(bonds: BondPattern | null, orders: readonly number[]): boolean {
  if (bonds === null) return true;
  const count = (order: number): number => orders.filter((each) => each === order).length;
  return bonds.singles === count(1) && bonds.doubles === count(2) && bonds.triples === count(3);
}

/** Atoms other than C and H of the whole molecule. */
function countHeteroatoms({ free, units }: SearchProblem): number {
  return (
    free.reduce((sum, { atomicNumber, count }) => sum + (atomicNumber === CARBON ? 0 : count), 0) +
    units.reduce((sum, { graph, count }) => sum + count * graph.atomicNumbers.filter((z) => z !== CARBON).length, 0)
  );
}

/** Carbons of the units: their bonds are settled, of their neighbours only those inside. */
function unitCarbons(units: readonly UnitKind[], heteroatoms: number): CarbonGroup[] {
  return units.flatMap((unit) =>
    Array.from({ length: unit.graph.atomCount }, (_, atom) => atom)
      .filter((atom) => unit.graph.atomicNumbers[atom] === CARBON)
      .map((atom) => {
        const inside = innerNeighbours(unit, atom);
        const outside = unit.bondQuota.subarray(4 * atom, 4 * atom + 4).reduce((sum, count) => sum + count, 0);
        return {
          hydrogens: unit.graph.hydrogens[atom],
          hybridisations: 1 << hybridisationOf(inside.piBonds + unit.freeValence[atom] - outside),
          leastHetero: inside.hetero,
          mostHetero: Math.min(inside.hetero + outside, heteroatoms),
          count: unit.count,
        };
      }),
  );
}

/** π bonds and heteroatoms of an atom inside its unit. */
function innerNeighbours(unit: UnitKind, atom: number): { piBonds: number; hetero: number } {
  const n = unit.graph.atomCount;
  let piBonds = 0;
  let hetero = 0;
  for (let other = 0; other < n; other++) {
    const order = unit.forms[0][atom * n + other];
    if (order === 0) continue;
    piBonds += order - 1;
    if (unit.graph.atomicNumbers[other] !== CARBON) hetero++;
  }
  return { piBonds, hetero };
}

/** All ways to share a number out among patterns, as counts by pattern, more of the first ones first. */
function listSplits(patterns: readonly BondPattern[], count: number): number[][] {
  if (patterns.length === 1) return [[count]];
  return Array.from({ length: count + 1 }, (_, k) => count - k).flatMap((first) =>
    listSplits(patterns.slice(1), count - first).map((rest) => [first, ...rest]),
  );
}

/**
 * Can the multiple bonds find partners and the rest still hang together? A double or triple bond joins two atoms that ask
 * for one, or one such atom and an atom that is free to take it; each takes a bond's worth of valence that then joins nothing new.
 */
function canBond(classes: readonly AtomClass[], units: readonly UnitKind[]): boolean {
  let valence = 0;
  let parts = 0;
  let doubles = 0;
  let triples = 0;
  let takesDouble = false;
  let takesTriple = false;
  for (const { valence: full, hydrogens, bonds, count } of classes) {
    const free = full - hydrogens;
    valence += free * count;
    parts += count;
    if (bonds !== null) {
      doubles += bonds.doubles * count;
      triples += bonds.triples * count;
    } else {
      takesDouble ||= free >= 2;
      takesTriple ||= free >= 3;
    }
  }
  for (const { bondQuota, freeValence, count } of units) {
    parts += count;
    freeValence.forEach((free, atom) => {
      valence += free * count;
      doubles += bondQuota[4 * atom + 2] * count;
      triples += bondQuota[4 * atom + 3] * count;
    });
  }
  if ((doubles % 2 === 1 && !takesDouble) || (triples % 2 === 1 && !takesTriple)) return false;
  return valence / 2 - Math.ceil(doubles / 2) - 2 * Math.ceil(triples / 2) >= parts - 1;
}
