import type { MolecularGraph } from '../../shared/types/molecular-graph.js';
import { createRandom } from '../../workers/enumeration/random-descent.js';

const ELEMENTS: ReadonlyArray<readonly [atomicNumber: number, valence: number, weight: number]> = [
  [6, 4, 60],
  [7, 3, 10],
  [8, 2, 12],
  [16, 2, 4],
  [16, 6, 2],
  [9, 1, 3],
  [17, 1, 3],
  [35, 1, 2],
  [53, 1, 1],
  [14, 4, 1],
  [15, 3, 1],
  [15, 5, 1],
];

/**
 * A random connected molecule within the valences: a random tree, extra bonds, sometimes a benzene ring or a nitro
 * group; strained and odd ones on purpose. 1 to `largest` heavy atoms, at least one carbon.
 */
export function randomMolecule(seed: number, largest = 14): MolecularGraph {
  const random = createRandom(seed);
  const pick = (count: number): number => Math.floor(random() * count);
  const total = ELEMENTS.reduce((sum, [, , weight]) => sum + weight, 0);
  const n = 1 + pick(largest);
  const elements: (readonly [number, number])[] = [[6, 4]];
  const orders = new Map<string, number>();
  const free = [4];
  const orderOf = (a: number, b: number): number => orders.get(a < b ? `${a},${b}` : `${b},${a}`) ?? 0;
  const addBond = (a: number, b: number, order: number): void => {
    orders.set(a < b ? `${a},${b}` : `${b},${a}`, orderOf(a, b) + order);
    free[a] -= order;
    free[b] -= order;
  };
  const openAtoms = (): number[] => free.flatMap((left, atom) => (left > 0 ? [atom] : []));
  if (n >= 6 && random() < 0.4) {
    for (let k = 1; k < 6; k++) {
      const isNitrogen = random() < 0.1;
      elements.push(isNitrogen ? [7, 3] : [6, 4]);
      free.push(isNitrogen ? 3 : 4);
    }
    for (let k = 0; k < 6; k++) addBond(k, (k + 1) % 6, k % 2 === 0 ? 2 : 1);
  }
  while (elements.length < n) {
    const open = openAtoms();
    if (open.length === 0) break;
    let draw = random() * total;
    let chosen = ELEMENTS[0];
    for (const entry of ELEMENTS) {
      draw -= entry[2];
      if (draw < 0) {
        chosen = entry;
        break;
      }
    }
    const atom = elements.push([chosen[0], chosen[1]]) - 1;
    free.push(chosen[1]);
    addBond(open[pick(open.length)], atom, 1);
  }
  for (let extra = pick(5); extra > 0; extra--) {
    const open = openAtoms();
    if (open.length < 2) break;
    const a = open[pick(open.length)];
    const b = open[pick(open.length)];
    if (a !== b && orderOf(a, b) < 3) addBond(a, b, 1);
  }
  const charges: number[] = elements.map(() => 0);
  if (random() < 0.15) {
    const open = openAtoms();
    if (open.length > 0) {
      const nitrogen = elements.push([7, 3]) - 1;
      elements.push([8, 2], [8, 2]);
      free.push(4, 2, 1);
      charges.push(1, 0, -1);
      addBond(open[pick(open.length)], nitrogen, 1);
      addBond(nitrogen, nitrogen + 1, 2);
      addBond(nitrogen, nitrogen + 2, 1);
    }
  }
  const count = elements.length;
  const bondOrders = new Uint8Array(count * count);
  for (const [key, order] of orders) {
    const [a, b] = key.split(',').map(Number);
    bondOrders[a * count + b] = bondOrders[b * count + a] = order;
  }
  return {
    atomCount: count,
    atomicNumbers: Uint8Array.from(elements, ([atomicNumber]) => atomicNumber),
    hydrogens: Uint8Array.from(free),
    charges: Int8Array.from(charges),
    bondOrders,
  };
}

/** A random order of [0, n): old atom → new atom. */
export function permutationOf(n: number, seed: number): number[] {
  const random = createRandom(seed ^ 0x5bd1e995);
  const order = Array.from({ length: n }, (_, i) => i);
  for (let i = n - 1; i > 0; i--) {
    const j = Math.floor(random() * (i + 1));
    [order[i], order[j]] = [order[j], order[i]];
  }
  return order;
}

/** The same molecule with atom a renamed to `permutation[a]`. */
export function relabelGraph(graph: MolecularGraph, permutation: readonly number[]): MolecularGraph {
  const n = graph.atomCount;
  const result = {
    atomCount: n,
    atomicNumbers: new Uint8Array(n),
    hydrogens: new Uint8Array(n),
    charges: new Int8Array(n),
    bondOrders: new Uint8Array(n * n),
  };
  for (let a = 0; a < n; a++) {
    result.atomicNumbers[permutation[a]] = graph.atomicNumbers[a];
    result.hydrogens[permutation[a]] = graph.hydrogens[a];
    result.charges[permutation[a]] = graph.charges[a];
    for (let b = 0; b < n; b++) result.bondOrders[permutation[a] * n + permutation[b]] = graph.bondOrders[a * n + b];
  }
  return result;
}
