import type { MolecularGraph } from '../../shared/types/molecular-graph.js';

/** Limits on rings, in atoms, that are kept while a matrix is filled. */
export interface RingLimits {
  /** No smaller ring; 3 = no limit. */
  readonly smallest: number;
  /** No bond whose smallest ring is larger; null = no limit. Necessary for the limit on all rings, not sufficient. */
  readonly largest: number | null;
  /** No triple bond in a smaller ring; 0 = no limit. */
  readonly alkyne: number;
  /** No C=C=C in a smaller ring; 0 = no limit. */
  readonly allene: number;
}

/**
 * One vertex list to fill: unit choices and a hydrogen distribution laid out as rows.
 *
 * Vertices [0, tied) are the open atoms of units with two or more open atoms ("tied": a permutation moves them only
 * unit by unit), vertices [tied, open) are free to change places within their class: open atoms of units with a single
 * one, and single heavy atoms. Atoms [open, n) of the graph are closed: no bond is missing.
 */
export interface FillLayout {
  /** Number of open vertices. */
  readonly open: number;
  readonly tied: number;
  /** Free valence of each open vertex, length `open`. */
  readonly freeValence: Uint8Array;
  /**
   * Prescribed bonds: for an open atom of a unit `bondQuota[4 v + o]` bonds of order o must leave it; for a single
   * atom the entry 4 v is 255 and any orders are allowed that sum up to the free valence.
   */
  readonly bondQuota: Uint8Array;
  /** Class of each vertex; equal classes are contiguous among the free vertices. */
  readonly classOf: Uint16Array;
  /** Unit instance of each open vertex; every single atom is its own. Vertices of one unit never bond outside the unit. */
  readonly unitOf: Uint16Array;
  /**
   * Bit o of entry `FILL_STRIDE i + j`: vertices i and j may share a bond of order o; the same for like vertices, symmetric.
   * null = every order is allowed.
   */
  readonly allowedOrders: Uint8Array | null;
  readonly ringLimits: RingLimits;
  /** All permutations of the tied vertices that keep units whole and respect their automorphisms; identity first. */
  readonly tiedPermutations: readonly Uint8Array[];
  /** Graph with the bonds inside units and all hydrogens; a fill adds its bonds to a copy of the bond orders. */
  readonly base: MolecularGraph;
  /** n × n flags of the bonds inside units whose order differs between Kekulé forms of the unit; null = none. */
  readonly resonantBonds: Uint8Array | null;
  /** Whether leaves are looked at for other Kekulé forms. */
  readonly tellsForms: boolean;
}
