/**
 * Alternating double bonds of aromatic systems: perfect matchings of the graph whose vertices are the atoms that
 * need one double bond and whose edges are the aromatic bonds between them.
 */
export interface PiSystem {
  /** Number of vertices. */
  readonly size: number;
  /** Adjacency lists. */
  readonly neighbours: readonly (readonly number[])[];
}

/**
 * Finds a perfect matching, exactly and in polynomial time.
 *
 * @returns partner of each vertex, or null when some vertex must stay alone.
 * @see Edmonds, Can. J. Math. 1965, 17, 449 (augmenting paths with contracted odd cycles, breadth first).
 */
export function findPerfectMatching(system: PiSystem): Int32Array | null {
  const { size, neighbours } = system;
  const partner = new Int32Array(size).fill(-1);
  const parent = new Int32Array(size);
  const base = new Int32Array(size);
  const isOuter = new Uint8Array(size);

  const commonBase = (a: number, b: number): number => {
    const seen = new Uint8Array(size);
    let at = a;
    for (;;) {
      at = base[at]!;
      seen[at] = 1;
      if (partner[at] === -1) break;
      at = parent[partner[at]!]!;
    }
    at = b;
    for (;;) {
      at = base[at]!;
      if (seen[at] === 1) return at;
      at = parent[partner[at]!]!;
    }
  };
  const markPath = (from: number, top: number, firstChild: number, inBlossom: Uint8Array): void => {
    let at = from;
    let child = firstChild;
    while (base[at] !== top) {
      inBlossom[base[at]!] = inBlossom[base[partner[at]!]!] = 1;
      parent[at] = child;
      child = partner[at]!;
      at = parent[partner[at]!]!;
    }
  };
  const findAugmentingEnd = (root: number): number => {
    isOuter.fill(0);
    parent.fill(-1);
    for (let v = 0; v < size; v++) base[v] = v;
    isOuter[root] = 1;
    const queue = [root];
    for (let head = 0; head < queue.length; head++) {
      const v = queue[head]!;
      for (const to of neighbours[v]!) {
        if (base[v] === base[to] || partner[v] === to) continue;
        if (to === root || (partner[to] !== -1 && parent[partner[to]!] !== -1)) {
          const top = commonBase(v, to);
          const inBlossom = new Uint8Array(size);
          markPath(v, top, to, inBlossom);
          markPath(to, top, v, inBlossom);
          for (let i = 0; i < size; i++) {
            if (inBlossom[base[i]!] === 0) continue;
            base[i] = top;
            if (isOuter[i] === 0) {
              isOuter[i] = 1;
              queue.push(i);
            }
          }
        } else if (parent[to] === -1) {
          parent[to] = v;
          if (partner[to] === -1) return to;
          isOuter[partner[to]!] = 1;
          queue.push(partner[to]!);
        }
      }
    }
    return -1;
  };

  for (let root = 0; root < size; root++) {
    if (partner[root] !== -1) continue;
    let at = findAugmentingEnd(root);
    if (at === -1) return null;
    while (at !== -1) {
      const before = parent[at]!;
      const next = partner[before]!;
      partner[at] = before;
      partner[before] = at;
      at = next;
    }
  }
  return partner;
}

/**
 * Lists every perfect matching. Their number grows exponentially in principle; fused systems of 40 atoms have a few
 * hundred.
 *
 * @returns one partner array per matching; empty when there is none, one empty array for an empty system.
 */
export function listPerfectMatchings(system: PiSystem): Int32Array[] {
  const { size, neighbours } = system;
  const partner = new Int32Array(size).fill(-1);
  const found: Int32Array[] = [];
  const freeNeighbours = (v: number): number => neighbours[v]!.reduce((count, to) => count + (partner[to] === -1 ? 1 : 0), 0);

  const extend = (): void => {
    // The vertex with the fewest choices is next: chains and dead ends resolve without branching.
    let next = -1;
    let fewest = Infinity;
    for (let v = 0; v < size; v++) {
      if (partner[v] !== -1) continue;
      const choices = freeNeighbours(v);
      if (choices < fewest) {
        fewest = choices;
        next = v;
      }
    }
    if (next === -1) {
      found.push(partner.slice());
      return;
    }
    for (const to of neighbours[next]!) {
      if (partner[to] !== -1) continue;
      partner[next] = to;
      partner[to] = next;
      extend();
      partner[next] = partner[to] = -1;
    }
  };
  extend();
  return found;
}
