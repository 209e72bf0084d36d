import type { MolecularGraph } from '../../shared/types/molecular-graph.js';

/**
 * Writes a graph as short ASCII text so that it can leave a shard: atom count, then two bytes an atom (element,
 * hydrogens and charge), then three bytes a bond, base64. Unpacking restores atom order and Kekulé form exactly.
 */
export function packGraph(graph: MolecularGraph): string {
  const { atomCount: n, atomicNumbers, hydrogens, charges, bondOrders } = graph;
  const bytes: number[] = [n];
  for (let i = 0; i < n; i++) bytes.push(atomicNumbers[i], hydrogens[i] | ((charges[i] + 2) << 3));
  for (let i = 0; i < n; i++) {
    for (let j = i + 1; j < n; j++) {
      const order = bondOrders[i * n + j];
      if (order !== 0) bytes.push(i, j, order);
    }
  }
  return Buffer.from(bytes).toString('base64');
}

/** Rebuilds a graph from {@link packGraph}; fresh arrays. */
export function unpackGraph(packed: string): MolecularGraph {
  const bytes = Buffer.from(packed, 'base64');
  const n = bytes[0];
  const graph = createGraph(n);
  for (let i = 0; i < n; i++) {
    graph.atomicNumbers[i] = bytes[1 + 2 * i];
    graph.hydrogens[i] = bytes[2 + 2 * i] & 7;
    graph.charges[i] = (bytes[2 + 2 * i] >> 3) - 2;
  }
  for (let k = 1 + 2 * n; k + 2 < bytes.length; k += 3) {
    graph.bondOrders[bytes[k] * n + bytes[k + 1]] = bytes[k + 2];
    graph.bondOrders[bytes[k + 1] * n + bytes[k]] = bytes[k + 2];
  }
  return graph;
}

/** An empty graph of n heavy atoms: no bonds, hydrogens or charges. */
export function createGraph(n: number): MolecularGraph {
  return {
    atomCount: n,
    atomicNumbers: new Uint8Array(n),
    hydrogens: new Uint8Array(n),
    charges: new Int8Array(n),
    bondOrders: new Uint8Array(n * n),
  };
}
