import { FILL_STRIDE } from '../../workers/enumeration/fill.js';
import type { FillEvents } from '../../workers/enumeration/fill.js';
import type { FillLayout } from '../../workers/enumeration/layout.js';

/** Rows between two calls of `shouldStop`: about a millisecond. */
const ROWS_BETWEEN_CHECKS = 2048;
const ANY_ORDER = 255;
const ALIVE = 255;
/** Cells hold at most 40 entries, so one entry of a higher order outweighs all of the lower ones. */
const WEIGHT = [0, 1, 64, 4096] as const;

const N = FILL_STRIDE;

/* State of the one search that runs. */
let n = 0;
let tied = 0;
let layout: FillLayout;
let hasPrescribed = false;
const a = new Uint8Array(N * N);
const left = new Uint8Array(N);
const quota = new Uint8Array(4 * N);
const isPrescribed = new Uint8Array(N);
const highestOrder = new Uint8Array(N);
/** same[row * N + j]: free columns j − 1 and j lie in one cell, rows before `row` considered. */
const same = new Uint8Array((N + 1) * N);
/** capacity[row * (N + 1) + j]: what columns [j, n) can still take from the row. */
const capacity = new Uint16Array((N + 1) * (N + 1));
/** Components of the bonds placed so far: union by size without path compression, so that bonds can be taken back. */
const componentParent = new Uint8Array(N);
const componentSize = new Uint8Array(N);
/** Free valence left in a component, at its root. */
const componentLeft = new Uint16Array(N);
/** For each bond (i < j): 1 + the root that it attached, 0 when both ends hung together already. */
const attachedRoot = new Uint8Array(N * N);
let componentCount = 0;
let totalLeft = 0;
/** Vertices that change places with their predecessor without changing the matrix. */
const isTwin = new Uint8Array(N);
const twinRoot = new Uint8Array(N);
const image = new Uint8Array((N + 1) * N);
const orbit = new Uint8Array(N);
/** End of the cell that starts at a row's own position, earlier rows considered. */
const cellEnd = new Uint8Array(N + 1);
/**
 * deadAt[k * N + v]: last row of the test in which putting vertex v at position k (positions before k fixed) was found
 * to give something smaller whatever follows; ALIVE while that is open. An entry of this row or a later one is stale.
 */
const deadAt = new Uint8Array(N * N);
let tiedDeadAt = new Uint8Array(0);
/** Set by a search that met a vertex whose row is not filled yet: its result is not final. */
let isOpen = false;
let orbitsKnown = false;
/** Per depth: the search call that last tried a twin root. */
const seenRoot = new Uint32Array(N * N);
let seenStamp = 0;
let tiedPairs: number[] = [];
let stabiliser: readonly Uint8Array[] = [];
let events: FillEvents;
let stopRow = 0;
let stopped = false;
let isRunning = false;
let untilCheck = ROWS_BETWEEN_CHECKS;

/**
 * The fill once more, in plain TypeScript without bit masks: what the compiled one is tested against.
 *
 * Orderly generation of connectivity matrices, row by row, larger entries first; no table of seen matrices.
 *
 * A matrix is produced exactly when it is the lexicographically largest one (pairs of tied vertices first, then rows
 * in order, each over the columns to its right) among all permutations that keep classes and units. After each row
 * the same test runs on the filled rows; a partial matrix that some permutation makes larger has no canonical
 * completion, because a completion keeps the entries that decided. (Read, Ann. Discrete Math. 1978, 2, 107; Faradžev,
 * Colloq. Int. CNRS 1978, 260, 131; row-wise filling: Grund, Bayreuther Math. Schr. 1995, 49, 1.)
 *
 * Not re-entrant: a thread runs one search at a time; events must not start another.
 *
 * @param of - vertices, classes and prescribed bonds; read only.
 * @param prefix - where to begin: empty = the root. Trusted: it came from `onPrefix` of the same layout.
 * @param stopAt - above 0: report prefixes of that many rows instead of going deeper; leaves that are complete before
 *   are reported as leaves.
 * @returns false when an event ended it.
 */
export function referenceFill(of: FillLayout, prefix: readonly number[], stopAt: number, handler: FillEvents): boolean {
  if (isRunning) throw new Error('a fill is running in this thread already');
  isRunning = true;
  try {
    layout = of;
    events = handler;
    stopRow = stopAt;
    stopped = false;
    reset();
    if (prefix.length > 0) {
      restore(prefix);
      startRow(prefix[0]);
    } else {
      fillTied(0);
    }
    return !stopped;
  } finally {
    isRunning = false;
  }
}

function reset(): void {
  n = layout.open;
  tied = layout.tied;
  const { bondQuota, classOf, unitOf } = layout;
  a.fill(0);
  left.set(layout.freeValence);
  quota.set(bondQuota);
  hasPrescribed = false;
  for (let v = 0; v < n; v++) {
    isPrescribed[v] = bondQuota[4 * v] === ANY_ORDER ? 0 : 1;
    highestOrder[v] = 3;
    if (isPrescribed[v] === 0) continue;
    hasPrescribed = true;
    while (highestOrder[v] > 0 && bondQuota[4 * v + highestOrder[v]] === 0) highestOrder[v]--;
  }
  isTwin.fill(0);
  componentLeft.fill(0);
  componentSize.fill(0);
  componentCount = 0;
  totalLeft = 0;
  for (let v = 0; v < n; v++) {
    // The first vertex of each unit is the root of its component.
    const root = unitOf.indexOf(unitOf[v]);
    componentParent[v] = root;
    componentSize[root]++;
    componentLeft[root] += left[v];
    totalLeft += left[v];
    if (root === v) componentCount++;
  }
  deadAt.fill(ALIVE);
  for (let j = tied + 1; j < n; j++) same[j] = classOf[j - 1] === classOf[j] ? 1 : 0;
  same[tied] = 0;
  tiedPairs = [];
  for (let i = 0; i < tied; i++) for (let j = i + 1; j < tied; j++) if (unitOf[i] !== unitOf[j]) tiedPairs.push(i, j);
  stabiliser = layout.tiedPermutations;
}

/** Largest order that vertices i and j can still share. */
function largestOrder(i: number, j: number): number {
  let x = left[i] < left[j] ? left[i] : left[j];
  if (x > 3) x = 3;
  if (!hasPrescribed) return x;
  while (x > 0 && !orderFits(i, j, x)) x--;
  return x;
}
function orderFits(i: number, j: number, order: number): boolean {
  return (isPrescribed[i] === 0 || quota[4 * i + order] > 0) && (isPrescribed[j] === 0 || quota[4 * j + order] > 0);
}
function rootOf(v: number): number {
  while (componentParent[v] !== v) v = componentParent[v];
  return v;
}
/** Takes the bond; false when a component is then saturated, or too few bonds are left, before all hangs together. */
function addBond(i: number, j: number, order: number): boolean {
  a[i * N + j] = a[j * N + i] = order;
  left[i] -= order;
  left[j] -= order;
  if (hasPrescribed) {
    if (isPrescribed[i] === 1) quota[4 * i + order]--;
    if (isPrescribed[j] === 1) quota[4 * j + order]--;
  }
  totalLeft -= 2 * order;
  let root = rootOf(i);
  let other = rootOf(j);
  if (root === other) {
    attachedRoot[i * N + j] = 0;
    componentLeft[root] -= 2 * order;
  } else {
    if (componentSize[root] < componentSize[other]) {
      const swap = root;
      root = other;
      other = swap;
    }
    componentParent[other] = root;
    componentSize[root] += componentSize[other];
    componentLeft[root] += componentLeft[other] - 2 * order;
    componentCount--;
    attachedRoot[i * N + j] = other + 1;
  }
  return componentCount === 1 || (componentLeft[root] !== 0 && totalLeft >= 2 * (componentCount - 1));
}
/** Takes back the bond that was added last. */
function removeBond(i: number, j: number, order: number): void {
  a[i * N + j] = a[j * N + i] = 0;
  left[i] += order;
  left[j] += order;
  if (hasPrescribed) {
    if (isPrescribed[i] === 1) quota[4 * i + order]++;
    if (isPrescribed[j] === 1) quota[4 * j + order]++;
  }
  totalLeft += 2 * order;
  const attached = attachedRoot[i * N + j];
  if (attached === 0) {
    componentLeft[rootOf(i)] += 2 * order;
    return;
  }
  const other = attached - 1;
  const root = componentParent[other];
  componentParent[other] = other;
  componentSize[root] -= componentSize[other];
  componentLeft[root] -= componentLeft[other] - 2 * order;
  componentCount++;
}

// ---- tied block: all pairs of tied vertices of different units, then the permutations that keep it ----

function fillTied(pair: number): void {
  if (stopped) return;
  if (pair === tiedPairs.length) {
    finishTied();
    return;
  }
  const i = tiedPairs[pair];
  const j = tiedPairs[pair + 1];
  for (let x = largestOrder(i, j); x > 0; x--) {
    if (hasPrescribed && !orderFits(i, j, x)) continue;
    if (addBond(i, j, x)) fillTied(pair + 2);
    removeBond(i, j, x);
  }
  fillTied(pair + 2);
}

/** Keeps the tied block when it is the largest one, with the permutations that leave it unchanged. */
function finishTied(): void {
  const keep: Uint8Array[] = [];
  for (const permutation of layout.tiedPermutations) {
    let difference = 0;
    for (let k = 0; k < tiedPairs.length && difference === 0; k += 2) {
      const i = tiedPairs[k];
      const j = tiedPairs[k + 1];
      difference = a[permutation[i] * N + permutation[j]] - a[i * N + j];
    }
    if (difference > 0) return;
    if (difference === 0) keep.push(permutation);
  }
  const saved = stabiliser;
  stabiliser = keep;
  tiedDeadAt = new Uint8Array(keep.length).fill(ALIVE);
  startRow(0);
  stabiliser = saved;
}

// ---- rows ----

/** End of the cell that begins with vertex i, rows before i considered; a tied vertex is alone. */
function findCellEnd(i: number): number {
  let end = i + 1;
  if (i >= tied) while (end < n && same[i * N + end] === 1) end++;
  return end;
}

function startRow(i: number): void {
  if (stopped) return;
  if (--untilCheck === 0) {
    untilCheck = ROWS_BETWEEN_CHECKS;
    if (events.shouldStop()) {
      stopped = true;
      return;
    }
  }
  if (totalLeft === 0) {
    finishMatrix(i - 1);
    return;
  }
  if (i >= n - 1) return;
  if (i === stopRow && stopRow > 0) {
    events.onPrefix!(currentPrefix(i));
    return;
  }
  const first = i < tied ? tied : i + 1;
  cellEnd[i] = findCellEnd(i);
  // Columns to the right can take this much of the row's valence; a row that needs more has no completion.
  const capacityLine = i * (N + 1);
  capacity[capacityLine + n] = 0;
  for (let j = n - 1; j >= first; j--)
    capacity[capacityLine + j] = capacity[capacityLine + j + 1] + (left[j] < highestOrder[j] ? left[j] : highestOrder[j]);
  // While the row equals its predecessor's and both were interchangeable, it must not grow beyond it.
  const tight = i > tied && same[(i - 1) * N + i] === 1 ? 1 : 0;
  fillEntry(i, first, tight);
}

function fillEntry(i: number, j: number, tight: number): void {
  const first = i < tied ? tied : i + 1;
  const own = i * N;
  const capacityLine = i * (N + 1);
  const need = left[i];
  // Each turn leaves column j empty after every larger entry was tried, so the call depth grows with bonds only.
  for (;;) {
    if (need === 0) {
      while (tight === 1 && j < n) {
        if (a[own - N + j] !== 0) tight = 0;
        j++;
      }
      finishRow(i, tight);
      return;
    }
    if (j === n) return;
    let most = need < left[j] ? need : left[j];
    if (most > 3) most = 3;
    if (j > first && same[own + j] === 1 && a[own + j - 1] < most) most = a[own + j - 1];
    const bound = tight === 1 ? a[own - N + j] : 3;
    if (bound < most) most = bound;
    const least = need - capacity[capacityLine + j + 1];
    for (let x = most; x > 0 && x >= least; x--) {
      if (hasPrescribed && !orderFits(i, j, x)) continue;
      if (addBond(i, j, x)) fillEntry(i, j + 1, tight === 1 && x === bound ? 1 : 0);
      removeBond(i, j, x);
      if (stopped) return;
    }
    if (least > 0) return;
    if (bound !== 0) tight = 0;
    j++;
  }
}

function finishRow(i: number, tight: number): void {
  const first = i < tied ? tied : i + 1;
  const line = i * N;
  const nextLine = line + N;
  for (let j = first; j < n; j++) {
    same[nextLine + j] = j > first && same[line + j] === 1 && a[i * N + j] === a[i * N + j - 1] ? 1 : 0;
  }
  isTwin[i] = tight;
  if (totalLeft === 0) {
    finishMatrix(i);
    return;
  }
  if (events.onRow !== undefined && !events.onRow(a, i + 1, a)) return;
  if ((i >= tied || stabiliser.length > 1) && !isLargest(i, i + 1, i + 1)) return;
  startRow(i + 1);
}

/** No bond is left to place: the rows after `row` are empty, so the whole matrix is known and one test decides. */
function finishMatrix(row: number): void {
  if (componentCount > 1) return;
  for (let i = row + 1; i < n; i++) {
    const line = i * N;
    cellEnd[i] = findCellEnd(i);
    let twin = i > tied && same[line - N + i] === 1 ? 1 : 0;
    for (let j = i + 1; twin === 1 && j < n; j++) if (a[(i - 1) * N + j] !== 0) twin = 0;
    isTwin[i] = twin;
    const first = i < tied ? tied : i + 1;
    for (let j = first; j < n; j++) same[line + N + j] = j > first ? same[line + j] : 0;
  }
  if (isLargest(row, row + 1 < tied ? tied : row + 1, n) && events.onLeaf(a, a, false)) stopped = true;
}

// ---- canonicity ----

/**
 * Compares the row of vertex v, columns sorted within the cells of depth i, with row i, and writes the refined
 * order of the remaining columns to depth i + 1.
 * @returns 1 larger, −1 smaller, 0 equal
 */
function matchRow(i: number, v: number): number {
  const first = i < tied ? tied : i + 1;
  const here = i * N;
  const next = here + N;
  const line = i * N;
  const row = v * N;
  let p = first;
  while (p < n) {
    let end = p + 1;
    while (end < n && same[line + end] === 1) end++;
    if (end === p + 1) {
      const u = image[here + p];
      const x = a[row + u];
      const y = a[here + p];
      if (x !== y) return x > y ? 1 : -1;
      image[next + p] = u;
      p = end;
      continue;
    }
    let out = p;
    // The cell's own entries fall, so each value is taken in turn: 3, 2, 1, then the rest.
    for (let x = 3; x > 0; x--) {
      for (let q = p; q < end; q++) {
        const u = image[here + q];
        if (a[row + u] !== x) continue;
        if (a[here + out] !== x) return x > a[here + out] ? 1 : -1;
        image[next + out] = u;
        out++;
      }
      if (out < end && a[here + out] === x) return -1;
    }
    for (let q = p; q < end; q++) {
      const u = image[here + q];
      if (a[row + u] === 0) image[next + out++] = u;
    }
    p = end;
  }
  return 0;
}

function findOrbit(v: number): number {
  while (orbit[v] !== v) v = orbit[v] = orbit[orbit[v]];
  return v;
}

/**
 * Is the matrix with rows [0, filled) known the largest of its orbit, as far as the known rows tell?
 *
 * @param row - the row filled last; what earlier tests settled for good is not looked at again.
 * @param filled - rows to compare: the filled ones, or all that hold a bond to the right.
 * @param known - vertices [0, known) have all their entries known: the filled ones, or all.
 */
function isLargest(row: number, filled: number, known: number): boolean {
  orbitsKnown = false;
  // Identity on the tied vertices: from the deepest row upwards, so that automorphisms found below save work above.
  for (let k = filled - 1; k >= tied; k--) {
    const end = cellEnd[k] < known ? cellEnd[k] : known;
    const here = k * N;
    for (let v = k + 1; v < end; v++) {
      if (v < row && deadAt[here + v] < row) continue;
      deadAt[here + v] = ALIVE;
      if (isTwin[v] === 1) continue;
      let difference = compareRow(k, v);
      if (difference > 0) return false;
      if (difference < 0) {
        deadAt[here + v] = row;
        continue;
      }
      if (!orbitsKnown) startOrbits(known);
      if (findOrbit(v) !== v && orbitReachesBelow(v, k)) continue;
      for (let p = k; p < n; p++) image[here + p] = p;
      image[here + k] = v;
      image[here + v] = k;
      difference = matchRow(k, v);
      isOpen = false;
      const result = search(k + 1, filled, known);
      if (result === 1) return false;
      if (result === 2) {
        image[filled * N + k] = v;
        for (let p = k; p < known; p++) joinOrbits(p, image[filled * N + p]);
      } else if (!isOpen) {
        deadAt[here + v] = row;
      }
    }
  }
  for (let w = 1; w < stabiliser.length; w++) {
    if (tiedDeadAt[w] < row) continue;
    tiedDeadAt[w] = ALIVE;
    const permutation = stabiliser[w];
    for (let v = tied; v < n; v++) image[v] = v;
    let difference = 0;
    isOpen = false;
    for (let i = 0; i < tied && i < filled && difference === 0; i++) {
      // A tied row is known only when it is among the filled ones.
      if (permutation[i] >= known) {
        isOpen = true;
        break;
      }
      difference = matchRow(i, permutation[i]);
    }
    if (difference > 0) return false;
    if (difference === 0 && !isOpen) {
      if (filled <= tied) continue;
      if (!orbitsKnown) startOrbits(known);
      const result = search(tied, filled, known);
      if (result === 1) return false;
      if (result === 2) continue;
    }
    if (!isOpen) tiedDeadAt[w] = row;
  }
  return true;
}

/**
 * Compares the row of vertex v, put at position k with v and k exchanged, with row k: only how many entries of each
 * order fall into each cell matters.
 * @returns 1 larger, −1 smaller, 0 equal
 */
function compareRow(k: number, v: number): number {
  const line = k * N;
  const own = k * N;
  const row = v * N;
  let p = k + 1;
  while (p < n) {
    let end = p + 1;
    while (end < n && same[line + end] === 1) end++;
    if (end === p + 1) {
      const x = a[row + (p === v ? k : p)];
      const y = a[own + p];
      if (x !== y) return x > y ? 1 : -1;
    } else {
      // Difference of the counts of orders 3, 2 and 1, packed so that the highest order decides.
      let balance = 0;
      for (let q = p; q < end; q++) balance += WEIGHT[a[row + (q === v ? k : q)]] - WEIGHT[a[own + q]];
      if (balance !== 0) return balance > 0 ? 1 : -1;
    }
    p = end;
  }
  return 0;
}

function startOrbits(known: number): void {
  orbitsKnown = true;
  for (let v = 0; v < n; v++) orbit[v] = v;
  for (let v = tied; v < known; v++) {
    twinRoot[v] = isTwin[v] === 1 ? twinRoot[v - 1] : v;
    if (isTwin[v] === 1) joinOrbits(v, v - 1);
  }
}

function orbitReachesBelow(v: number, k: number): boolean {
  const root = findOrbit(v);
  for (let u = k; u < v; u++) if (findOrbit(u) === root) return true;
  return false;
}
function joinOrbits(p: number, v: number): void {
  orbit[findOrbit(p)] = findOrbit(v);
}

/** @returns 1 when some completion is larger, 2 when one is equal up to `top`, 0 when all are smaller. */
function search(i: number, top: number, known: number): number {
  if (i >= top) return 2;
  const here = i * N;
  const end = findCellEnd(i);
  const stamp = ++seenStamp;
  for (let p = i; p < end; p++) {
    const v = image[here + p];
    if (v >= known) {
      isOpen = true;
      continue;
    }
    const root = twinRoot[v];
    if (seenRoot[here + root] === stamp) continue;
    seenRoot[here + root] = stamp;
    image[here + p] = image[here + i];
    image[here + i] = v;
    const difference = matchRow(i, v);
    if (difference > 0) return 1;
    if (difference === 0) {
      const result = search(i + 1, top, known);
      if (result !== 0) {
        image[top * N + i] = v;
        return result;
      }
    }
    image[here + i] = image[here + p];
    image[here + p] = v;
  }
  return 0;
}

// ---- prefixes ----

function currentPrefix(rows: number): number[] {
  const entries = [rows];
  for (let k = 0; k < tiedPairs.length; k += 2) entries.push(a[tiedPairs[k] * N + tiedPairs[k + 1]]);
  for (let i = 0; i < rows; i++) for (let j = i < tied ? tied : i + 1; j < n; j++) entries.push(a[i * N + j]);
  return entries;
}

/** Puts a prefix back as if the search had come here by itself; its canonicity was tested when it was made. */
function restore(prefix: readonly number[]): void {
  const rows = prefix[0];
  let k = 1;
  for (let p = 0; p < tiedPairs.length; p += 2) {
    const order = prefix[k++];
    if (order > 0) addBond(tiedPairs[p], tiedPairs[p + 1], order);
  }
  stabiliser = layout.tiedPermutations.filter((permutation) => {
    for (let p = 0; p < tiedPairs.length; p += 2) {
      if (a[permutation[tiedPairs[p]] * N + permutation[tiedPairs[p + 1]]] !== a[tiedPairs[p] * N + tiedPairs[p + 1]]) return false;
    }
    return true;
  });
  tiedDeadAt = new Uint8Array(stabiliser.length).fill(ALIVE);
  for (let i = 0; i < rows; i++) {
    const first = i < tied ? tied : i + 1;
    let tight = i > tied && same[(i - 1) * N + i] === 1 ? 1 : 0;
    for (let j = first; j < n; j++) {
      const order = prefix[k++];
      if (tight === 1 && order !== a[(i - 1) * N + j]) tight = 0;
      if (order > 0) addBond(i, j, order);
    }
    isTwin[i] = tight;
    for (let j = first; j < n; j++) {
      same[(i + 1) * N + j] = j > first && same[i * N + j] === 1 && a[i * N + j] === a[i * N + j - 1] ? 1 : 0;
    }
    cellEnd[i] = findCellEnd(i);
  }
}
