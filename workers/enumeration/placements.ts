import type { MolecularGraph } from '../../shared/types/molecular-graph.js';
import { canonicalForm } from '../graph/canonical.js';
import { atomColour } from '../graph/atom-colour.js';
import type { AtomDemand } from './problem.js';
import { RESONANT_BOND, type UnitKind } from './units.js';

/** Atoms of one unit in a molecule, in the order of the unit's atoms. */
type Placement = readonly number[];

/** Bit added to the label of a bond inside a placed unit. */
const INSIDE = 8;

/**
 * Finds all placements of a unit: every atom with its element, hydrogens and charge, bonds between its atoms exactly
 * the unit's (a resonant bond may be single or double), and as many bonds of each order to other heavy atoms as it has
 * attachment points. One placement for each set of atoms.
 */
export function findPlacements(graph: MolecularGraph, unit: UnitKind): Placement[] {
  const n = graph.atomCount;
  const size = unit.graph.atomCount;
  const order = unit.searchOrder;
  const image = new Array<number>(size).fill(-1);
  const used = new Uint8Array(n);
  const found: Placement[] = [];

  const fits = (atom: number, vertex: number): boolean => {
    if (used[vertex] === 1) return false;
    if (graph.atomicNumbers[vertex] !== unit.graph.atomicNumbers[atom]) return false;
    if (graph.hydrogens[vertex] !== unit.graph.hydrogens[atom] || graph.charges[vertex] !== unit.graph.charges[atom]) return false;
    for (let other = 0; other < size; other++) {
      if (image[other] === -1) continue;
      const label = unit.labels[atom * size + other];
      const bond = graph.bondOrders[vertex * n + image[other]];
      if (label === RESONANT_BOND ? bond !== 1 && bond !== 2 : bond !== label) return false;
    }
    return true;
  };
  const isClosed = (): boolean => {
    for (let atom = 0; atom < size; atom++) {
      let one = 0;
      let two = 0;
      let three = 0;
      const row = image[atom] * n;
      for (let v = 0; v < n; v++) {
        const bond = graph.bondOrders[row + v];
        if (bond === 0 || used[v] === 1) continue;
        if (bond === 1) one++;
        else if (bond === 2) two++;
        else three++;
      }
      const quota = unit.bondQuota;
      if (one !== quota[4 * atom + 1] || two !== quota[4 * atom + 2] || three !== quota[4 * atom + 3]) return false;
    }
    return true;
  };
  const place = (k: number): void => {
    if (k === size) {
      if (!isClosed()) return;
      if (!found.some((placement) => placement.every((vertex) => used[vertex] === 1))) found.push([...image]);
      return;
    }
    const atom = order[k].atom;
    const anchor = order[k].anchor === -1 ? -1 : image[order[k].anchor];
    for (let vertex = 0; vertex < n; vertex++) {
      if (anchor !== -1 && graph.bondOrders[anchor * n + vertex] === 0) continue;
      if (!fits(atom, vertex)) continue;
      image[atom] = vertex;
      used[vertex] = 1;
      place(k + 1);
      used[vertex] = 0;
      image[atom] = -1;
    }
  };
  place(0);
  return found;
}

export interface PlacedKind {
  readonly kind: number;
  readonly vertices: Placement;
}

/** Lists every way to place all units on disjoint atoms so that the one-atom demands hold on the rest. */
export function listPlacementSets(graph: MolecularGraph, units: readonly UnitKind[], demands: readonly AtomDemand[]): PlacedKind[][] {
  const available = units.map((unit) => findPlacements(graph, unit));
  const used = new Uint8Array(graph.atomCount);
  const chosen: PlacedKind[] = [];
  const sets: PlacedKind[][] = [];
  const choose = (kind: number, copy: number, from: number): void => {
    if (kind === units.length) {
      if (meetsDemands(graph, demands, used)) sets.push([...chosen]);
      return;
    }
    if (copy === units[kind].count) {
      choose(kind + 1, 0, 0);
      return;
    }
    const list = available[kind];
    for (let k = from; k <= list.length - (units[kind].count - copy); k++) {
      const vertices = list[k];
      if (vertices.some((vertex) => used[vertex] === 1)) continue;
      for (const vertex of vertices) used[vertex] = 1;
      chosen.push({ kind, vertices });
      choose(kind, copy + 1, k + 1);
      chosen.pop();
      for (const vertex of vertices) used[vertex] = 0;
    }
  };
  choose(0, 0, 0);
  return sets;
}

/** Do enough atoms outside the units meet each one-atom fragment? An atom meets at most one of them. */
export function meetsDemands(graph: MolecularGraph, demands: readonly AtomDemand[], used: Uint8Array): boolean {
  const n = graph.atomCount;
  for (const demand of demands) {
    let met = 0;
    for (let atom = 0; atom < n; atom++) {
      if (used[atom] === 1 || graph.atomicNumbers[atom] !== demand.atomicNumber) continue;
      if (graph.hydrogens[atom] !== demand.hydrogens || graph.charges[atom] !== 0) continue;
      const wanted = [0, 0, 0, 0];
      for (const order of demand.orders) wanted[order]++;
      for (let other = 0; other < n; other++) {
        const bond = graph.bondOrders[atom * n + other];
        if (bond !== 0) wanted[bond]--;
      }
      if (wanted[1] === 0 && wanted[2] === 0 && wanted[3] === 0) met++;
    }
    if (met < demand.count) return false;
  }
  return true;
}

/** Canonical code of a molecule with its placed units: equal exactly for isomorphic pairs. */
export function placementCode(graph: MolecularGraph, units: readonly UnitKind[], placements: readonly PlacedKind[]): Uint16Array {
  const n = graph.atomCount;
  const colours = new Uint16Array(n);
  for (let atom = 0; atom < n; atom++) colours[atom] = atomColour(graph, atom);
  const edges = graph.bondOrders.slice();
  for (const { kind, vertices } of placements) {
    const { labels, graph: inner } = units[kind];
    const size = inner.atomCount;
    for (let i = 0; i < size; i++) {
      colours[vertices[i]] += (kind + 1) * 0x400;
      for (let j = 0; j < size; j++) {
        if (labels[i * size + j] !== 0) edges[vertices[i] * n + vertices[j]] = labels[i * size + j] | INSIDE;
      }
    }
  }
  return canonicalForm(n, colours, edges).code;
}

/** Canonical code of a molecule in this Kekulé form. */
export function constitutionCode(graph: MolecularGraph, bondOrders: Uint8Array = graph.bondOrders): Uint16Array {
  const colours = Uint16Array.from({ length: graph.atomCount }, (_, atom) => atomColour(graph, atom));
  return canonicalForm(graph.atomCount, colours, bondOrders).code;
}
