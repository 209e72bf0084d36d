import type { StructureAnalysis } from '../graph/analysis.js';
import { neighboursOf } from '../graph/automorphism.js';

/*
 * Typical |J| in Hz by path, SCIENCE.md 3.3 (textbook ranges, from memory): middles of the ranges given there. Signs and
 * dihedral angles are not modelled; rings that flip and free chains get the averaged value.
 */
export const GEMINAL_SP3 = 13;
export const GEMINAL_SP2 = 1.5;
const CHAIN = 7;
const RING_CHAIN = 6.5;
const SMALL_RING_CHAIN = 6;
const ALLYLIC_VICINAL = 6.5;
const ALDEHYDE_ALKYL = 2;
const ALDEHYDE_ALKENYL = 7.7;
const DIENE = 10.5;
export const ALKENE_CIS = 10.5;
export const ALKENE_TRANS = 16.5;
/** H–C=C–H in a ring, by ring size 3 to 7. */
const RING_ALKENE: Readonly<Record<number, number>> = { 3: 1.3, 4: 3, 5: 5.5, 6: 9.8, 7: 10.8 };
const ALLYLIC = 1.4;
const PROPARGYLIC = 2.6;
const ORTHO = 8;
const META = 2;
/** Furan 2,4 and the like: below what routine spectra resolve. */
const UNRESOLVED = 0.9;
const HYDROXYL_SLOW = 5;
const AMIDE_SLOW = 5.8;

/** Three-bond coupling between hydrogens on carbon atoms a and b that are bonded to each other. */
export function vicinalCoupling(analysis: StructureAnalysis, a: number, b: number): number {
  const { graph, aromaticBonds, hybridisation, smallestRingOfBond } = analysis;
  const { atomCount: n, bondOrders } = graph;
  if (aromaticBonds[a * n + b] === 1) return aromaticVicinal(analysis, a, b);
  const ring = smallestRingOfBond[a * n + b];
  if (bondOrders[a * n + b] === 2) return ring > 0 && ring < 8 ? RING_ALKENE[ring] : ALKENE_TRANS;
  if (bondOrders[a * n + b] === 3) return 0;
  if (hybridisation[a] === 3 && hybridisation[b] === 3) return ring === 0 ? CHAIN : ring < 5 ? SMALL_RING_CHAIN : RING_CHAIN;
  const aldehydes = (isAldehyde(analysis, a) ? 1 : 0) + (isAldehyde(analysis, b) ? 1 : 0);
  if (hybridisation[a] === 3 || hybridisation[b] === 3) return aldehydes > 0 ? ALDEHYDE_ALKYL : ALLYLIC_VICINAL;
  return aldehydes > 0 ? ALDEHYDE_ALKENYL : DIENE;
}

function isAldehyde(analysis: StructureAnalysis, a: number): boolean {
  const { atomCount: n, atomicNumbers, bondOrders } = analysis.graph;
  return neighboursOf(analysis, a).some((b) => atomicNumbers[b] === 8 && bondOrders[a * n + b] === 2);
}

/** Neighbouring hydrogens of one aromatic ring. */
function aromaticVicinal(analysis: StructureAnalysis, a: number, b: number): number {
  if (analysis.smallestRingOfBond[a * analysis.graph.atomCount + b] !== 5)
    return hasRingNitrogen(analysis, a) || hasRingNitrogen(analysis, b) ? 5 : ORTHO;
  const { atomicNumbers, hydrogens } = analysis.graph;
  const donors = [a, b].flatMap((atom) =>
    neighboursOf(analysis, atom).filter((c) => analysis.aromaticAtoms[c] === 1 && atomicNumbers[c] !== 6),
  );
  const donor = donors.find((c) => atomicNumbers[c] === 8 || atomicNumbers[c] === 16 || hydrogens[c] > 0 || analysis.degrees[c] === 3);
  if (donor === undefined) return 3.5;
  if (atomicNumbers[donor] === 8) return 1.8;
  if (atomicNumbers[donor] === 16) return donors.length > 1 ? 3.3 : 5.2;
  return donors.length > 1 ? 1.5 : 2.6;
}

function hasRingNitrogen(analysis: StructureAnalysis, atom: number): boolean {
  return neighboursOf(analysis, atom).some(
    (c) => analysis.graph.atomicNumbers[c] === 7 && analysis.aromaticBonds[atom * analysis.graph.atomCount + c] === 1,
  );
}

/** Four-bond coupling over the path a–middle–c, 0 when none is worth naming. */
export function longRangeCoupling(analysis: StructureAnalysis, a: number, middle: number, c: number): number {
  const { graph, aromaticBonds, hybridisation, smallestRingOfAtom, aromaticAtoms } = analysis;
  const { atomCount: n, bondOrders, atomicNumbers } = graph;
  if (aromaticBonds[a * n + middle] === 1 && aromaticBonds[middle * n + c] === 1) {
    return smallestRingOfAtom[a] === 6 && smallestRingOfAtom[c] === 6 && smallestRingOfAtom[middle] === 6 ? META : UNRESOLVED;
  }
  if (aromaticAtoms[middle] === 1 || atomicNumbers[middle] !== 6) return 0;
  const first = bondOrders[a * n + middle];
  const second = bondOrders[middle * n + c];
  if ((first === 2 && second === 1 && hybridisation[c] === 3) || (second === 2 && first === 1 && hybridisation[a] === 3)) return ALLYLIC;
  return (first === 3 && hybridisation[c] === 3) || (second === 3 && hybridisation[a] === 3) ? PROPARGYLIC : 0;
}
/**
 * Coupling to a hydrogen on oxygen or nitrogen next to the carbon, where exchange is slow enough to see it: dry
 * DMSO-d6 and acetone-d6 (SCIENCE.md 3.4).
 */
export function exchangeableCoupling(atomicNumber: number): number {
  return atomicNumber === 7 ? AMIDE_SLOW : HYDROXYL_SLOW;
}

/**
 * Coupling of a hydrogen on carbon to fluorine or phosphorus; 0 on paths where none is worth naming.
 *
 * @param bonds - bonds between the nuclei. @param isAromatic - both sit on one aromatic ring.
 */
export function heteroCoupling(atomicNumber: number, bonds: number, isAromatic: boolean): number {
  if (atomicNumber === 9) {
    if (bonds === 2) return 48;
    if (bonds === 3) return isAromatic ? 9 : 16;
    return bonds === 4 && isAromatic ? 5.5 : 0;
  }
  if (atomicNumber === 15) return bonds === 2 ? 14 : bonds === 3 ? 12 : 0;
  return 0;
}
