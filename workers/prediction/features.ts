import type { StructureAnalysis } from '../graph/analysis.js';
import { MAX_ATOMS, NEIGHBOUR_STRIDE } from '../graph/analysis.js';
import { ATOM_GROUP_COUNT, ATOM_GROUPS, ATOM_TYPE_COUNT, ATOM_TYPES, GROUP_OF_TYPE } from './atom-types.js';
import { MODE_CHAIN, MODE_PI, MODE_RING } from './shift-classes.js';

/*
 * Surroundings of an observed atom as a list of terms, each an offset into a table row of TERM_COUNT numbers:
 *
 *   [0, SHELL_TERMS)     a substituent: distance 1-4 (α β γ δ) × path × type
 *   [RING_START, …)      smallest ring of the observed atom × its ring bonds
 *   [PAIR_START, …)      two α substituents on the same atom, by group, unordered
 *   [CHAIN_START, …)     an α and a β substituent bonded to each other, by group
 *   BASE_TERM            once for every atom
 */
export const MAX_DISTANCE = 4;
/**
 * Paths. Chain: 0 over saturated carbon only, 1 past a heteroatom, 2 past an unsaturated carbon. π: 0 own side, 1 over
 * the multiple bond, 2 own side past a heteroatom, 3 own side past an unsaturated carbon. Ring: 0 ring atom, 1 on a
 * ring atom (ipso, ortho, meta, para by distance), 2 farther out.
 */
export const PATH_COUNT = 4;
const SHELL_TERMS = MAX_DISTANCE * PATH_COUNT * ATOM_TYPE_COUNT;
const RING_START = SHELL_TERMS;
const RING_SIZES = 7;
const RING_BOND_KINDS = 3;
const PAIR_START = RING_START + RING_SIZES * RING_BOND_KINDS;
const PAIR_TERMS = (ATOM_GROUP_COUNT * (ATOM_GROUP_COUNT + 1)) / 2;
const CHAIN_START = PAIR_START + PAIR_TERMS;
export const BASE_TERM = CHAIN_START + ATOM_GROUP_COUNT * ATOM_GROUP_COUNT;
export const TERM_COUNT = BASE_TERM + 1;

/** Bound on the terms of one atom: every other atom once, a ring term, pairs and chains of at most 6 α and 5 β each. */
export const MAX_TERMS = MAX_ATOMS + 2 + 15 + 36;

const GREEK = ['α', 'β', 'γ', 'δ'];
const SIZE_NAMES = ['0', '3', '4', '5', '6', '7', '8+'];

/** Readable name of a term, such as `β0 OH:alkyl`, `ring 5/2`, `O&O`, `O>acyl`; unique, used as key in tables. */
export function termName(term: number): string {
  if (term === BASE_TERM) return 'base';
  if (term < RING_START) {
    const type = ATOM_TYPES[term % ATOM_TYPE_COUNT];
    const shell = Math.floor(term / ATOM_TYPE_COUNT);
    return `${GREEK[Math.floor(shell / PATH_COUNT)]}${shell % PATH_COUNT} ${type}`;
  }
  if (term < PAIR_START) {
    const ring = term - RING_START;
    return `ring ${SIZE_NAMES[Math.floor(ring / RING_BOND_KINDS)]}/${2 + (ring % RING_BOND_KINDS)}`;
  }
  if (term < CHAIN_START) {
    for (let high = 0, k = term - PAIR_START; ; high++) {
      if (k <= high) return `${ATOM_GROUPS[k]}&${ATOM_GROUPS[high]}`;
      k -= high + 1;
    }
  }
  const chain = term - CHAIN_START;
  return `${ATOM_GROUPS[Math.floor(chain / ATOM_GROUP_COUNT)]}>${ATOM_GROUPS[chain % ATOM_GROUP_COUNT]}`;
}

/** Term numbers by name. */
export const TERM_BY_NAME: ReadonlyMap<string, number> = new Map(Array.from({ length: TERM_COUNT }, (_, term) => [termName(term), term]));

/** Offset of a substituent term. @param distance - 1 to 4 bonds. */
export function shellTerm(distance: number, path: number, type: number): number {
  return ((distance - 1) * PATH_COUNT + path) * ATOM_TYPE_COUNT + type;
}

/** Working arrays of {@link fillTerms}; made once a predictor. */
export interface TermScratch {
  readonly queue: Uint8Array;
  readonly distance: Uint8Array;
  readonly path: Uint8Array;
}
export function createTermScratch(maxAtoms: number = MAX_ATOMS): TermScratch {
  return { queue: new Uint8Array(maxAtoms), distance: new Uint8Array(maxAtoms), path: new Uint8Array(maxAtoms) };
}

/**
 * Lists the terms of one observed atom.
 *
 * @param types - atom types of the structure, read only.
 * @param mode - how paths are told apart, see shift-classes.
 * @param scratch - overwritten.
 * @param terms - receives the offsets, room for MAX_TERMS; a term can occur several times.
 * @returns how many terms were written.
 */
export function fillTerms(
  analysis: StructureAnalysis,
  types: Uint8Array,
  atom: number,
  mode: number,
  scratch: TermScratch,
  terms: Int32Array,
): number {
  const { graph, neighbours, degrees, aromaticBonds, hybridisation, smallestRingOfAtom, ringBondCounts } = analysis;
  const { atomCount: n, atomicNumbers, bondOrders } = graph;
  const { queue, distance, path } = scratch;
  let count = 0;
  terms[count++] = BASE_TERM;
  const size = smallestRingOfAtom[atom];
  if (size > 0) {
    const sizeKind = size > 7 ? 6 : size - 2;
    const bonds = ringBondCounts[atom];
    terms[count++] = RING_START + sizeKind * RING_BOND_KINDS + (bonds > 3 ? 2 : bonds - 2);
  }
  distance.fill(0, 0, n);
  // Distances are kept one too high, so that 0 means "not seen yet".
  distance[atom] = 1;
  queue[0] = atom;
  let tail = 1;
  const row = atom * n;
  const base = atom * NEIGHBOUR_STRIDE;
  for (let k = 0; k < degrees[atom]; k++) {
    const b = neighbours[base + k];
    distance[b] = 2;
    path[b] = mode === MODE_RING ? 1 - aromaticBonds[row + b] : mode === MODE_PI && bondOrders[row + b] > 1 ? 1 : 0;
    queue[tail++] = b;
    terms[count++] = path[b] * ATOM_TYPE_COUNT + types[b];
  }
  // Invariant: atoms of one distance are all in the queue, with their final paths, before the first of them is expanded.
  for (let head = 1; head < tail; head++) {
    const u = queue[head];
    const next = distance[u] + 1;
    if (next > MAX_DISTANCE + 1) break;
    const from = path[u];
    const isSaturated = atomicNumbers[u] === 6 && hybridisation[u] === 3;
    let onward = from;
    if (mode === MODE_CHAIN) {
      if (from === 0 && !isSaturated) onward = atomicNumbers[u] === 6 ? 2 : 1;
    } else if (mode === MODE_PI) {
      if (from === 0 && !isSaturated) onward = atomicNumbers[u] === 6 ? 3 : 2;
    } else if (from > 0) onward = 2;
    for (let k = 0; k < degrees[u]; k++) {
      const v = neighbours[u * NEIGHBOUR_STRIDE + k];
      const way = mode === MODE_RING && from === 0 ? 1 - aromaticBonds[u * n + v] : onward;
      if (distance[v] === 0) {
        distance[v] = next;
        path[v] = way;
        queue[tail++] = v;
      } else if (distance[v] === next && way < path[v]) path[v] = way;
    }
  }
  for (let i = 1 + degrees[atom]; i < tail; i++) {
    const v = queue[i];
    terms[count++] = ((distance[v] - 2) * PATH_COUNT + path[v]) * ATOM_TYPE_COUNT + types[v];
  }
  for (let k = 0; k < degrees[atom]; k++) {
    const b = neighbours[base + k];
    const group = GROUP_OF_TYPE[types[b]];
    for (let m = 0; m < k; m++) {
      const other = GROUP_OF_TYPE[types[neighbours[base + m]]];
      const low = group < other ? group : other;
      const high = group < other ? other : group;
      terms[count++] = PAIR_START + (high * (high + 1)) / 2 + low;
    }
    if (mode === MODE_RING && aromaticBonds[row + b] === 1) continue;
    for (let m = 0; m < degrees[b]; m++) {
      const c = neighbours[b * NEIGHBOUR_STRIDE + m];
      if (c !== atom) terms[count++] = CHAIN_START + group * ATOM_GROUP_COUNT + GROUP_OF_TYPE[types[c]];
    }
  }
  return count;
}
