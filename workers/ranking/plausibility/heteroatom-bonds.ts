import type { StructureAnalysis } from '../../graph/analysis.js';
import { CARBON, findNeighbour, isHalogen, neighbour, NITROGEN, orderOf, OXYGEN, SULFUR, type OccurrenceReport } from './atom-queries.js';

/** O–O single bonds outside aromatic rings. */
export function findPeroxides(s: StructureAnalysis, report: OccurrenceReport): number {
  const { atomCount: n, atomicNumbers } = s.graph;
  let count = 0;
  for (let a = 0; a < n; a++) {
    if (atomicNumbers[a] !== OXYGEN) continue;
    for (let k = 0; k < s.degrees[a]; k++) {
      const b = neighbour(s, a, k);
      if (b < a || atomicNumbers[b] !== OXYGEN) continue;
      count++;
      report?.([a, b]);
    }
  }
  return count;
}

/**
 * N–O single bonds except: charged nitrogen (nitro, N-oxide, nitrate), aromatic rings (isoxazole and its kin), oximes and
 * their ethers or ring forms (C=N–O), and hydroxamic acids and their relatives (acyl on the nitrogen).
 */
export function findNitrogenOxygenBonds(s: StructureAnalysis, report: OccurrenceReport): number {
  const { atomCount: n, atomicNumbers, charges } = s.graph;
  let count = 0;
  for (let a = 0; a < n; a++) {
    if (atomicNumbers[a] !== NITROGEN || charges[a] !== 0) continue;
    for (let k = 0; k < s.degrees[a]; k++) {
      const b = neighbour(s, a, k);
      if (atomicNumbers[b] !== OXYGEN || orderOf(s, a, b) !== 1 || s.aromaticBonds[a * n + b] === 1) continue;
      if (findNeighbour(s, a, CARBON, 2) !== -1 || isAcylNitrogen(s, a)) continue;
      count++;
      report?.([a, b]);
    }
  }
  return count;
}

function isAcylNitrogen(s: StructureAnalysis, nitrogen: number): boolean {
  for (let k = 0; k < s.degrees[nitrogen]; k++) {
    const b = neighbour(s, nitrogen, k);
    if (s.graph.atomicNumbers[b] === CARBON && findNeighbour(s, b, OXYGEN, 2) !== -1) return true;
  }
  return false;
}

/** Uncharged nitrogens between two others, outside aromatic rings: triazanes and triazenes, but not azides, whose middle is charged. */
export function findNitrogenChains(s: StructureAnalysis, report: OccurrenceReport): number {
  const { atomCount: n, atomicNumbers, charges } = s.graph;
  let count = 0;
  for (let a = 0; a < n; a++) {
    if (atomicNumbers[a] !== NITROGEN || charges[a] !== 0 || s.aromaticAtoms[a] === 1) continue;
    let first = -1;
    let second = -1;
    for (let k = 0; k < s.degrees[a]; k++) {
      const b = neighbour(s, a, k);
      if (atomicNumbers[b] !== NITROGEN || charges[b] !== 0) continue;
      if (first === -1) first = b;
      else second = b;
    }
    if (second === -1) continue;
    count++;
    report?.([first, a, second]);
  }
  return count;
}

/** N–X, O–X and divalent S–X bonds (X halogen); sulfonyl and sulfinyl halides are ordinary reagents. */
export function findHeteroatomHalogens(s: StructureAnalysis, report: OccurrenceReport): number {
  const { atomCount: n, atomicNumbers } = s.graph;
  let count = 0;
  for (let a = 0; a < n; a++) {
    if (!isHalogen(atomicNumbers[a]) || s.degrees[a] !== 1) continue;
    const b = neighbour(s, a, 0);
    const z = atomicNumbers[b];
    if (z !== NITROGEN && z !== OXYGEN && z !== SULFUR && !isHalogen(z)) continue;
    if (z === SULFUR && s.degrees[b] > 2) continue;
    // A bond between two halogens is met from both ends.
    if (isHalogen(z) && b < a) continue;
    count++;
    report?.([a, b]);
  }
  return count;
}

/** Groups of two adjacent double bonds that are ordinary: allene, ketene, isocyanate, isothiocyanate, carbodiimide, CO2, CS2, COS. */
function isOrdinaryCumulene(s: StructureAnalysis, centre: number, a: number, b: number): boolean {
  const { atomicNumbers, charges } = s.graph;
  // Azide and diazo groups carry charges: N=N⁺=N⁻, C=N⁺=N⁻.
  if (atomicNumbers[centre] === NITROGEN) return charges[centre] === 1 && (atomicNumbers[a] === NITROGEN || atomicNumbers[b] === NITROGEN);
  if (atomicNumbers[centre] !== CARBON) return false;
  const low = Math.min(atomicNumbers[a], atomicNumbers[b]);
  const high = Math.max(atomicNumbers[a], atomicNumbers[b]);
  if (low === CARBON) {
    if (high === OXYGEN) return s.hybridisation[a] !== 1 && s.hybridisation[b] !== 1;
    return high === CARBON && s.hybridisation[a] !== 1 && s.hybridisation[b] !== 1;
  }
  if (low === NITROGEN) return high === NITROGEN || high === OXYGEN || high === SULFUR;
  return (low === OXYGEN || low === SULFUR) && (high === OXYGEN || high === SULFUR);
}

/** Atoms with two double bonds outside rings that are no ordinary cumulene. Sulfones do not count. */
export function findCumulatedDoubleBonds(s: StructureAnalysis, report: OccurrenceReport): number {
  const { atomCount: n } = s.graph;
  let count = 0;
  for (let a = 0; a < n; a++) {
    if (s.hybridisation[a] !== 1 || s.degrees[a] !== 2 || s.ringBondCounts[a] > 0) continue;
    const b = findNeighbour(s, a, 0, 2);
    if (b === -1) continue;
    const c = findNeighbour(s, a, 0, 2, b);
    if (c === -1) continue;
    if (isOrdinaryCumulene(s, a, b, c)) continue;
    count++;
    report?.([b, a, c]);
  }
  return count;
}
