import type { MolecularGraph } from '../../shared/types/molecular-graph.js';

/** Rings of a graph. A ring lists its atoms in ring order; bonds are implied by neighbours in that order. */
export interface RingSet {
  /** Every relevant cycle: those that are no sum of shorter ones. Independent of atom numbering as a set. */
  readonly relevant: readonly (readonly number[])[];
  /** A minimum cycle basis, a subset of `relevant`; as many rings as the graph has independent ones. */
  readonly basis: readonly (readonly number[])[];
}

const NO_RINGS: RingSet = { relevant: [], basis: [] };

/**
 * Finds the relevant cycles and one minimum cycle basis of a connected graph.
 *
 * Shortest-path families of cycles are listed by their highest atom (Vismara, Electron. J. Combin. 1997, 4, R9);
 * a cycle stays when Gaussian elimination over GF(2) shows that no sum of strictly shorter cycles gives it.
 *
 * @param graph - n heavy atoms; bond orders only tell bonded from not bonded. Read only.
 * @returns rings by rising size; empty for trees.
 */
export function findRingSet(graph: MolecularGraph): RingSet {
  const { atomCount: n, bondOrders } = graph;
  // Atoms that no ring can hold are peeled off first: leaves, then what became a leaf.
  const degree = new Uint8Array(n);
  const neighbours: number[][] = [];
  let bondCount = 0;
  for (let i = 0; i < n; i++) {
    const row: number[] = [];
    for (let j = 0; j < n; j++) if (bondOrders[i * n + j] !== 0) row.push(j);
    neighbours.push(row);
    degree[i] = row.length;
    bondCount += row.length;
  }
  bondCount >>= 1;
  if (bondCount < n) return NO_RINGS;
  const leaves: number[] = [];
  for (let i = 0; i < n; i++) if (degree[i]! <= 1) leaves.push(i);
  const peeled = new Uint8Array(n);
  while (leaves.length > 0) {
    const leaf = leaves.pop()!;
    if (peeled[leaf] === 1) continue;
    peeled[leaf] = 1;
    for (const next of neighbours[leaf]!) {
      if (peeled[next] === 1) continue;
      if (--degree[next]! <= 1) leaves.push(next);
    }
  }
  const core: number[] = [];
  for (let i = 0; i < n; i++) if (peeled[i] === 0) core.push(i);
  if (core.length === 0) return NO_RINGS;
  const bondIndex = new Int16Array(n * n).fill(-1);
  let coreBonds = 0;
  for (const i of core) {
    neighbours[i] = neighbours[i]!.filter((j) => peeled[j] === 0);
    for (const j of neighbours[i]!) if (j > i) bondIndex[i * n + j] = bondIndex[j * n + i] = coreBonds++;
  }
  const ringCount = coreBonds - core.length + 1;

  if (ringCount === 1 && core.every((i) => degree[i] === 2)) {
    const ring = [core[0]!];
    let previous = -1;
    let atom = core[0]!;
    for (;;) {
      const [a, b] = neighbours[atom]! as [number, number];
      const next = a !== previous ? a : b;
      if (next === core[0]) break;
      ring.push(next);
      previous = atom;
      atom = next;
    }
    return { relevant: [ring], basis: [ring] };
  }

  const cycles = listCycleFamilies(core, neighbours, n);
  return reduceCycles(cycles, bondIndex, n, coreBonds, ringCount);
}

/** Rings of a minimum cycle basis and its equal-length alternatives, atoms in ring order; see {@link findRingSet}. */
export function findRings(graph: MolecularGraph): readonly (readonly number[])[] {
  return findRingSet(graph).relevant;
}

function listCycleFamilies(core: readonly number[], neighbours: readonly (readonly number[])[], n: number): number[][] {
  const cycles: number[][] = [];
  const distance = new Int16Array(n);
  const reachable = new Uint8Array(n);
  const parents: number[][] = Array.from({ length: n }, () => []);
  const paths: number[][][] = Array.from({ length: n }, () => []);
  for (const root of core) {
    distance.fill(-1);
    reachable.fill(0);
    distance[root] = 0;
    reachable[root] = 1;
    const queue = [root];
    for (let head = 0; head < queue.length; head++) {
      const atom = queue[head]!;
      for (const next of neighbours[atom]!) {
        if (distance[next] === -1) {
          distance[next] = distance[atom]! + 1;
          parents[next] = [];
          queue.push(next);
        }
        // A parent counts only when a shortest path through lower atoms than the root leads to it.
        if (distance[next] === distance[atom]! + 1 && next < root && reachable[atom] === 1) {
          parents[next]!.push(atom);
          reachable[next] = 1;
        }
      }
    }
    // Shortest paths root–…–y through lower atoms, in order of distance, so that a parent's paths are there already.
    for (const y of queue) {
      if (y === root) {
        paths[y] = [[root]];
        continue;
      }
      if (reachable[y] === 0) continue;
      const inner = parents[y]!;
      const own: number[][] = [];
      for (const parent of inner) for (const path of paths[parent]!) own.push([...path, y]);
      paths[y] = own;
      for (let a = 0; a < inner.length; a++) {
        for (let b = a + 1; b < inner.length; b++) joinPaths(paths[inner[a]!]!, paths[inner[b]!]!, y, cycles);
      }
    }
    for (const y of queue) {
      if (y === root || reachable[y] === 0) continue;
      for (const z of neighbours[y]!) {
        if (z < y && reachable[z] === 1 && distance[z] === distance[y]) joinPaths(paths[y]!, paths[z]!, -1, cycles);
      }
    }
  }
  return cycles;
}

/** Pushes every ring root–…–p (–middle–) q–…–root made of two shortest paths that meet only in the root. */
function joinPaths(
  lefts: readonly (readonly number[])[],
  rights: readonly (readonly number[])[],
  middle: number,
  cycles: number[][],
): void {
  for (const left of lefts) {
    for (const right of rights) {
      let meets = false;
      for (let i = 1; i < right.length && !meets; i++) meets = left.includes(right[i]!);
      if (meets) continue;
      const ring = middle === -1 ? [...left] : [...left, middle];
      for (let i = right.length - 1; i > 0; i--) ring.push(right[i]!);
      if (ring.length >= 3) cycles.push(ring);
    }
  }
}

function reduceCycles(cycles: number[][], bondIndex: Int16Array, n: number, bondCount: number, ringCount: number): RingSet {
  cycles.sort((a, b) => a.length - b.length);
  const words = (bondCount + 31) >>> 5;
  const rows: Int32Array[] = [];
  const pivots: number[] = [];
  const relevant: number[][] = [];
  const basis: number[][] = [];
  const reduce = (vector: Int32Array, upTo: number): number => {
    for (let k = 0; k < upTo; k++) {
      const pivot = pivots[k]!;
      if ((vector[pivot >>> 5]! >>> (pivot & 31)) & 1) for (let w = 0; w < words; w++) vector[w]! ^= rows[k]![w]!;
    }
    for (let w = 0; w < words; w++) if (vector[w] !== 0) return (w << 5) + (31 - Math.clz32(vector[w]! & -vector[w]!));
    return -1;
  };
  let start = 0;
  while (start < cycles.length) {
    const size = cycles[start]!.length;
    let end = start;
    while (end < cycles.length && cycles[end]!.length === size) end++;
    const shorter = rows.length;
    if (shorter === ringCount) break;
    for (let c = start; c < end; c++) {
      const ring = cycles[c]!;
      const vector = new Int32Array(words);
      for (let i = 0; i < ring.length; i++) {
        const bond = bondIndex[ring[i]! * n + ring[(i + 1) % ring.length]!]!;
        vector[bond >>> 5]! |= 1 << (bond & 31);
      }
      if (reduce(vector, shorter) === -1) continue;
      relevant.push(ring);
      // Rows of equal length are reduced among themselves only for the basis.
      const rest = reduceRange(vector, rows, pivots, shorter, words);
      if (rest === -1) continue;
      rows.push(vector);
      pivots.push(rest);
      basis.push(ring);
    }
    start = end;
  }
  return { relevant, basis };
}

function reduceRange(vector: Int32Array, rows: readonly Int32Array[], pivots: readonly number[], from: number, words: number): number {
  for (let k = from; k < rows.length; k++) {
    const pivot = pivots[k]!;
    if ((vector[pivot >>> 5]! >>> (pivot & 31)) & 1) for (let w = 0; w < words; w++) vector[w]! ^= rows[k]![w]!;
  }
  for (let w = 0; w < words; w++) if (vector[w] !== 0) return (w << 5) + (31 - Math.clz32(vector[w]! & -vector[w]!));
  return -1;
}
