/*
 * Orderly generation of connectivity matrices: the inner loop, compiled to WebAssembly (`npm run wasm`).
 * What is generated, and why it is complete and free of duplicates, is told in ../fill.ts, which drives this.
 *
 * Rows are kept twice: as bytes, for filling, and as one bit mask for each bond order, for comparing. A cell (columns
 * that are interchangeable so far) is a mask too, so that comparing a row with another within a cell is three
 * population counts, and refining a partition is three intersections; no order inside a cell is ever kept.
 */

/** A complete matrix stands at {@link matrix}, the molecule at {@link molecule}. True ends the search. */
@external('host', 'onLeaf')
declare function onLeaf(mayHaveOtherForms: bool): bool;
/** Rows [0, row) are filled and the stop row is reached. */
@external('host', 'onPrefix')
declare function onPrefix(row: i32): void;
/** Rows [0, known) are complete; false cuts. */
@external('host', 'onRow')
declare function onRow(known: i32): bool;
@external('host', 'shouldStop')
declare function shouldStop(): bool;

const N: i32 = 40;
const ROWS_BETWEEN_CHECKS: i32 = 2048;
const ANY_ORDER: i32 = 255;

// ---- set by the host before a search ----
const MATRIX: usize = memory.data(1600);
const LEFT: usize = memory.data(64);
const QUOTA: usize = memory.data(160);
const CLASS: usize = memory.data(64);
const UNIT: usize = memory.data(64);
/** Bit o of entry i × N + j: vertices i and j may share a bond of order o. */
const ALLOWED: usize = memory.data(1600);
/** Neighbours of each vertex, closed ones and bonds inside units included. */
const ADJACENT: usize = memory.data(320, 8);
/** The whole molecule, row-major with its number of atoms as the stride; the host writes the bonds inside units. */
const MOLECULE: usize = memory.data(1600);
/** Masks of the neighbours inside units by single, double and triple bond: 3 × 8 bytes each. */
const INSIDE: usize = memory.data(960, 8);
/** Neighbours over bonds that resonate inside a unit. */
const RESONANT: usize = memory.data(320, 8);
/** Pairs of tied vertices in different units: two bytes each. */
const TIED_PAIRS: usize = memory.data(3200);
/** Entries of a prefix in filling order, without its number of rows. */
const PREFIX: usize = memory.data(3200);

// ---- state of the search ----
const PRESCRIBED: usize = memory.data(64);
/** Masks of the columns bonded by order 1, 2, 3 to a vertex: 3 × 8 bytes each. */
const BONDED: usize = memory.data(960, 8);
/** Per row: bit j set when columns j − 1 and j lie in one cell, earlier rows considered. */
const SAME: usize = memory.data(336, 8);
const CELL_END: usize = memory.data(64);
const PARENT: usize = memory.data(64);
const SIZE: usize = memory.data(64);
const COMPONENT_LEFT: usize = memory.data(128, 2);
/** For each bond: 1 + the root that it attached, 0 when both ends hung together already. */
const ATTACHED: usize = memory.data(1600);
/** Weight of a row in each of its own cells, its vertex taken out of the first. */
const OWN_WEIGHT: usize = memory.data(6560, 4);
/** Ordered partition of the remaining vertices under the permutation being tried, per depth. */
const IMAGE: usize = memory.data(13448, 8);
const IMAGE_COUNT: usize = memory.data(64);
/** Branches cut by each limit on rings, in the order of limitRings; u32. */
const CUTS: usize = memory.data(16, 4);
const CHOSEN: usize = memory.data(64);
/** Per row and position k: vertices that, put at k, are not known to give something smaller whatever follows. */
const ALIVE: usize = memory.data(13448, 8);
const ORBIT: usize = memory.data(64);
const ORBIT_MASK: usize = memory.data(320, 8);
/** Vertices that are twins of one another, per vertex; valid once orbits are known. */
const TWIN_SET: usize = memory.data(320, 8);

let n: i32 = 0;
let tied: i32 = 0;
/** Atoms of the molecule, closed ones included. */
let atomCount: i32 = 0;
let pairCount: i32 = 0;
let hasPrescribed: bool = false;
let hasForbidden: bool = false;
let asksRows: bool = false;
let asksForms: bool = false;
/** Limits on rings, 0 = none: see limitRings. */
let smallestRing: i32 = 0;
let largestRing: i32 = 0;
let smallestAlkyneRing: i32 = 0;
let smallestAlleneRing: i32 = 0;
let tracksRings: bool = false;
let looksAtRings: bool = false;
let carbons: u64 = 0;
/** Atoms with a triple bond, with at least one double bond, with two. */
let tripled: u64 = 0;
let doubled: u64 = 0;
let doubledTwice: u64 = 0;
/** Atoms that can take part in an aromatic ring without a double bond. */
let donors: u64 = 0;
let stopRow: i32 = 0;
let stopped: bool = false;
let untilCheck: i32 = ROWS_BETWEEN_CHECKS;
let componentCount: i32 = 0;
let totalLeft: i32 = 0;
/** Vertices that change places with their predecessor without changing the matrix. */
let twins: u64 = 0;
let isOpen: bool = false;
let orbitsKnown: bool = false;
/** Permutations of the tied vertices (bytes, tied each), those that keep the tied block (u16 numbers) and their dead rows. */
let permutations: usize = 0;
let permutationCount: i32 = 0;
let stabiliser: usize = 0;
let stabiliserCount: i32 = 0;
let tiedDead: usize = 0;

// ---- interface ----

export function matrix(): usize { return MATRIX; }
export function freeValence(): usize { return LEFT; }
export function bondQuota(): usize { return QUOTA; }
export function classes(): usize { return CLASS; }
export function units(): usize { return UNIT; }
export function allowedOrders(): usize { return ALLOWED; }
export function adjacency(): usize { return ADJACENT; }
export function molecule(): usize { return MOLECULE; }
export function insideBonds(): usize { return INSIDE; }
export function resonantBonds(): usize { return RESONANT; }
export function tiedPairs(): usize { return TIED_PAIRS; }
export function prefix(): usize { return PREFIX; }

/** Makes room for permutations of the tied vertices. @returns where to write them, `tied` bytes each. */
export function reserve(count: i32, tiedCount: i32): usize {
  permutations = (__heap_base + 15) & ~15;
  permutationCount = count;
  stabiliser = (permutations + count * tiedCount + 15) & ~15;
  tiedDead = (stabiliser + count * 2 + 15) & ~15;
  const end = tiedDead + count;
  const pages = <i32>((end + 0xffff) >> 16);
  if (pages > memory.size()) memory.grow(pages - memory.size());
  return permutations;
}

/** Describes the molecule as a whole. @param forms true: leaves tell whether they may have other Kekulé forms. */
export function describe(atoms: i32, forms: bool, donorMask: u64): void {
  atomCount = atoms;
  asksForms = forms;
  donors = donorMask;
}

export function cuts(): usize { return CUTS; }

/**
 * Limits on rings, in atoms; 0 = none. @param smallest no smaller ring. @param largest no bond whose smallest ring is
 * larger. @param alkyne no triple bond in a smaller ring. @param allene no C=C=C in a smaller ring.
 */
export function limitRings(smallest: i32, largest: i32, alkyne: i32, allene: i32, carbonMask: u64): void {
  smallestRing = smallest;
  largestRing = largest;
  smallestAlkyneRing = alkyne;
  smallestAlleneRing = allene;
  carbons = carbonMask;
  looksAtRings = largest > 0 || alkyne > 0 || allene > 0;
  tracksRings = looksAtRings || smallest > 3;
  memory.fill(CUTS, 0, 16);
}

/**
 * Searches. @param prefixRows −1: from the root; else the rows that {@link prefix} holds.
 * @returns false when the host ended it.
 */
export function run(open: i32, tiedCount: i32, pairs: i32, forbids: bool, rows: bool, stopAt: i32, prefixRows: i32): bool {
  n = open;
  tied = tiedCount;
  pairCount = pairs;
  hasForbidden = forbids;
  asksRows = rows;
  stopRow = stopAt;
  stopped = false;
  reset();
  if (prefixRows < 0) fillTied(0);
  else restore(prefixRows);
  return !stopped;
}

function reset(): void {
  memory.fill(MATRIX, 0, 1600);
  memory.fill(BONDED, 0, 960);
  memory.fill(SIZE, 0, 64);
  memory.fill(COMPONENT_LEFT, 0, 128);
  hasPrescribed = false;
  twins = 0;
  componentCount = 0;
  totalLeft = 0;
  for (let v = 0; v < n; v++) {
    const isPrescribed = load<u8>(QUOTA + 4 * v) != ANY_ORDER;
    store<u8>(PRESCRIBED + v, isPrescribed ? 1 : 0);
    if (isPrescribed) hasPrescribed = true;
    // The first vertex of each unit is the root of its component.
    let root = 0;
    while (load<u8>(UNIT + root) != load<u8>(UNIT + v)) root++;
    store<u8>(PARENT + v, <u8>root);
    store<u8>(SIZE + root, load<u8>(SIZE + root) + 1);
    const left = <i32>load<u8>(LEFT + v);
    store<u16>(COMPONENT_LEFT + 2 * root, <u16>(<i32>load<u16>(COMPONENT_LEFT + 2 * root) + left));
    totalLeft += left;
    if (root == v) componentCount++;
  }
  tripled = 0;
  doubled = 0;
  doubledTwice = 0;
  for (let v = 0; v < atomCount; v++) {
    if (load<u64>(INSIDE + 24 * v, 16) != 0) tripled |= bit(v);
    const twofold = load<u64>(INSIDE + 24 * v, 8);
    if (twofold != 0) doubled |= bit(v);
    if ((twofold & (twofold - 1)) != 0) doubledTwice |= bit(v);
  }
  let same: u64 = 0;
  for (let j = tied + 1; j < n; j++) if (load<u8>(CLASS + j - 1) == load<u8>(CLASS + j)) same |= bit(j);
  store<u64>(SAME, same);
  for (let k = 0; k < n; k++) store<u64>(ALIVE + 8 * k, ~0);
  stabiliserCount = permutationCount;
  for (let w = 0; w < permutationCount; w++) store<u16>(stabiliser + 2 * w, <u16>w);
}

// ---- bonds ----

@inline
function bond(i: i32, j: i32): i32 {
  return <i32>load<u8>(MATRIX + i * N + j);
}
@inline
function leftOf(v: i32): i32 {
  return <i32>load<u8>(LEFT + v);
}
@inline
function bit(v: i32): u64 {
  return (<u64>1) << <u64>v;
}
/** Bits [from, to). */
@inline
function bits(from: i32, to: i32): u64 {
  return (((<u64>1) << <u64>to) - 1) & ~(((<u64>1) << <u64>from) - 1);
}

function orderFits(i: i32, j: i32, order: i32): bool {
  if (hasForbidden && ((<i32>load<u8>(ALLOWED + i * N + j) >> order) & 1) == 0) return false;
  return (
    (load<u8>(PRESCRIBED + i) == 0 || load<u8>(QUOTA + 4 * i + order) > 0) &&
    (load<u8>(PRESCRIBED + j) == 0 || load<u8>(QUOTA + 4 * j + order) > 0)
  );
}

function rootOf(v: i32): i32 {
  let parent = <i32>load<u8>(PARENT + v);
  while (parent != v) {
    v = parent;
    parent = <i32>load<u8>(PARENT + v);
  }
  return v;
}

/**
 * Number of bonds on the shortest way from one vertex to another over other vertices, at most `most`; 0 when there is none.
 * @param avoided vertices not to pass. @param open vertices that may still be bonded to one another in any way.
 */
function wayRound(from: i32, to: i32, avoided: u64, open: u64, most: i32): i32 {
  const target = bit(to);
  let reached = bit(from) | avoided;
  let frontier = load<u64>(ADJACENT + 8 * from) & ~target & ~avoided;
  if ((open & bit(from)) != 0) {
    // Two more bonds to a common neighbour that is still open, too, are the least beside the direct one.
    frontier |= open & ~target & ~avoided;
  }
  for (let depth = 2; depth <= most && frontier != 0; depth++) {
    reached |= frontier;
    let next: u64 = (frontier & open) != 0 ? open : 0;
    let rest = frontier;
    while (rest != 0) {
      next |= load<u64>(ADJACENT + 8 * <usize>ctz(rest));
      rest &= rest - 1;
    }
    if ((next & target) != 0) return depth;
    frontier = next & ~reached;
  }
  return 0;
}

@inline
function countCut(kind: i32): void {
  store<u32>(CUTS + 4 * kind, load<u32>(CUTS + 4 * kind) + 1);
}

/** Tests the limits on rings that a bond alone does not settle; rows [0, known) are complete. */
function ringsFit(known: i32): bool {
  if (smallestAlkyneRing > 0) {
    let rest = tripled;
    while (rest != 0) {
      const v = <i32>ctz(rest);
      rest &= rest - 1;
      const ends = tripleTo(v) & ~(bit(v) - 1);
      if (ends == 0) continue;
      if (wayRound(v, <i32>ctz(ends), 0, 0, smallestAlkyneRing - 2) == 0) continue;
      countCut(2);
      return false;
    }
  }
  if (smallestAlleneRing > 0) {
    let rest = carbons & doubledTwice;
    while (rest != 0) {
      const v = <i32>ctz(rest);
      rest &= rest - 1;
      const ends = doubleTo(v) & carbons;
      if (popcnt(ends) != 2) continue;
      // The middle carbon has no third bond: a ring through it holds both double bonds. The ends may be bonded directly.
      const a = <i32>ctz(ends);
      const b = <i32>ctz(ends & (ends - 1));
      if ((load<u64>(ADJACENT + 8 * a) & bit(b)) == 0 && wayRound(a, b, bit(v), 0, smallestAlleneRing - 3) == 0) continue;
      countCut(3);
      return false;
    }
  }
  if (largestRing > 0) {
    let open: u64 = 0;
    for (let v = known; v < n; v++) if (leftOf(v) > 0) open |= bit(v);
    for (let v = 0; v < known; v++) {
      let ends = load<u64>(ADJACENT + 8 * v) & ~(bit(v) - 1);
      while (ends != 0) {
        const u = <i32>ctz(ends);
        ends &= ends - 1;
        if (wayRound(v, u, 0, open, largestRing - 1) != 0 || wayRound(v, u, 0, 0, N) == 0) continue;
        countCut(1);
        return false;
      }
    }
  }
  return true;
}

/** Takes the bond; false when no completion of it can hang together, or a ring gets too small. */
function addBond(i: i32, j: i32, order: i32): bool {
  store<u8>(MATRIX + i * N + j, <u8>order);
  store<u8>(MATRIX + j * N + i, <u8>order);
  store<u8>(MOLECULE + i * atomCount + j, <u8>order);
  store<u8>(MOLECULE + j * atomCount + i, <u8>order);
  const mi = BONDED + 24 * i + 8 * (order - 1);
  const mj = BONDED + 24 * j + 8 * (order - 1);
  store<u64>(mi, load<u64>(mi) | bit(j));
  store<u64>(mj, load<u64>(mj) | bit(i));
  store<u8>(LEFT + i, <u8>(leftOf(i) - order));
  store<u8>(LEFT + j, <u8>(leftOf(j) - order));
  if (hasPrescribed) {
    if (load<u8>(PRESCRIBED + i) == 1) store<u8>(QUOTA + 4 * i + order, load<u8>(QUOTA + 4 * i + order) - 1);
    if (load<u8>(PRESCRIBED + j) == 1) store<u8>(QUOTA + 4 * j + order, load<u8>(QUOTA + 4 * j + order) - 1);
  }
  totalLeft -= 2 * order;
  if (order > 1) {
    const ends = bit(i) | bit(j);
    if (order == 3) tripled |= ends;
    else {
      doubledTwice |= doubled & ends;
      doubled |= ends;
    }
  }
  let root = rootOf(i);
  let other = rootOf(j);
  let fits = true;
  if (root == other) {
    store<u8>(ATTACHED + i * N + j, 0);
    store<u16>(COMPONENT_LEFT + 2 * root, <u16>(<i32>load<u16>(COMPONENT_LEFT + 2 * root) - 2 * order));
    if (smallestRing > 3 && wayRound(i, j, 0, 0, smallestRing - 2) != 0) {
      countCut(0);
      fits = false;
    }
  } else {
    if (load<u8>(SIZE + root) < load<u8>(SIZE + other)) {
      const swap = root;
      root = other;
      other = swap;
    }
    store<u8>(PARENT + other, <u8>root);
    store<u8>(SIZE + root, load<u8>(SIZE + root) + load<u8>(SIZE + other));
    store<u16>(
      COMPONENT_LEFT + 2 * root,
      <u16>(<i32>load<u16>(COMPONENT_LEFT + 2 * root) + <i32>load<u16>(COMPONENT_LEFT + 2 * other) - 2 * order),
    );
    componentCount--;
    store<u8>(ATTACHED + i * N + j, <u8>(other + 1));
  }
  if (tracksRings) {
    store<u64>(ADJACENT + 8 * i, load<u64>(ADJACENT + 8 * i) | bit(j));
    store<u64>(ADJACENT + 8 * j, load<u64>(ADJACENT + 8 * j) | bit(i));
  }
  return fits && (componentCount == 1 || (load<u16>(COMPONENT_LEFT + 2 * root) != 0 && totalLeft >= 2 * (componentCount - 1)));
}

/** Takes back the bond that was added last. */
function removeBond(i: i32, j: i32, order: i32): void {
  store<u8>(MATRIX + i * N + j, 0);
  store<u8>(MATRIX + j * N + i, 0);
  store<u8>(MOLECULE + i * atomCount + j, 0);
  store<u8>(MOLECULE + j * atomCount + i, 0);
  const mi = BONDED + 24 * i + 8 * (order - 1);
  const mj = BONDED + 24 * j + 8 * (order - 1);
  store<u64>(mi, load<u64>(mi) & ~bit(j));
  store<u64>(mj, load<u64>(mj) & ~bit(i));
  store<u8>(LEFT + i, <u8>(leftOf(i) + order));
  store<u8>(LEFT + j, <u8>(leftOf(j) + order));
  if (hasPrescribed) {
    if (load<u8>(PRESCRIBED + i) == 1) store<u8>(QUOTA + 4 * i + order, load<u8>(QUOTA + 4 * i + order) + 1);
    if (load<u8>(PRESCRIBED + j) == 1) store<u8>(QUOTA + 4 * j + order, load<u8>(QUOTA + 4 * j + order) + 1);
  }
  totalLeft += 2 * order;
  if (order > 1) {
    const ends = bit(i) | bit(j);
    if (order == 3) tripled &= ~ends;
    else {
      doubled &= ~(ends & ~doubledTwice);
      doubledTwice &= ~ends;
    }
  }
  if (tracksRings) {
    store<u64>(ADJACENT + 8 * i, load<u64>(ADJACENT + 8 * i) & ~bit(j));
    store<u64>(ADJACENT + 8 * j, load<u64>(ADJACENT + 8 * j) & ~bit(i));
  }
  const attached = <i32>load<u8>(ATTACHED + i * N + j);
  if (attached == 0) {
    const root = rootOf(i);
    store<u16>(COMPONENT_LEFT + 2 * root, <u16>(<i32>load<u16>(COMPONENT_LEFT + 2 * root) + 2 * order));
    return;
  }
  const other = attached - 1;
  const root = <i32>load<u8>(PARENT + other);
  store<u8>(PARENT + other, <u8>other);
  store<u8>(SIZE + root, load<u8>(SIZE + root) - load<u8>(SIZE + other));
  store<u16>(
    COMPONENT_LEFT + 2 * root,
    <u16>(<i32>load<u16>(COMPONENT_LEFT + 2 * root) - <i32>load<u16>(COMPONENT_LEFT + 2 * other) + 2 * order),
  );
  componentCount++;
}

// ---- tied block: all pairs of tied vertices of different units, then the permutations that keep it ----

function fillTied(pair: i32): void {
  if (stopped) return;
  if (pair == pairCount) {
    finishTied();
    return;
  }
  const i = <i32>load<u8>(TIED_PAIRS + 2 * pair);
  const j = <i32>load<u8>(TIED_PAIRS + 2 * pair + 1);
  let most = leftOf(i) < leftOf(j) ? leftOf(i) : leftOf(j);
  if (most > 3) most = 3;
  for (let x = most; x > 0; x--) {
    if (!orderFits(i, j, x)) continue;
    if (addBond(i, j, x)) fillTied(pair + 1);
    removeBond(i, j, x);
  }
  fillTied(pair + 1);
}

/** Keeps the tied block when it is the largest one, with the permutations that leave it unchanged. */
function finishTied(): void {
  let count = 0;
  for (let w = 0; w < permutationCount; w++) {
    const difference = comparePermuted(w);
    if (difference > 0) return;
    if (difference == 0) store<u16>(stabiliser + 2 * count++, <u16>w);
  }
  stabiliserCount = count;
  memory.fill(tiedDead, 255, count);
  startRow(0);
}

/** Compares the tied block under a permutation with itself. */
function comparePermuted(w: i32): i32 {
  const image = permutations + w * tied;
  for (let k = 0; k < pairCount; k++) {
    const i = <i32>load<u8>(TIED_PAIRS + 2 * k);
    const j = <i32>load<u8>(TIED_PAIRS + 2 * k + 1);
    const difference = bond(<i32>load<u8>(image + i), <i32>load<u8>(image + j)) - bond(i, j);
    if (difference != 0) return difference;
  }
  return 0;
}

// ---- rows ----

/** End of the cell that begins with vertex i, rows before i considered; a tied vertex is alone. */
@inline
function findCellEnd(i: i32): i32 {
  return i >= tied ? cellEndFrom(load<u64>(SAME + 8 * i), i) : i + 1;
}
/** End of the cell that begins at column `start`, by its row of {@link SAME}. */
@inline
function cellEndFrom(same: u64, start: i32): i32 {
  return start + 1 + <i32>ctz(~(same >> <u64>(start + 1)));
}
@inline
function firstColumn(i: i32): i32 {
  return i < tied ? tied : i + 1;
}

function startRow(i: i32): void {
  if (stopped) return;
  if (--untilCheck == 0) {
    untilCheck = ROWS_BETWEEN_CHECKS;
    if (shouldStop()) {
      stopped = true;
      return;
    }
  }
  if (totalLeft == 0) {
    finishMatrix(i - 1);
    return;
  }
  if (i >= n - 1) return;
  if (i == stopRow && stopRow > 0) {
    onPrefix(i);
    return;
  }
  const first = firstColumn(i);
  store<u8>(CELL_END + i, <u8>findCellEnd(i));
  // Columns to the right can take this much; a row that needs more has no completion.
  let room = totalLeft - leftOf(i);
  for (let v = i + 1; v < tied; v++) room -= leftOf(v);
  // While the row equals its predecessor's and both were interchangeable, it must not grow beyond it.
  const tight = i > tied && (load<u64>(SAME + 8 * (i - 1)) & bit(i)) != 0;
  fillEntry(i, first, room, tight);
}

/** @param room free valence of the columns from j on. */
function fillEntry(i: i32, j: i32, room: i32, tight: bool): void {
  const first = firstColumn(i);
  const own = MATRIX + i * N;
  const same = load<u64>(SAME + 8 * i);
  const need = leftOf(i);
  // Each turn leaves column j empty after every larger entry was tried, so the call depth grows with bonds only.
  for (;;) {
    if (need == 0) {
      while (tight && j < n) {
        if (load<u8>(own - N + j) != 0) tight = false;
        j++;
      }
      finishRow(i, tight);
      return;
    }
    if (j == n) return;
    const left = leftOf(j);
    let most = need < left ? need : left;
    if (most > 3) most = 3;
    if (j > first && (same & bit(j)) != 0) {
      const before = <i32>load<u8>(own + j - 1);
      if (before < most) most = before;
    }
    const bound = tight ? <i32>load<u8>(own - N + j) : 3;
    if (bound < most) most = bound;
    room -= left;
    const least = need - room;
    for (let x = most; x > 0 && x >= least; x--) {
      if ((hasPrescribed || hasForbidden) && !orderFits(i, j, x)) continue;
      if (addBond(i, j, x)) fillEntry(i, j + 1, room, tight && x == bound);
      removeBond(i, j, x);
      if (stopped) return;
    }
    if (least > 0) return;
    if (bound != 0) tight = false;
    j++;
  }
}

/** Weight of a row in a cell: how many bonds of each order, the highest one deciding. */
@inline
function weightOf(row: usize, cell: u64): u32 {
  return <u32>(
    (popcnt(load<u64>(row, 16) & cell) << 12) | (popcnt(load<u64>(row, 8) & cell) << 6) | popcnt(load<u64>(row) & cell)
  );
}

/** Splits the cells by row i: columns stay together where their entries are equal. Writes what tests compare with. */
function splitCells(i: i32): void {
  const first = firstColumn(i);
  const row = BONDED + 24 * i;
  const same = load<u64>(SAME + 8 * i);
  const m1 = load<u64>(row);
  const m2 = load<u64>(row, 8);
  const m3 = load<u64>(row, 16);
  const change = m1 ^ (m1 << 1) | (m2 ^ (m2 << 1)) | (m3 ^ (m3 << 1));
  store<u64>(SAME + 8 * (i + 1), first + 1 < n ? same & ~change & bits(first + 1, n) : 0);
  let weights = OWN_WEIGHT + 160 * i;
  for (let start = first; start < n;) {
    const end = cellEndFrom(same, start);
    store<u32>(weights, weightOf(row, bits(start, end)));
    weights += 4;
    start = end;
  }
}

function finishRow(i: i32, tight: bool): void {
  if (looksAtRings && !ringsFit(i + 1)) return;
  splitCells(i);
  twins = tight ? twins | bit(i) : twins & ~bit(i);
  if (totalLeft == 0) {
    finishMatrix(i);
    return;
  }
  if (asksRows && !onRow(i + 1)) return;
  if ((i >= tied || stabiliserCount > 1) && !isLargest(i, i + 1, i + 1)) return;
  startRow(i + 1);
}

/** No bond is left to place: the rows after `row` are empty, so the whole matrix is known and one test decides. */
function finishMatrix(row: i32): void {
  if (componentCount > 1) return;
  const filled = row + 1 < tied ? tied : row + 1;
  for (let i = row + 1; i < filled; i++) splitCells(i);
  const saved = twins;
  if (row + 1 < n) {
    twins &= bits(0, row + 1);
    if (row >= tied) {
      // Vertex row + 1 against `row`: both are empty to the right of it.
      const later = row + 2 < n ? bits(row + 2, n) : 0;
      const own = (load<u64>(BONDED + 24 * row) | load<u64>(BONDED + 24 * row, 8) | load<u64>(BONDED + 24 * row, 16)) & later;
      if ((load<u64>(SAME + 8 * row) & bit(row + 1)) != 0 && own == 0) twins |= bit(row + 1);
    }
    const from = row + 2 > tied + 1 ? row + 2 : tied + 1;
    if (from < n) twins |= load<u64>(SAME + 8 * filled) & bits(from, n);
  }
  if (asksRows && !onRow(n)) {
    twins = saved;
    return;
  }
  if (isLargest(row, filled, n) && onLeaf(asksForms && mayHaveOtherForms())) stopped = true;
  twins = saved;
}

// ---- canonicity ----

/**
 * Compares the row of vertex v with row i, the cells of depth i being the masks at `cells` with v taken out of the
 * first, and writes the refined cells to depth i + 1.
 * @returns 1 larger, −1 smaller, 0 equal
 */
function matchRow(i: i32, v: i32, head: u64, cells: usize, count: i32): i32 {
  const row = BONDED + 24 * v;
  const m1 = load<u64>(row);
  const m2 = load<u64>(row, 8);
  const m3 = load<u64>(row, 16);
  const any = m1 | m2 | m3;
  let weights = OWN_WEIGHT + 160 * i;
  const base = IMAGE + 328 * (i + 1);
  let out = base;
  let cell = head;
  let c = 0;
  if (cell == 0) {
    c = 1;
    if (count > 1) cell = load<u64>(cells, 8);
  }
  while (c < count) {
    const own = load<u32>(weights);
    weights += 4;
    if ((any & cell) == 0) {
      if (own != 0) return -1;
      store<u64>(out, cell);
      out += 8;
    } else {
      const c1 = m1 & cell;
      const c2 = m2 & cell;
      const c3 = m3 & cell;
      const weight = <u32>((popcnt(c3) << 12) | (popcnt(c2) << 6) | popcnt(c1));
      if (weight != own) return weight > own ? 1 : -1;
      if (c3 != 0) {
        store<u64>(out, c3);
        out += 8;
      }
      if (c2 != 0) {
        store<u64>(out, c2);
        out += 8;
      }
      if (c1 != 0) {
        store<u64>(out, c1);
        out += 8;
      }
      const rest = cell & ~any;
      if (rest != 0) {
        store<u64>(out, rest);
        out += 8;
      }
    }
    c++;
    if (c < count) cell = load<u64>(cells + 8 * c);
  }
  store<u8>(IMAGE_COUNT + i + 1, <u8>((out - base) >> 3));
  return 0;
}

/**
 * Is the matrix with rows [0, filled) known the largest of its orbit, as far as the known rows tell?
 *
 * @param row - the row filled last; what earlier tests settled for good is not looked at again.
 * @param filled - rows to compare: the filled ones, or all that hold a bond to the right.
 * @param known - vertices [0, known) have all their entries known: the filled ones, or all.
 */
function isLargest(row: i32, filled: i32, known: i32): bool {
  orbitsKnown = false;
  const before = ALIVE + 328 * (row < 0 ? 0 : row);
  const after = ALIVE + 328 * (row + 1);
  const isFinal = known == n;
  const isNew = row < 0 ? ~(<u64>0) : ~(bit(row) - 1);
  const testable = bits(0, known) & ~twins;
  // Identity on the tied vertices: from the deepest row upwards, so that automorphisms found below save work above.
  for (let k = filled - 1; k >= tied; k--) {
    const end = <i32>load<u8>(CELL_END + k);
    if (end <= k + 1) continue;
    // k < row: what the test before left open, and what is new; k = row has had no test yet.
    const open = k < row ? load<u64>(before + 8 * k) | isNew : ~(<u64>0);
    const cell = bits(k + 1, end);
    let candidates = open & cell & testable;
    let alive = open & cell;
    if (candidates != 0) {
      const here = IMAGE + 328 * k;
      const count = partitionFrom(k, here);
      do {
        const v = <i32>ctz(candidates);
        candidates &= candidates - 1;
        const difference = matchRow(k, v, load<u64>(here) & ~bit(v), here, count);
        if (difference > 0) return false;
        if (difference < 0) {
          alive &= ~bit(v);
          continue;
        }
        if (!orbitsKnown) startOrbits(known);
        const root = <i32>load<u8>(ORBIT + v);
        if ((load<u64>(ORBIT_MASK + 8 * root) & bits(k, v)) != 0) continue;
        isOpen = false;
        const result = search(k + 1, filled, known);
        if (result == 1) return false;
        if (result == 2) {
          store<u8>(CHOSEN + k, <u8>v);
          joinAutomorphism(k, filled, known);
        } else if (!isOpen) {
          alive &= ~bit(v);
        }
      } while (candidates != 0);
    }
    if (!isFinal) store<u64>(after + 8 * k, alive);
  }
  for (let w = 1; w < stabiliserCount; w++) {
    const dead = <i32>load<u8>(tiedDead + w);
    if (dead < row) continue;
    store<u8>(tiedDead + w, 255);
    const permutation = permutations + <i32>load<u16>(stabiliser + 2 * w) * tied;
    let count = partitionFrom(0, IMAGE);
    let difference = 0;
    isOpen = false;
    for (let i = 0; i < tied && i < filled && difference == 0; i++) {
      const v = <i32>load<u8>(permutation + i);
      // A tied row is known only when it is among the filled ones.
      if (v >= known) {
        isOpen = true;
        break;
      }
      const cells = IMAGE + 328 * i;
      difference = matchRow(i, v, load<u64>(cells), cells, count);
      count = <i32>load<u8>(IMAGE_COUNT + i + 1);
    }
    if (difference > 0) return false;
    if (difference == 0 && !isOpen) {
      if (filled <= tied) continue;
      if (!orbitsKnown) startOrbits(known);
      const result = search(tied, filled, known);
      if (result == 1) return false;
      if (result == 2) continue;
    }
    if (!isOpen) store<u8>(tiedDead + w, <u8>row);
  }
  return true;
}

/** Writes the ordered cells of the positions from k on (the free ones for a tied k), vertex k included. */
function partitionFrom(k: i32, to: usize): i32 {
  const same = load<u64>(SAME + 8 * k);
  let count = 0;
  for (let start = k < tied ? tied : k; start < n;) {
    const end = cellEndFrom(same, start);
    store<u64>(to + 8 * count++, bits(start, end));
    start = end;
  }
  return count;
}

/** @returns 1 when some completion is larger, 2 when one is equal up to `top`, 0 when all are smaller. */
function search(i: i32, top: i32, known: i32): i32 {
  if (i >= top) return 2;
  const cells = IMAGE + 328 * i;
  const count = <i32>load<u8>(IMAGE_COUNT + i);
  const head = load<u64>(cells);
  const all = bits(0, known);
  let candidates = head & all;
  if (candidates != head) isOpen = true;
  while (candidates != 0) {
    const v = <i32>ctz(candidates);
    // Twins give the same: one of them is enough.
    candidates &= ~load<u64>(TWIN_SET + 8 * v);
    const difference = matchRow(i, v, head & ~bit(v), cells, count);
    if (difference > 0) return 1;
    if (difference == 0) {
      const result = search(i + 1, top, known);
      if (result != 0) {
        store<u8>(CHOSEN + i, <u8>v);
        return result;
      }
    }
  }
  return 0;
}

function startOrbits(known: i32): void {
  orbitsKnown = true;
  for (let v = 0; v < n; v++) {
    store<u8>(ORBIT + v, <u8>v);
    store<u64>(ORBIT_MASK + 8 * v, bit(v));
    store<u64>(TWIN_SET + 8 * v, bit(v));
  }
  for (let v = tied; v < known;) {
    let end = v + 1 + <i32>ctz(~(twins >> <u64>(v + 1)));
    if (end > known) end = known;
    if (end > v + 1) {
      const set = bits(v, end);
      store<u64>(ORBIT_MASK + 8 * v, set);
      for (let u = v; u < end; u++) {
        store<u8>(ORBIT + u, <u8>v);
        store<u64>(TWIN_SET + 8 * u, set);
      }
    }
    v = end;
  }
}

function joinOrbits(p: i32, v: i32): void {
  let root = <i32>load<u8>(ORBIT + p);
  const other = <i32>load<u8>(ORBIT + v);
  if (root == other) return;
  const mask = load<u64>(ORBIT_MASK + 8 * other);
  store<u64>(ORBIT_MASK + 8 * root, load<u64>(ORBIT_MASK + 8 * root) | mask);
  let rest = mask;
  while (rest != 0) {
    store<u8>(ORBIT + <usize>ctz(rest), <u8>root);
    rest &= rest - 1;
  }
}

/** The permutation just found maps the matrix onto itself: k … filled − 1 go to CHOSEN, cells behind go to cells. */
function joinAutomorphism(k: i32, filled: i32, known: i32): void {
  for (let p = k; p < filled; p++) joinOrbits(p, <i32>load<u8>(CHOSEN + p));
  if (known == filled) return;
  const count = partitionFrom(filled, IMAGE + 328 * 40);
  for (let c = 0; c < count; c++) {
    let own = load<u64>(IMAGE + 328 * 40 + 8 * c);
    let image = load<u64>(IMAGE + 328 * filled + 8 * c);
    while (own != 0) {
      joinOrbits(<i32>ctz(own), <i32>ctz(image));
      own &= own - 1;
      image &= image - 1;
    }
  }
}

// ---- Kekulé forms ----

/** Scratch of the search for alternating cycles. */
let core: u64 = 0;

@inline
function singleTo(v: i32): u64 {
  return load<u64>(BONDED + 24 * v) | load<u64>(INSIDE + 24 * v);
}
@inline
function doubleTo(v: i32): u64 {
  return load<u64>(BONDED + 24 * v, 8) | load<u64>(INSIDE + 24 * v, 8);
}
@inline
function bondedTo(v: i32): u64 {
  return singleTo(v) | doubleTo(v) | tripleTo(v);
}

/**
 * Can the complete molecule have another Kekulé form? Two forms differ by disjoint cycles of alternating bonds (Berge,
 * Proc. Natl. Acad. Sci. 1957, 43, 842), and the bonds of an aromatic ring join atoms with a double bond or a lone pair.
 * False is certain; true means that aromaticity has to be looked at.
 */
function mayHaveOtherForms(): bool {
  const doubles = doubled;
  if (popcnt(doubles) < 4) return false;
  // A double bond lies in such a cycle only when from both its ends a single bond leads to another one that does.
  core = doubles;
  for (let changed = true; changed; ) {
    changed = false;
    let rest = core;
    while (rest != 0) {
      const v = <i32>ctz(rest);
      rest &= rest - 1;
      if ((singleTo(v) & core) != 0 && (doubleTo(v) & core) != 0) continue;
      core &= ~bit(v);
      changed = true;
    }
  }
  return core != 0 && mayBeAromatic(doubles) && hasAlternatingCycle();
}

@inline
function tripleTo(v: i32): u64 {
  return load<u64>(BONDED + 24 * v, 16) | load<u64>(INSIDE + 24 * v, 16);
}

/** Is there a ring of atoms that can be aromatic, other than one of 4 or 8 atoms that stands alone? */
function mayBeAromatic(doubles: u64): bool {
  let ring = doubles | tripled | donors;
  for (let changed = true; changed; ) {
    changed = false;
    let rest = ring;
    while (rest != 0) {
      const v = <i32>ctz(rest);
      rest &= rest - 1;
      if (popcnt(bondedTo(v) & ring) >= 2) continue;
      ring &= ~bit(v);
      changed = true;
    }
  }
  while (ring != 0) {
    // One connected part of what is left.
    let part: u64 = ring & (0 - ring);
    let frontier = part;
    while (frontier != 0) {
      const v = <i32>ctz(frontier);
      frontier &= frontier - 1;
      const next = bondedTo(v) & ring;
      if (popcnt(next) != 2) return true;
      frontier |= next & ~part;
      part |= next;
    }
    const size = popcnt(part);
    // A lone ring of four or eight atoms with one double bond each, in the ring, has 4 or 8 π electrons.
    if ((size != 4 && size != 8) || (part & donors) != 0) return true;
    let rest = part;
    while (rest != 0) {
      const v = <i32>ctz(rest);
      rest &= rest - 1;
      const twofold = doubleTo(v);
      if (popcnt(twofold) != 1 || (twofold & part) == 0 || tripleTo(v) != 0) return true;
    }
    ring &= ~part;
  }
  return false;
}

/** Looks in {@link core} for a cycle of alternating bonds that is not made of resonant bonds of units alone. */
function hasAlternatingCycle(): bool {
  let rest = core;
  while (rest != 0) {
    const i = <i32>ctz(rest);
    rest &= rest - 1;
    let partners = doubleTo(i) & core & ~(bit(i + 1) - 1);
    while (partners != 0) {
      const j = <i32>ctz(partners);
      partners &= partners - 1;
      const leavesUnit = (load<u64>(RESONANT + 8 * i) & bit(j)) == 0;
      if (walk(j, i, bit(i) | bit(j), leavesUnit)) return true;
    }
  }
  return false;
}

/** Continues over a single bond from `atom`; `target` closes the cycle. */
function walk(atom: i32, target: i32, visited: u64, leavesUnit: bool): bool {
  let nexts = singleTo(atom) & core;
  const resonant = load<u64>(RESONANT + 8 * atom);
  if ((nexts & bit(target)) != 0 && (leavesUnit || (resonant & bit(target)) == 0)) return true;
  nexts &= ~visited;
  while (nexts != 0) {
    const next = <i32>ctz(nexts);
    nexts &= nexts - 1;
    const leaves = leavesUnit || (resonant & bit(next)) == 0;
    let partners = doubleTo(next) & core & ~visited;
    while (partners != 0) {
      const partner = <i32>ctz(partners);
      partners &= partners - 1;
      const leavesNow = leaves || (load<u64>(RESONANT + 8 * next) & bit(partner)) == 0;
      if (walk(partner, target, visited | bit(next) | bit(partner), leavesNow)) return true;
    }
  }
  return false;
}

// ---- prefixes ----

/** Puts a prefix back as if the search had come here by itself; its canonicity was tested when it was made. */
function restore(rows: i32): void {
  let at = PREFIX;
  for (let p = 0; p < pairCount; p++) {
    const order = <i32>load<u8>(at++);
    if (order > 0) addBond(<i32>load<u8>(TIED_PAIRS + 2 * p), <i32>load<u8>(TIED_PAIRS + 2 * p + 1), order);
  }
  let count = 0;
  for (let w = 0; w < permutationCount; w++) if (comparePermuted(w) == 0) store<u16>(stabiliser + 2 * count++, <u16>w);
  stabiliserCount = count;
  memory.fill(tiedDead, 255, count);
  for (let i = 0; i < rows; i++) {
    store<u8>(CELL_END + i, <u8>findCellEnd(i));
    let tight = i > tied && (load<u64>(SAME + 8 * (i - 1)) & bit(i)) != 0;
    for (let j = firstColumn(i); j < n; j++) {
      const order = <i32>load<u8>(at++);
      if (tight && order != bond(i - 1, j)) tight = false;
      if (order > 0) addBond(i, j, order);
    }
    twins = tight ? twins | bit(i) : twins & ~bit(i);
    splitCells(i);
    for (let k = 0; k < n; k++) store<u64>(ALIVE + 328 * (i + 1) + 8 * k, ~0);
  }
  startRow(rows);
}
