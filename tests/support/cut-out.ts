import { elementOf } from '../../shared/chemistry/elements.js';
import type { MolecularGraph } from '../../shared/types/molecular-graph.js';

/** A connected set of atoms cut out of a molecule, written as the SMILES of a fragment and as SMARTS for the matcher. */
export interface Cut {
  smiles: string;
  smarts: string;
  /** Per written atom, in the order of the text: orders of the bonds that leave the cut, rising. */
  quotas: string[];
}

export function cutOut(graph: MolecularGraph, picks: readonly number[], wanted: number): Cut {
  const n = graph.atomCount;
  const inside = [picks[0] % n];
  for (let k = 1; k < wanted; k++) {
    const border = Array.from({ length: n }, (_, v) => v).filter(
      (v) => !inside.includes(v) && inside.some((u) => graph.bondOrders[u * n + v] > 0),
    );
    if (border.length === 0) break;
    inside.push(border[picks[k] % border.length]);
  }
  const bond = (order: number): string => ['', '-', '=', '#'][order];
  // Written as a tree with ring closures for the rest of the bonds.
  const closures = new Map<string, number>();
  const done = new Set<number>();
  const treeBond = new Set<string>();
  const pair = (a: number, b: number): string => (a < b ? `${a},${b}` : `${b},${a}`);
  const grow = (atom: number): void => {
    done.add(atom);
    for (const next of inside) {
      if (graph.bondOrders[atom * n + next] === 0 || done.has(next)) continue;
      treeBond.add(pair(atom, next));
      grow(next);
    }
  };
  grow(inside[0]);
  for (const a of inside)
    for (const b of inside)
      if (a < b && graph.bondOrders[a * n + b] > 0 && !treeBond.has(pair(a, b))) closures.set(pair(a, b), closures.size + 1);
  const written: number[] = [];
  const write = (atom: number, from: number, asSmarts: boolean): string => {
    written.push(atom);
    const h = graph.hydrogens[atom];
    let degree = 0;
    for (let v = 0; v < n; v++) if (graph.bondOrders[atom * n + v] > 0) degree++;
    const symbol = elementOf(graph.atomicNumbers[atom]);
    const charge = ['-', '', '+'][graph.charges[atom] + 1];
    let text = asSmarts
      ? `[#${symbol.atomicNumber};H${h};D${degree};${charge === '' ? '+0' : charge}]`
      : `[${symbol.symbol}${h === 0 ? '' : h === 1 ? 'H' : `H${h}`}${charge}]`;
    for (const [key, number] of closures) {
      const [a, b] = key.split(',').map(Number);
      if (a === atom || b === atom) text += `${bond(graph.bondOrders[a * n + b])}${number}`;
    }
    if (!asSmarts) {
      for (let v = 0; v < n; v++) {
        const order = graph.bondOrders[atom * n + v];
        if (order > 0 && !inside.includes(v)) text += `(${bond(order)}*)`;
      }
    }
    for (const next of inside) {
      if (next === from || !treeBond.has(pair(atom, next)) || graph.bondOrders[atom * n + next] === 0) continue;
      text += `(${bond(graph.bondOrders[atom * n + next])}${write(next, atom, asSmarts)})`;
    }
    return text;
  };
  const smiles = write(inside[0], -1, false);
  written.length = 0;
  const smarts = write(inside[0], -1, true);
  return { smiles, smarts, quotas: written.map((atom) => outsideOrders(graph, atom, inside)) };
}

/** Orders of the bonds from an atom to atoms outside a set. */
export function outsideOrders(graph: MolecularGraph, atom: number, inside: readonly number[]): string {
  const orders: number[] = [];
  for (let v = 0; v < graph.atomCount; v++) {
    const order = graph.bondOrders[atom * graph.atomCount + v];
    if (order > 0 && !inside.includes(v)) orders.push(order);
  }
  return orders.sort().join();
}
