import type { StructureAnalysis } from '../../graph/analysis.js';
import {
  CARBON,
  findNeighbour,
  hasAcceptor,
  isAcylated,
  isHalogen,
  isHeavyHalogen,
  isHydroxyl,
  isSaturatedCarbon,
  neighbour,
  NITROGEN,
  orderOf,
  OXYGEN,
  type OccurrenceReport,
} from './atom-queries.js';

/** Saturated carbon beside a carbon with two or more halogens, as in chloral hydrate. */
function isHydrateCarbon(s: StructureAnalysis, carbon: number): boolean {
  if (hasAcceptor(s, carbon)) return true;
  for (let k = 0; k < s.degrees[carbon]; k++) {
    const b = neighbour(s, carbon, k);
    if (s.graph.atomicNumbers[b] !== CARBON) continue;
    let halogens = 0;
    for (let l = 0; l < s.degrees[b]; l++) if (isHalogen(s.graph.atomicNumbers[neighbour(s, b, l)])) halogens++;
    if (halogens >= 2) return true;
  }
  return false;
}

function countHydroxyls(s: StructureAnalysis, carbon: number): number {
  let count = 0;
  for (let k = 0; k < s.degrees[carbon]; k++) if (isHydroxyl(s, neighbour(s, carbon, k))) count++;
  return count;
}

function countSingleBondedOxygens(s: StructureAnalysis, carbon: number): number {
  let count = 0;
  for (let k = 0; k < s.degrees[carbon]; k++) {
    const b = neighbour(s, carbon, k);
    if (s.graph.atomicNumbers[b] === OXYGEN && orderOf(s, carbon, b) === 1) count++;
  }
  return count;
}

export function findGeminalDiols(s: StructureAnalysis, report: OccurrenceReport): number {
  let count = 0;
  for (let a = 0; a < s.graph.atomCount; a++) {
    if (!isSaturatedCarbon(s, a) || countHydroxyls(s, a) < 2 || isHydrateCarbon(s, a)) continue;
    count++;
    report?.([a]);
  }
  return count;
}

/** Carbon with OH and OR; ring forms with the ring oxygen in a 5- or 6-membered ring (sugars) are free. */
export function findHemiacetals(s: StructureAnalysis, report: OccurrenceReport): number {
  const n = s.graph.atomCount;
  let count = 0;
  for (let a = 0; a < n; a++) {
    if (!isSaturatedCarbon(s, a) || countHydroxyls(s, a) !== 1 || countSingleBondedOxygens(s, a) !== 2 || isHydrateCarbon(s, a)) continue;
    let inSugarRing = false;
    for (let k = 0; k < s.degrees[a]; k++) {
      const b = neighbour(s, a, k);
      const size = s.smallestRingOfBond[a * n + b];
      if (s.graph.atomicNumbers[b] === OXYGEN && (size === 5 || size === 6)) inSugarRing = true;
    }
    if (inSugarRing) continue;
    count++;
    report?.([a]);
  }
  return count;
}

/** OH and a basic nitrogen on one carbon; N-hydroxymethyl amides are isolable. */
export function findGeminalAminoAlcohols(s: StructureAnalysis, report: OccurrenceReport): number {
  let count = 0;
  for (let a = 0; a < s.graph.atomCount; a++) {
    if (!isSaturatedCarbon(s, a) || countHydroxyls(s, a) === 0) continue;
    const nitrogen = findNeighbour(s, a, NITROGEN, 1);
    if (nitrogen === -1 || isAcylated(s, nitrogen) || s.graph.charges[nitrogen] !== 0 || s.aromaticAtoms[nitrogen] === 1) continue;
    count++;
    report?.([a]);
  }
  return count;
}

export function findGeminalDiamines(s: StructureAnalysis, report: OccurrenceReport): number {
  let count = 0;
  for (let a = 0; a < s.graph.atomCount; a++) {
    if (!isSaturatedCarbon(s, a)) continue;
    let amines = 0;
    let withHydrogen = false;
    for (let k = 0; k < s.degrees[a]; k++) {
      const b = neighbour(s, a, k);
      if (s.graph.atomicNumbers[b] !== NITROGEN || s.graph.charges[b] !== 0 || s.aromaticAtoms[b] === 1 || isAcylated(s, b)) continue;
      amines++;
      if (s.graph.hydrogens[b] > 0) withHydrogen = true;
    }
    if (amines < 2 || !withHydrogen) continue;
    count++;
    report?.([a]);
  }
  return count;
}

/** C(OH)(OR)2, C(OH)2OR or C(OH)3; the ortho esters C(OR)3 are stable. */
export function findOrthoacids(s: StructureAnalysis, report: OccurrenceReport): number {
  let count = 0;
  for (let a = 0; a < s.graph.atomCount; a++) {
    if (!isSaturatedCarbon(s, a) || countSingleBondedOxygens(s, a) < 3 || countHydroxyls(s, a) === 0) continue;
    count++;
    report?.([a]);
  }
  return count;
}

/**
 * Halogen on the saturated carbon of an alcohol (any halogen), ether or amine (Cl, Br, I: fluoroethers such as OCF3 are
 * stable). Acyloxy and acylamino groups hold the halogen; nitro is no amine.
 */
export function findAlphaHaloHeteroatoms(s: StructureAnalysis, report: OccurrenceReport): number {
  const { atomCount: n, atomicNumbers, charges } = s.graph;
  let count = 0;
  for (let a = 0; a < n; a++) {
    if (!isSaturatedCarbon(s, a)) continue;
    let anyHalogen = false;
    let heavyHalogen = false;
    for (let k = 0; k < s.degrees[a]; k++) {
      const z = atomicNumbers[neighbour(s, a, k)];
      if (isHalogen(z)) anyHalogen = true;
      if (isHeavyHalogen(z)) heavyHalogen = true;
    }
    if (!anyHalogen) continue;
    for (let k = 0; k < s.degrees[a]; k++) {
      const b = neighbour(s, a, k);
      const z = atomicNumbers[b];
      if ((z !== OXYGEN && z !== NITROGEN) || charges[b] !== 0) continue;
      if (!isHydroxyl(s, b) && (!heavyHalogen || isAcylated(s, b) || s.aromaticAtoms[b] === 1)) continue;
      count++;
      report?.([a, b]);
    }
  }
  return count;
}
