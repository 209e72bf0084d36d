import type { MolecularGraph } from '../../shared/types/molecular-graph.js';

/**
 * Ring sizes of a minimum cycle basis, rising: all shortest cycles through a vertex and an edge (Horton, SIAM J. Comput.
 * 1987, 16, 358), taken greedily while independent over GF(2). Written for tests, apart from the ring search of the engine.
 */
export function minimumCycleBasisSizes({ atomCount: n, bondOrders }: MolecularGraph): number[] {
  const edges: [number, number][] = [];
  for (let a = 0; a < n; a++) for (let b = a + 1; b < n; b++) if (bondOrders[a * n + b] > 0) edges.push([a, b]);
  const numberOf = (a: number, b: number): bigint =>
    1n << BigInt(edges.findIndex(([x, y]) => (x === a && y === b) || (x === b && y === a)));
  const cycles: { size: number; set: bigint }[] = [];
  for (let root = 0; root < n; root++) {
    const parent = new Array<number>(n).fill(-1);
    const depth = new Array<number>(n).fill(Infinity);
    depth[root] = 0;
    const queue = [root];
    for (const at of queue) {
      for (let next = 0; next < n; next++) {
        if (bondOrders[at * n + next] === 0 || depth[next] !== Infinity) continue;
        depth[next] = depth[at] + 1;
        parent[next] = at;
        queue.push(next);
      }
    }
    for (const [a, b] of edges) {
      if (parent[a] === b || parent[b] === a || depth[a] === Infinity) continue;
      let set = numberOf(a, b);
      for (const end of [a, b]) for (let at = end; at !== root; at = parent[at]) set ^= numberOf(at, parent[at]);
      cycles.push({ size: depth[a] + depth[b] + 1, set });
    }
  }
  cycles.sort((x, y) => x.size - y.size);
  const rows: bigint[] = [];
  const sizes: number[] = [];
  for (const { size, set } of cycles) {
    let rest = set;
    for (const row of rows) if ((rest ^ row) < rest) rest ^= row;
    if (rest === 0n) continue;
    rows.push(rest);
    rows.sort((x, y) => (x > y ? -1 : 1));
    sizes.push(size);
  }
  return sizes;
}
