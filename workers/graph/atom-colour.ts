import type { MolecularGraph } from '../../shared/types/molecular-graph.js';

const ELEMENT_RANK: Readonly<Record<number, number>> = { 6: 0, 7: 1, 8: 2, 9: 3, 14: 4, 15: 5, 16: 6, 17: 7, 35: 8, 53: 9 };

/** Element, hydrogens (0–4) and charge (−1–1) of an atom as one number below 0x200, the same in every process. */
export function atomColour(graph: MolecularGraph, atom: number): number {
  return ELEMENT_RANK[graph.atomicNumbers[atom]] * 24 + graph.hydrogens[atom] * 4 + graph.charges[atom] + 1;
}
