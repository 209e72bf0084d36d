import type { MolecularGraph } from '../../shared/types/molecular-graph.js';
import { perceiveAromaticity } from './aromaticity.js';
import { findRings } from './rings.js';

/** Stride of {@link StructureAnalysis.neighbours}; no supported element has more than six bonds. */
export const NEIGHBOUR_STRIDE = 8;

/** Most heavy atoms of a structure (DESIGN.md 4, bad input above it). */
export const MAX_ATOMS = 40;

/**
 * What prediction, equivalence and ranking all need to know of one constitution, worked out once.
 * The arrays belong to the scratch: they may be longer than stated and are overwritten by the next analysis.
 */
export interface StructureAnalysis {
  readonly graph: MolecularGraph;
  /** Heavy-atom neighbours of atom a: `neighbours[a * NEIGHBOUR_STRIDE + k]`, k in [0, degrees[a]), ascending. */
  readonly neighbours: Uint8Array;
  /** Heavy-atom neighbours per atom, length n. */
  readonly degrees: Uint8Array;
  /** 1 for each aromatic atom, length n. */
  readonly aromaticAtoms: Uint8Array;
  /** n × n, 1 for each aromatic bond. */
  readonly aromaticBonds: Uint8Array;
  /** Size of the smallest ring through the atom, 0 outside rings; length n. */
  readonly smallestRingOfAtom: Uint8Array;
  /** n × n, size of the smallest ring through the bond, 0 for bonds outside rings and for pairs without a bond. */
  readonly smallestRingOfBond: Uint8Array;
  /** Ring bonds per atom, length n: 2 in a plain ring, 3 and more at a fusion, spiro or bridgehead atom. */
  readonly ringBondCounts: Uint8Array;
  /** 1 = sp, 2 = sp2 (aromatic atoms included), 3 = sp3 and everything else; length n. */
  readonly hybridisation: Uint8Array;
  /** Relevant rings, atoms in ring order; found on first use, because structures that cannot be aromatic rarely need them. */
  readonly rings: readonly (readonly number[])[];
}

const NO_RINGS: readonly (readonly number[])[] = [];

/** Reusable storage of {@link analyseStructure}; it is the analysis it returns. */
export class AnalysisScratch implements StructureAnalysis {
  graph: MolecularGraph;
  readonly neighbours: Uint8Array;
  readonly degrees: Uint8Array;
  aromaticAtoms: Uint8Array;
  aromaticBonds: Uint8Array;
  readonly smallestRingOfAtom: Uint8Array;
  readonly smallestRingOfBond: Uint8Array;
  readonly ringBondCounts: Uint8Array;
  readonly hybridisation: Uint8Array;
  readonly noAromaticAtoms: Uint8Array;
  readonly noAromaticBonds: Uint8Array;
  /** 1 while the atom is in the 2-core: the graph left after taking off end atoms again and again. */
  readonly inCore: Uint8Array;
  readonly coreDegrees: Uint8Array;
  readonly queue: Uint8Array;
  readonly depth: Uint8Array;
  private foundRings: readonly (readonly number[])[] | null = null;

  /** @param maxAtoms - largest structure this scratch will be used for. */
  constructor(readonly maxAtoms: number = MAX_ATOMS) {
    const empty = new Uint8Array(0);
    this.graph = { atomCount: 0, atomicNumbers: empty, hydrogens: empty, charges: new Int8Array(0), bondOrders: empty };
    this.neighbours = new Uint8Array(maxAtoms * NEIGHBOUR_STRIDE);
    this.degrees = new Uint8Array(maxAtoms);
    this.smallestRingOfAtom = new Uint8Array(maxAtoms);
    this.smallestRingOfBond = new Uint8Array(maxAtoms * maxAtoms);
    this.ringBondCounts = new Uint8Array(maxAtoms);
    this.hybridisation = new Uint8Array(maxAtoms);
    this.noAromaticAtoms = new Uint8Array(maxAtoms);
    this.noAromaticBonds = new Uint8Array(maxAtoms * maxAtoms);
    this.aromaticAtoms = this.noAromaticAtoms;
    this.aromaticBonds = this.noAromaticBonds;
    this.inCore = new Uint8Array(maxAtoms);
    this.coreDegrees = new Uint8Array(maxAtoms);
    this.queue = new Uint8Array(maxAtoms);
    this.depth = new Uint8Array(maxAtoms);
  }

  get rings(): readonly (readonly number[])[] {
    this.foundRings ??= this.hasRing() ? findRings(this.graph) : NO_RINGS;
    return this.foundRings;
  }

  /** Points the scratch at the next structure; results of the last one are void from here on. */
  reset(graph: MolecularGraph): void {
    this.graph = graph;
    this.foundRings = null;
  }

  private hasRing(): boolean {
    for (let a = 0; a < this.graph.atomCount; a++) if (this.ringBondCounts[a] > 0) return true;
    return false;
  }
}

/**
 * Neighbour lists, ring sizes, aromaticity and hybridisation of one constitution. Exact for rings of any size.
 *
 * @param graph - read only; its arrays may be longer than the atom count asks for. `rings` reads it later, on first use.
 * @param scratch - overwritten and returned. Without one a new scratch is made.
 * @returns the scratch, valid until it is used for the next structure.
 * @throws RangeError if the structure has more atoms than the scratch was made for.
 */
export function analyseStructure(
  graph: MolecularGraph,
  scratch: AnalysisScratch = new AnalysisScratch(graph.atomCount),
): StructureAnalysis {
  const n = graph.atomCount;
  if (n > scratch.maxAtoms) throw new RangeError(`analyseStructure: ${n} atoms, scratch made for ${scratch.maxAtoms}`);
  scratch.reset(graph);
  fillNeighbours(graph, scratch);
  const hasRing = fillRingSizes(n, scratch);
  if (hasRing && mayBeAromatic(n, scratch)) {
    const { atoms, bonds } = perceiveAromaticity(graph, scratch.rings);
    scratch.aromaticAtoms = atoms;
    scratch.aromaticBonds = bonds;
  } else {
    scratch.noAromaticAtoms.fill(0, 0, n);
    scratch.noAromaticBonds.fill(0, 0, n * n);
    scratch.aromaticAtoms = scratch.noAromaticAtoms;
    scratch.aromaticBonds = scratch.noAromaticBonds;
  }
  for (let a = 0; a < n; a++) if (scratch.aromaticAtoms[a] === 1) scratch.hybridisation[a] = 2;
  return scratch;
}

/** Neighbour lists and, from the bond orders alone, hybridisation. */
function fillNeighbours(graph: MolecularGraph, scratch: AnalysisScratch): void {
  const { atomCount: n, bondOrders, atomicNumbers } = graph;
  const { neighbours, degrees, hybridisation } = scratch;
  for (let a = 0; a < n; a++) {
    const row = a * n;
    const base = a * NEIGHBOUR_STRIDE;
    let degree = 0;
    let piBonds = 0;
    for (let b = 0; b < n; b++) {
      const order = bondOrders[row + b];
      if (order === 0) continue;
      neighbours[base + degree++] = b;
      piBonds += order - 1;
    }
    degrees[a] = degree;
    const z = atomicNumbers[a];
    // Sulfoxides, sulfones, phosphates: tetrahedral in spite of the double bonds they are written with.
    const isHypervalent = piBonds > 0 && degree >= 3 && (z === 16 || z === 15);
    hybridisation[a] = piBonds === 0 || isHypervalent ? 3 : piBonds === 1 ? 2 : 1;
  }
}

/** Smallest ring through each bond and atom: shortest way round with the bond itself left out, inside the 2-core. */
function fillRingSizes(n: number, scratch: AnalysisScratch): boolean {
  const { neighbours, degrees, smallestRingOfAtom, smallestRingOfBond, ringBondCounts, inCore, coreDegrees, queue, depth } = scratch;
  smallestRingOfAtom.fill(0, 0, n);
  smallestRingOfBond.fill(0, 0, n * n);
  ringBondCounts.fill(0, 0, n);
  let left = n;
  let tail = 0;
  for (let a = 0; a < n; a++) {
    inCore[a] = 1;
    coreDegrees[a] = degrees[a];
    if (degrees[a] <= 1) queue[tail++] = a;
  }
  // Invariant: queue[0, tail) holds each atom at most once, all with at most one core neighbour left.
  for (let head = 0; head < tail; head++) {
    const a = queue[head];
    inCore[a] = 0;
    left--;
    for (let k = 0; k < degrees[a]; k++) {
      const b = neighbours[a * NEIGHBOUR_STRIDE + k];
      if (inCore[b] === 1 && --coreDegrees[b] === 1) queue[tail++] = b;
    }
  }
  if (left === 0) return false;

  for (let a = 0; a < n; a++) {
    if (inCore[a] === 0) continue;
    for (let k = 0; k < degrees[a]; k++) {
      const b = neighbours[a * NEIGHBOUR_STRIDE + k];
      if (b < a || inCore[b] === 0) continue;
      const size = smallestRingThrough(a, b, n, neighbours, degrees, inCore, queue, depth);
      if (size === 0) continue;
      smallestRingOfBond[a * n + b] = size;
      smallestRingOfBond[b * n + a] = size;
      ringBondCounts[a]++;
      ringBondCounts[b]++;
      if (smallestRingOfAtom[a] === 0 || size < smallestRingOfAtom[a]) smallestRingOfAtom[a] = size;
      if (smallestRingOfAtom[b] === 0 || size < smallestRingOfAtom[b]) smallestRingOfAtom[b] = size;
    }
  }
  return true;
}

/** Atoms of the smallest ring through the bond a–b, 0 if the bond is a bridge. Breadth first from a, bond a–b left out. */
function smallestRingThrough(
  a: number,
  b: number,
  n: number,
  neighbours: Uint8Array,
  degrees: Uint8Array,
  inCore: Uint8Array,
  queue: Uint8Array,
  depth: Uint8Array,
): number {
  depth.fill(0, 0, n);
  depth[a] = 1;
  queue[0] = a;
  let tail = 1;
  for (let head = 0; head < tail; head++) {
    const u = queue[head];
    for (let k = 0; k < degrees[u]; k++) {
      const v = neighbours[u * NEIGHBOUR_STRIDE + k];
      if (depth[v] !== 0 || inCore[v] === 0 || (u === a && v === b)) continue;
      if (v === b) return depth[u] + 1;
      depth[v] = depth[u] + 1;
      queue[tail++] = v;
    }
  }
  return 0;
}

/** Cheap necessary test: every atom of an aromatic ring has two ring neighbours that can give π electrons, as saturated carbon cannot. */
function mayBeAromatic(n: number, scratch: AnalysisScratch): boolean {
  const { graph, neighbours, degrees, hybridisation, smallestRingOfBond, ringBondCounts } = scratch;
  const z = graph.atomicNumbers;
  let count = 0;
  for (let a = 0; a < n; a++) {
    if (ringBondCounts[a] === 0 || (z[a] === 6 && hybridisation[a] === 3)) continue;
    let able = 0;
    for (let k = 0; k < degrees[a]; k++) {
      const b = neighbours[a * NEIGHBOUR_STRIDE + k];
      if (smallestRingOfBond[a * n + b] > 0 && (z[b] !== 6 || hybridisation[b] !== 3)) able++;
    }
    if (able >= 2 && ++count >= 3) return true;
  }
  return false;
}
