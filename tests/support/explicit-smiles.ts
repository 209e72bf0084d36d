import { elementOf } from '../../shared/chemistry/elements.js';
import type { MolecularGraph } from '../../shared/types/molecular-graph.js';

/**
 * SMILES of a graph, or of a connected part of it, with every atom in brackets and every bond order written: nothing
 * is left to the defaults of a reader. Bonds to atoms outside the part become `*`.
 *
 * @param part - atoms to write; the first comes first.
 */
export function writeExplicitSmiles(graph: MolecularGraph, part?: readonly number[]): string {
  const { atomCount: n, atomicNumbers, hydrogens, charges, bondOrders } = graph;
  const members = part ?? Array.from({ length: n }, (_, atom) => atom);
  const isMember = new Set(members);
  const keyOf = (a: number, b: number): string => (a < b ? `${a}-${b}` : `${b}-${a}`);
  const treeBonds = new Set<string>();
  const place = new Map<number, number>();
  const explore = (a: number): void => {
    place.set(a, place.size);
    for (const b of members) {
      if (bondOrders[a * n + b] === 0 || place.has(b)) continue;
      treeBonds.add(keyOf(a, b));
      explore(b);
    }
  };
  explore(members[0]);

  const closures = new Map<string, number>();
  const bondText = (order: number): string => ['', '-', '=', '#'][order];
  const atomText = (a: number): string => {
    const hydrogenText = hydrogens[a] === 0 ? '' : `H${hydrogens[a]}`;
    const chargeText = charges[a] === 0 ? '' : charges[a] > 0 ? '+' : '-';
    return `[${elementOf(atomicNumbers[a]).symbol}${hydrogenText}${chargeText}]`;
  };
  const write = (a: number, from: number): string => {
    let text = atomText(a);
    const branches: string[] = [];
    for (let b = 0; b < n; b++) {
      const order = bondOrders[a * n + b];
      if (order === 0 || b === from) continue;
      const key = keyOf(a, b);
      if (!isMember.has(b)) branches.push(`(${bondText(order)}*)`);
      else if (treeBonds.has(key)) branches.push(`(${bondText(order)}${write(b, a)})`);
      else if (closures.has(key)) text += `%${String(closures.get(key)).padStart(2, '0')}`;
      else {
        closures.set(key, closures.size + 1);
        text += `${bondText(order)}%${String(closures.size).padStart(2, '0')}`;
      }
    }
    return text + branches.join('');
  };
  return write(members[0], -1);
}
