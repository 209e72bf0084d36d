import type { MolecularGraph } from '../../shared/types/molecular-graph.js';
import { perceiveAromaticity, type Aromaticity } from '../graph/aromaticity.js';

/** Scratch of {@link hasAlternatingCycle}: atoms whose double bond can still lie in a cycle. */
const hasDouble = new Uint8Array(64);

/**
 * Tells whether a cycle of alternating double and single bonds exists that is not made of `inner` bonds alone.
 * Without one, no other Kekulé form of the structure exists (outside the inner bonds), because two forms differ by
 * disjoint alternating cycles (Berge, Proc. Natl. Acad. Sci. 1957, 43, 842).
 *
 * @param n - atoms. @param bondOrders - n × n. Read only.
 * @param inner - n × n flags of bonds that do not count by themselves, or null.
 */
export function hasAlternatingCycle(n: number, bondOrders: Uint8Array, inner: Uint8Array | null): boolean {
  // A double bond lies in such a cycle only when from both its ends a single bond leads to another double bond that
  // does: peel the others off first, which settles nearly every structure.
  let doubleAtoms = 0;
  for (let i = 0; i < n; i++) {
    hasDouble[i] = 0;
    for (let j = 0; j < n; j++) {
      if (bondOrders[i * n + j] === 2) {
        hasDouble[i] = 1;
        doubleAtoms++;
        break;
      }
    }
  }
  if (doubleAtoms < 4) return false;
  for (let changed = true; changed;) {
    changed = false;
    for (let i = 0; i < n; i++) {
      if (hasDouble[i] === 0) continue;
      let goesOn = false;
      let partnerLeft = false;
      for (let j = 0; j < n; j++) {
        if (hasDouble[j] === 0) continue;
        const order = bondOrders[i * n + j];
        if (order === 1) goesOn = true;
        else if (order === 2) partnerLeft = true;
      }
      if (goesOn && partnerLeft) continue;
      hasDouble[i] = 0;
      changed = true;
    }
  }
  let isEmpty = true;
  for (let i = 0; i < n && isEmpty; i++) isEmpty = hasDouble[i] === 0;
  if (isEmpty) return false;
  const visited = new Uint8Array(n);
  const core = hasDouble.slice(0, n);
  /** Continues over a single bond from `atom`; `target` closes the cycle. */
  const walk = (atom: number, target: number, leftInner: boolean): boolean => {
    for (let next = 0; next < n; next++) {
      if (core[next] === 0 || bondOrders[atom * n + next] !== 1) continue;
      const outside = leftInner || inner === null || inner[atom * n + next] === 0;
      if (next === target && visited[next] === 1) {
        if (outside) return true;
        continue;
      }
      if (visited[next] === 1) continue;
      for (let partner = 0; partner < n; partner++) {
        if (core[partner] === 0 || bondOrders[next * n + partner] !== 2 || visited[partner] === 1) continue;
        visited[next] = visited[partner] = 1;
        const found = walk(partner, target, outside || inner === null || inner[next * n + partner] === 0);
        visited[next] = visited[partner] = 0;
        if (found) return true;
      }
    }
    return false;
  };
  for (let i = 0; i < n; i++) {
    for (let j = i + 1; j < n; j++) {
      if (core[i] === 0 || core[j] === 0 || bondOrders[i * n + j] !== 2) continue;
      visited[i] = visited[j] = 1;
      const found = walk(j, i, inner === null || inner[i * n + j] === 0);
      visited[i] = visited[j] = 0;
      if (found) return true;
    }
  }
  return false;
}

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
