import { NEIGHBOUR_STRIDE, type StructureAnalysis } from '../../graph/analysis.js';

/** Receives the atoms of each occurrence; null on the hot path, where only their number counts. */
export type OccurrenceReport = ((atoms: readonly number[]) => void) | null;

export const CARBON = 6;
export const NITROGEN = 7;
export const OXYGEN = 8;
export const SULFUR = 16;
const CHLORINE = 17;
const BROMINE = 35;
const IODINE = 53;
const FLUORINE = 9;

export const isHalogen = (z: number): boolean => z === CHLORINE || z === FLUORINE || z === BROMINE || z === IODINE;
export const isHeavyHalogen = (z: number): boolean => z === CHLORINE || z === BROMINE || z === IODINE;

/** k-th heavy neighbour of an atom, 0 ≤ k < degree. */
export const neighbour = (s: StructureAnalysis, atom: number, k: number): number => s.neighbours[atom * NEIGHBOUR_STRIDE + k];

export const orderOf = (s: StructureAnalysis, a: number, b: number): number => s.graph.bondOrders[a * s.graph.atomCount + b];

/** First neighbour of element z (0 = any) bound with the given order, other than `except`; −1 if there is none. */
export function findNeighbour(s: StructureAnalysis, atom: number, z: number, order: number, except = -1): number {
  const degree = s.degrees[atom];
  for (let k = 0; k < degree; k++) {
    const b = neighbour(s, atom, k);
    if (b !== except && (z === 0 || s.graph.atomicNumbers[b] === z) && orderOf(s, atom, b) === order) return b;
  }
  return -1;
}

/** Neighbours of element z bound with the given order. */
export function countNeighbours(s: StructureAnalysis, atom: number, z: number, order: number): number {
  let count = 0;
  const degree = s.degrees[atom];
  for (let k = 0; k < degree; k++) {
    const b = neighbour(s, atom, k);
    if (s.graph.atomicNumbers[b] === z && orderOf(s, atom, b) === order) count++;
  }
  return count;
}

/** Carbon with a double bond to oxygen. */
export const isCarbonyl = (s: StructureAnalysis, atom: number): boolean =>
  s.graph.atomicNumbers[atom] === CARBON && findNeighbour(s, atom, OXYGEN, 2) !== -1;

/** Oxygen with hydrogen on one heavy atom. */
export const isHydroxyl = (s: StructureAnalysis, atom: number): boolean =>
  s.graph.atomicNumbers[atom] === OXYGEN && s.graph.hydrogens[atom] === 1 && s.degrees[atom] === 1;

/** Saturated carbon: four single bonds. */
export const isSaturatedCarbon = (s: StructureAnalysis, atom: number): boolean =>
  s.graph.atomicNumbers[atom] === CARBON && s.hybridisation[atom] === 3;

/** Atom beside a C=O, C=S or sulfonyl group, whose pull makes amines and alcohols tame. */
export function isAcylated(s: StructureAnalysis, atom: number): boolean {
  const degree = s.degrees[atom];
  for (let k = 0; k < degree; k++) {
    const b = neighbour(s, atom, k);
    const z = s.graph.atomicNumbers[b];
    if (z === CARBON && (findNeighbour(s, b, OXYGEN, 2) !== -1 || findNeighbour(s, b, SULFUR, 2) !== -1)) return true;
    if (z === SULFUR && findNeighbour(s, b, OXYGEN, 2) !== -1) return true;
  }
  return false;
}

/** Carbon that carries an electron-withdrawing group through a single bond: C=O, C≡N or nitro. */
export function hasAcceptor(s: StructureAnalysis, atom: number): boolean {
  const degree = s.degrees[atom];
  for (let k = 0; k < degree; k++) {
    const b = neighbour(s, atom, k);
    if (orderOf(s, atom, b) !== 1) continue;
    if (isCarbonyl(s, b)) return true;
    const z = s.graph.atomicNumbers[b];
    if (z === CARBON && findNeighbour(s, b, NITROGEN, 3) !== -1) return true;
    if (z === NITROGEN && s.graph.charges[b] === 1) return true;
  }
  return false;
}
