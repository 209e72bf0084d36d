import type { QueryBondKind, QueryGraph } from '../../shared/chemistry/excluded-pattern.js';
import { NEIGHBOUR_STRIDE, type StructureAnalysis } from './analysis.js';

/** What the matcher looks at: a whole structure, or what is known of a part of one. */
export type MatchedStructure = Pick<StructureAnalysis, 'graph' | 'neighbours' | 'degrees' | 'aromaticAtoms' | 'aromaticBonds'>;

const ANY = -1;
const BOND_CODES: Readonly<Record<QueryBondKind, number>> = { single: 1, double: 2, triple: 3, aromatic: 4, singleOrAromatic: 5, any: 6 };

/**
 * Tells whether a query occurs in a structure: an injective map of the query's atoms, its bonds onto bonds; what else
 * is bonded to them does not matter. Compiled once; `occursIn` allocates nothing and is not re-entrant.
 */
export class SubstructureMatcher {
  /** Query atoms in matching order: each but the first of a component touches an earlier one. */
  private readonly order: Int32Array;
  private readonly atomicNumber: Int32Array;
  private readonly aromatic: Int8Array;
  private readonly hydrogens: Int8Array;
  private readonly minHydrogens: Int8Array;
  private readonly charge: Int8Array;
  /** Position of an earlier atom bonded to it, −1 at the start of a component. */
  private readonly parent: Int32Array;
  /** Bonds to earlier positions: `backAtom`/`backKind` in [backStart[p], backStart[p + 1]). */
  private readonly backStart: Int32Array;
  private readonly backAtom: Int32Array;
  private readonly backKind: Int32Array;
  private readonly image: Int32Array;
  private readonly used = new Uint8Array(256);

  /** @param query - read only, not kept. */
  constructor(query: QueryGraph) {
    const size = query.atoms.length;
    const order = matchingOrder(query);
    const position = new Int32Array(size);
    order.forEach((atom, p) => (position[atom] = p));
    this.order = Int32Array.from(order);
    this.atomicNumber = Int32Array.from(order, (a) => query.atoms[a].atomicNumber);
    this.aromatic = Int8Array.from(order, (a) => (query.atoms[a].isAromatic === null ? ANY : query.atoms[a].isAromatic ? 1 : 0));
    this.hydrogens = Int8Array.from(order, (a) => query.atoms[a].hydrogens ?? ANY);
    this.minHydrogens = Int8Array.from(order, (a) => query.atoms[a].minHydrogens);
    // Charges of −1 occur, so "any" needs a value of its own.
    this.charge = Int8Array.from(order, (a) => query.atoms[a].charge ?? 100);
    const back = order.map((atom, p) =>
      query.bonds
        .filter(({ from, to }) => (from === atom && position[to] < p) || (to === atom && position[from] < p))
        .map(({ from, to, kind }) => ({ atom: position[from === atom ? to : from], kind: BOND_CODES[kind] })),
    );
    this.parent = Int32Array.from(back, (bonds) => bonds[0]?.atom ?? -1);
    this.backStart = new Int32Array(size + 1);
    back.forEach((bonds, p) => (this.backStart[p + 1] = this.backStart[p] + bonds.length));
    this.backAtom = Int32Array.from(back.flat(), ({ atom }) => atom);
    this.backKind = Int32Array.from(back.flat(), ({ kind }) => kind);
    this.image = new Int32Array(size);
  }

  /** @param structure - read only. */
  occursIn(structure: MatchedStructure): boolean {
    this.used.fill(0, 0, structure.graph.atomCount);
    return this.place(0, structure);
  }

  /** Atoms of the first occurrence in the order of the query, null if there is none. */
  findIn(structure: MatchedStructure): number[] | null {
    if (!this.occursIn(structure)) return null;
    const atoms = new Array<number>(this.image.length);
    this.order.forEach((queryAtom, p) => (atoms[queryAtom] = this.image[p]));
    return atoms;
  }

  /** Invariant: positions [0, p) have images that fit one another. Recursion is as deep as the query has atoms. */
  private place(p: number, s: MatchedStructure): boolean {
    if (p === this.image.length) return true;
    const parent = this.parent[p];
    const base = parent === -1 ? 0 : this.image[parent] * NEIGHBOUR_STRIDE;
    const count = parent === -1 ? s.graph.atomCount : s.degrees[this.image[parent]];
    for (let k = 0; k < count; k++) {
      const atom = parent === -1 ? k : s.neighbours[base + k];
      if (this.used[atom] === 1 || !this.fits(p, atom, s)) continue;
      this.image[p] = atom;
      this.used[atom] = 1;
      if (this.place(p + 1, s)) return true;
      this.used[atom] = 0;
    }
    return false;
  }

  private fits(p: number, atom: number, s: MatchedStructure): boolean {
    const { atomicNumbers, hydrogens, charges } = s.graph;
    if (this.atomicNumber[p] !== 0 && this.atomicNumber[p] !== atomicNumbers[atom]) return false;
    if (this.aromatic[p] !== ANY && this.aromatic[p] !== s.aromaticAtoms[atom]) return false;
    if (this.hydrogens[p] !== ANY && this.hydrogens[p] !== hydrogens[atom]) return false;
    if (hydrogens[atom] < this.minHydrogens[p]) return false;
    if (this.charge[p] !== 100 && this.charge[p] !== charges[atom]) return false;
    for (let b = this.backStart[p]; b < this.backStart[p + 1]; b++) {
      if (!isBondOfKind(s, atom, this.image[this.backAtom[b]], this.backKind[b])) return false;
    }
    return true;
  }
}

function isBondOfKind(s: MatchedStructure, a: number, b: number, kind: number): boolean {
  const k = a * s.graph.atomCount + b;
  const order = s.graph.bondOrders[k];
  if (order === 0) return false;
  const isAromatic = s.aromaticBonds[k] === 1;
  if (kind <= 3) return order === kind && !isAromatic;
  if (kind === BOND_CODES.aromatic) return isAromatic;
  return kind === BOND_CODES.any || isAromatic || order === 1;
}

/** Rarest-looking atom of each component first, then breadth first along its bonds. */
function matchingOrder(query: QueryGraph): number[] {
  const size = query.atoms.length;
  const commonness = (atom: number): number => {
    const z = query.atoms[atom].atomicNumber;
    return z === 0 ? 2 : z === 6 ? 1 : 0;
  };
  const starts = Array.from({ length: size }, (_, atom) => atom).sort((a, b) => commonness(a) - commonness(b));
  const order: number[] = [];
  for (const start of starts) {
    if (order.includes(start)) continue;
    const first = order.push(start) - 1;
    for (let head = first; head < order.length; head++) {
      for (const { from, to } of query.bonds) {
        const next = from === order[head] ? to : to === order[head] ? from : -1;
        if (next !== -1 && !order.includes(next)) order.push(next);
      }
    }
  }
  return order;
}
