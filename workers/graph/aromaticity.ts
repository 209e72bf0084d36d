import type { MolecularGraph } from '../../shared/types/molecular-graph.js';
import { findRings } from './rings.js';

/** Which atoms and bonds belong to an aromatic ring. */
export interface Aromaticity {
  /** Length n, 1 = aromatic. */
  readonly atoms: Uint8Array;
  /** n × n, row-major, symmetric, 1 = aromatic bond. */
  readonly bonds: Uint8Array;
  readonly hasAromaticRing: boolean;
}

/** Largest number of fused rings whose union is tried as one system. */
const MAX_FUSED_RINGS = 6;
/** π electrons an atom can give: −1 no candidate. */
const NO_DONOR = -1;

const OUTER_ELECTRONS: Readonly<Record<number, number>> = { 5: 3, 6: 4, 7: 5, 8: 6, 14: 4, 15: 5, 16: 6 };
const DEFAULT_VALENCE: Readonly<Record<number, number>> = { 5: 3, 6: 4, 7: 3, 8: 2, 14: 4, 15: 3, 16: 2 };
/** Pauling order of the elements at hand, for "does the partner pull the electron out of the ring". */
const ELECTRONEGATIVITY: Readonly<Record<number, number>> = {
  5: 2.04,
  6: 2.55,
  7: 3.04,
  8: 3.44,
  9: 3.98,
  14: 1.9,
  15: 2.19,
  16: 2.58,
  17: 3.16,
  35: 2.96,
  53: 2.66,
};

/**
 * Marks aromatic atoms and bonds by Hückel's 4k + 2 rule over rings and unions of fused rings.
 *
 * Every ring atom gives 0, 1 or 2 π electrons by its valence, degree, lone pairs and multiple bonds (an exocyclic
 * double bond to a more electronegative atom takes its electron out of the ring, so that 2-pyridone and quinone-type
 * lactams count as written). Rings are joined when they share exactly one bond; of a union only the bonds that belong
 * to one of its rings are marked, and atoms common to three rings give nothing. This is the counting model that
 * general cheminformatics libraries use for SMILES, chosen so that merged counts can be checked against them.
 * Kekulé forms of one ring get the same marks except in rare strained polycycles.
 *
 * @param graph - one Kekulé form. Read only.
 * @param rings - relevant rings of the graph, atoms in ring order.
 * @see Hückel, Z. Phys. 1931, 70, 204. Electron counting from memory of common practice.
 */
export function perceiveAromaticity(graph: MolecularGraph, rings: readonly (readonly number[])[] = findRings(graph)): Aromaticity {
  const n = graph.atomCount;
  const atoms = new Uint8Array(n);
  const bonds = new Uint8Array(n * n);
  if (rings.length === 0) return { atoms, bonds, hasAromaticRing: false };

  const inRing = new Uint8Array(n * n);
  for (const ring of rings) {
    for (let i = 0; i < ring.length; i++) {
      const a = ring[i]!;
      const b = ring[(i + 1) % ring.length]!;
      inRing[a * n + b] = inRing[b * n + a] = 1;
    }
  }
  const donors = new Int8Array(n).fill(-2);
  const candidates: (readonly number[])[] = [];
  for (const ring of rings) {
    let suitable = ring.length <= 24;
    for (let i = 0; suitable && i < ring.length; i++) {
      const atom = ring[i]!;
      if (donors[atom] === -2) donors[atom] = piElectrons(graph, atom, inRing);
      suitable = donors[atom] !== NO_DONOR;
    }
    if (suitable) candidates.push(ring);
  }
  if (candidates.length === 0) return { atoms, bonds, hasAromaticRing: false };

  const bondSets = candidates.map((ring) =>
    ring.map((atom, i) => {
      const next = ring[(i + 1) % ring.length]!;
      return atom < next ? atom * n + next : next * n + atom;
    }),
  );
  const fusedWith: number[][] = candidates.map(() => []);
  for (let a = 0; a < candidates.length; a++) {
    for (let b = a + 1; b < candidates.length; b++) {
      let shared = 0;
      for (const bond of bondSets[a]!) if (bondSets[b]!.includes(bond)) shared++;
      if (shared === 1) {
        fusedWith[a]!.push(b);
        fusedWith[b]!.push(a);
      }
    }
  }
  let found = false;
  const done = new Uint8Array(candidates.length);
  for (let start = 0; start < candidates.length; start++) {
    if (done[start] === 1) continue;
    const system = [start];
    done[start] = 1;
    for (let head = 0; head < system.length; head++) {
      for (const next of fusedWith[system[head]!]!) {
        if (done[next] === 1) continue;
        done[next] = 1;
        system.push(next);
      }
    }
    if (markSystem(system, candidates, bondSets, fusedWith, donors, atoms, bonds, n)) found = true;
  }
  return { atoms, bonds, hasAromaticRing: found };
}

function markSystem(
  system: readonly number[],
  candidates: readonly (readonly number[])[],
  bondSets: readonly (readonly number[])[],
  fusedWith: readonly (readonly number[])[],
  donors: Int8Array,
  atoms: Uint8Array,
  bonds: Uint8Array,
  n: number,
): boolean {
  const allBonds = new Set<number>();
  for (const ring of system) for (const bond of bondSets[ring]!) allBonds.add(bond);
  const marked = new Set<number>();
  const chosen: number[] = [];
  const timesSeen = new Uint8Array(n);
  let found = false;

  const tryUnion = (): void => {
    if (!isJoined(chosen, fusedWith)) return;
    timesSeen.fill(0);
    for (const ring of chosen) for (const atom of candidates[ring]!) timesSeen[atom]!++;
    let electrons = 0;
    for (let atom = 0; atom < n; atom++) if (timesSeen[atom] === 1 || timesSeen[atom] === 2) electrons += donors[atom]!;
    if (electrons !== 2 && (electrons < 6 || (electrons - 2) % 4 !== 0)) return;
    found = true;
    const count = new Map<number, number>();
    for (const ring of chosen) for (const bond of bondSets[ring]!) count.set(bond, (count.get(bond) ?? 0) + 1);
    for (const ring of chosen) for (const atom of candidates[ring]!) atoms[atom] = 1;
    for (const [bond, times] of count) {
      if (times !== 1) continue;
      marked.add(bond);
      const a = Math.floor(bond / n);
      const b = bond % n;
      bonds[a * n + b] = bonds[b * n + a] = 1;
    }
  };
  const choose = (size: number, from: number): void => {
    if (chosen.length === size) {
      tryUnion();
      return;
    }
    for (let k = from; k <= system.length - (size - chosen.length); k++) {
      chosen.push(system[k]!);
      choose(size, k + 1);
      chosen.pop();
    }
  };
  for (let size = 1; size <= Math.min(system.length, MAX_FUSED_RINGS) && marked.size < allBonds.size; size++) choose(size, 0);
  return found;
}

function isJoined(chosen: readonly number[], fusedWith: readonly (readonly number[])[]): boolean {
  if (chosen.length === 1) return true;
  const reached = [chosen[0]!];
  for (let head = 0; head < reached.length; head++) {
    for (const next of fusedWith[reached[head]!]!) if (chosen.includes(next) && !reached.includes(next)) reached.push(next);
  }
  return reached.length === chosen.length;
}

/** π electrons of a ring atom: 0 (empty p orbital), 1, 2 (lone pair), or NO_DONOR. */
function piElectrons(graph: MolecularGraph, atom: number, inRing: Uint8Array): number {
  const { atomCount: n, atomicNumbers, hydrogens, charges, bondOrders } = graph;
  const element = atomicNumbers[atom]!;
  const valence = DEFAULT_VALENCE[element];
  if (valence === undefined || element > 16) return NO_DONOR;
  const charge = charges[atom]!;
  let degree = 0;
  let orderSum = 0;
  let multipleBonds = 0;
  let outside = -1;
  let ringMultiple = false;
  for (let other = 0; other < n; other++) {
    const order = bondOrders[atom * n + other]!;
    if (order === 0) continue;
    degree++;
    orderSum += order;
    if (order < 2) continue;
    multipleBonds++;
    if (inRing[atom * n + other] === 1) ringMultiple = true;
    else if (outside === -1) outside = other;
  }
  const totalDegree = degree + hydrogens[atom]!;
  if (totalDegree > 3) return NO_DONOR;
  // Valence above the default of the isoelectronic neutral element (N⁺ counts as C) is no ring member.
  const allowed = charge === 0 ? valence : (DEFAULT_VALENCE[element - charge] ?? valence);
  if (orderSum + hydrogens[atom]! > allowed) return NO_DONOR;
  if (orderSum - degree > 1 && multipleBonds > 1) return NO_DONOR;

  const lonePairElectrons = Math.max(OUTER_ELECTRONS[element]! - valence - charge, 0);
  let electrons = valence - totalDegree + lonePairElectrons;
  if (electrons > 1 && orderSum - degree > 1) electrons = 1;
  if (electrons < 0) return NO_DONOR;
  if (electrons === 0) {
    if (outside !== -1) return 0;
    return ringMultiple ? 1 : NO_DONOR;
  }
  const pullsOut = outside !== -1 && ELECTRONEGATIVITY[graph.atomicNumbers[outside]!]! > ELECTRONEGATIVITY[element]!;
  if (electrons === 1) {
    if (outside !== -1) return pullsOut ? 0 : 1;
    if (multipleBonds > 0) return 1;
    return charge === 1 ? 0 : NO_DONOR;
  }
  if (pullsOut) electrons--;
  return electrons % 2 === 1 ? 1 : 2;
}
