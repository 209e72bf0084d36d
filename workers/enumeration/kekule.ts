import type { MolecularGraph } from '../../shared/types/molecular-graph.js';
import { perceiveAromaticity, type Aromaticity } from '../graph/aromaticity.js';

/** Largest number of Kekulé forms looked at; fused systems within 40 atoms stay far below. */
const MAX_FORMS = 100_000;

/**
 * Calls back with every Kekulé form that shares the aromatic bonds of the given structure, itself included.
 * A form belongs to the class when perception gives it the same aromatic atoms and bonds and it has the same orders
 * outside them: then both are one constitution in two drawings.
 *
 * @param graph - read only. @param aromaticity - perceived on `graph`.
 * @param visit - gets n × n bond orders in a reused buffer; true ends the listing.
 * @returns true when `visit` ended it.
 */
export function forEachKekuleForm(graph: MolecularGraph, aromaticity: Aromaticity, visit: (bondOrders: Uint8Array) => boolean): boolean {
  if (!aromaticity.hasAromaticRing) return visit(graph.bondOrders);
  const n = graph.atomCount;
  const orders = graph.bondOrders.slice();
  const needsDouble = new Uint8Array(n);
  for (let i = 0; i < n; i++) {
    for (let j = 0; j < n; j++) {
      if (aromaticity.bonds[i * n + j] === 0 || orders[i * n + j] > 2) continue;
      if (orders[i * n + j] === 2) needsDouble[i] = 1;
    }
  }
  for (let i = 0; i < n; i++) {
    for (let j = 0; j < n; j++) {
      if (aromaticity.bonds[i * n + j] === 1 && orders[i * n + j] <= 2 && orders[i * n + j] > 0) orders[i * n + j] = 1;
    }
  }
  let seen = 0;
  const form: MolecularGraph = { ...graph, bondOrders: orders };
  const match = (from: number): boolean => {
    let atom = from;
    while (atom < n && needsDouble[atom] === 0) atom++;
    if (atom === n) {
      if (++seen > MAX_FORMS) throw new Error('too many Kekulé forms in one aromatic system');
      if (sameBonds(perceiveAromaticity(form).bonds, aromaticity.bonds)) return visit(orders);
      return false;
    }
    needsDouble[atom] = 0;
    for (let other = atom + 1; other < n; other++) {
      if (needsDouble[other] === 0 || aromaticity.bonds[atom * n + other] === 0 || orders[atom * n + other] !== 1) continue;
      needsDouble[other] = 0;
      orders[atom * n + other] = orders[other * n + atom] = 2;
      const ended = match(atom + 1);
      orders[atom * n + other] = orders[other * n + atom] = 1;
      needsDouble[other] = 1;
      if (ended) {
        needsDouble[atom] = 1;
        return true;
      }
    }
    needsDouble[atom] = 1;
    return false;
  };
  return match(0);
}

function sameBonds(a: Uint8Array, b: Uint8Array): boolean {
  for (let i = 0; i < a.length; i++) if (a[i] !== b[i]) return false;
  return true;
}
