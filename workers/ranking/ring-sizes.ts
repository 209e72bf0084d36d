import type { EvidenceOptions } from '../../shared/schemas/evidence.js';
import type { StructureAnalysis } from '../graph/analysis.js';

export const RING_TOO_SMALL = 'ringTooSmall';
export const RING_TOO_LARGE = 'ringTooLarge';
export type RingSizeReason = typeof RING_TOO_SMALL | typeof RING_TOO_LARGE;

/**
 * Tests every ring of a minimum cycle basis against the size limits. The sizes in such a basis are the same whichever
 * basis is taken; the smallest is that of the smallest ring of any atom.
 *
 * @returns null when all rings fit.
 */
export function checkRingSizes(structure: StructureAnalysis, limits: EvidenceOptions['ringSizes']): RingSizeReason | null {
  const n = structure.graph.atomCount;
  let ringBonds = 0;
  let ringAtoms = 0;
  let largest = 0;
  for (let a = 0; a < n; a++) {
    const size = structure.smallestRingOfAtom[a];
    if (size === 0) continue;
    if (size < limits.min) return RING_TOO_SMALL;
    if (size > largest) largest = size;
    ringAtoms++;
    ringBonds += structure.ringBondCounts[a];
  }
  if (limits.max === null || ringAtoms === 0) return null;
  // The smallest ring through an atom belongs to every minimum cycle basis, up to rings of the same size.
  if (largest > limits.max) return RING_TOO_LARGE;
  // Two ring bonds at every ring atom: no two rings share an atom, so each atom's smallest ring is its only one.
  if (ringBonds === 2 * ringAtoms) return null;
  for (const ring of structure.rings) if (ring.length > limits.max) return RING_TOO_LARGE;
  return null;
}
