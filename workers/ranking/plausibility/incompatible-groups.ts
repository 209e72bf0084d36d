import type { StructureAnalysis } from '../../graph/analysis.js';
import {
  CARBON,
  countNeighbours,
  findNeighbour,
  isCarbonyl,
  isHalogen,
  isHydroxyl,
  neighbour,
  NITROGEN,
  orderOf,
  OXYGEN,
  type OccurrenceReport,
} from './atom-queries.js';

/** OH, or N–H that still is a nucleophile: an amine, not an amide and not an aromatic ring nitrogen. */
function findNucleophile(s: StructureAnalysis): number {
  for (let a = 0; a < s.graph.atomCount; a++) {
    if (isHydroxyl(s, a) || isAmineWithHydrogen(s, a, 1)) return a;
  }
  return -1;
}

function isAmineWithHydrogen(s: StructureAnalysis, atom: number, least: number): boolean {
  const { atomicNumbers, hydrogens, charges } = s.graph;
  if (
    atomicNumbers[atom] !== NITROGEN ||
    hydrogens[atom] < least ||
    charges[atom] !== 0 ||
    s.aromaticAtoms[atom] === 1 ||
    s.hybridisation[atom] !== 3
  )
    return false;
  for (let k = 0; k < s.degrees[atom]; k++) {
    const b = neighbour(s, atom, k);
    if (atomicNumbers[b] !== CARBON || isCarbonyl(s, b) || findNeighbour(s, b, NITROGEN, 2) !== -1) return false;
  }
  return s.degrees[atom] > 0;
}

function countPairs(
  s: StructureAnalysis,
  isElectrophile: (s: StructureAnalysis, atom: number) => boolean,
  nucleophile: number,
  report: OccurrenceReport,
): number {
  if (nucleophile === -1) return 0;
  for (let a = 0; a < s.graph.atomCount; a++) {
    if (!isElectrophile(s, a)) continue;
    report?.([a, nucleophile]);
    // One pair is enough to react away; more of them make it no more improbable.
    return 1;
  }
  return 0;
}

function isAcylHalideCarbon(s: StructureAnalysis, atom: number): boolean {
  if (!isCarbonyl(s, atom)) return false;
  for (let k = 0; k < s.degrees[atom]; k++) if (isHalogen(s.graph.atomicNumbers[neighbour(s, atom, k)])) return true;
  return false;
}
const isAldehydeCarbon = (s: StructureAnalysis, atom: number): boolean =>
  isCarbonyl(s, atom) && s.graph.hydrogens[atom] >= 1 && s.degrees[atom] === 1 + countNeighbours(s, atom, CARBON, 1);
const isIsocyanateCarbon = (s: StructureAnalysis, atom: number): boolean =>
  isCarbonyl(s, atom) && findNeighbour(s, atom, NITROGEN, 2) !== -1;

export const findAcylHalidesWithNucleophile = (s: StructureAnalysis, report: OccurrenceReport): number =>
  countPairs(s, isAcylHalideCarbon, findNucleophile(s), report);
export const findIsocyanatesWithNucleophile = (s: StructureAnalysis, report: OccurrenceReport): number =>
  countPairs(s, isIsocyanateCarbon, findNucleophile(s), report);

/** Aldehyde and an aliphatic primary amine; aminobenzaldehydes, whose amine is a poor base, are sold as such. */
export function findAldehydesWithAmine(s: StructureAnalysis, report: OccurrenceReport): number {
  let amine = -1;
  for (let a = 0; a < s.graph.atomCount && amine === -1; a++) {
    if (isAmineWithHydrogen(s, a, 2) && s.hybridisation[neighbour(s, a, 0)] === 3) amine = a;
  }
  return countPairs(s, isAldehydeCarbon, amine, report);
}

/** Carboxyl carbon of a free acid: C(=O)OH. Returns the OH oxygen, −1 if it is none. */
function findAcidHydroxyl(s: StructureAnalysis, carbon: number): number {
  if (!isCarbonyl(s, carbon)) return -1;
  for (let k = 0; k < s.degrees[carbon]; k++) {
    const b = neighbour(s, carbon, k);
    if (isHydroxyl(s, b)) return b;
  }
  return -1;
}

export function findCarbamicAcids(s: StructureAnalysis, report: OccurrenceReport): number {
  let count = 0;
  for (let a = 0; a < s.graph.atomCount; a++) {
    const hydroxyl = findAcidHydroxyl(s, a);
    if (hydroxyl === -1) continue;
    const nitrogen = findNeighbour(s, a, NITROGEN, 1);
    if (nitrogen === -1) continue;
    count++;
    report?.([nitrogen, a, hydroxyl]);
  }
  return count;
}

/** Carbonic acid itself counts too. */
export function findCarbonicHalfEsters(s: StructureAnalysis, report: OccurrenceReport): number {
  let count = 0;
  for (let a = 0; a < s.graph.atomCount; a++) {
    const hydroxyl = findAcidHydroxyl(s, a);
    if (hydroxyl === -1) continue;
    const other = findNeighbour(s, a, OXYGEN, 1, hydroxyl);
    if (other === -1) continue;
    count++;
    report?.([hydroxyl, a, other]);
  }
  return count;
}

/** HOOC–C(sp3)–C(=O)–C or –H: an aldehyde or ketone in β-position. Malonic acids and their half esters keep. */
export function findBetaKetoAcids(s: StructureAnalysis, report: OccurrenceReport): number {
  const { atomCount: n, atomicNumbers } = s.graph;
  let count = 0;
  for (let a = 0; a < n; a++) {
    if (findAcidHydroxyl(s, a) === -1) continue;
    const alpha = findNeighbour(s, a, CARBON, 1);
    if (alpha === -1 || s.hybridisation[alpha] !== 3) continue;
    for (let k = 0; k < s.degrees[alpha]; k++) {
      const beta = neighbour(s, alpha, k);
      if (beta === a || !isCarbonyl(s, beta) || orderOf(s, alpha, beta) !== 1) continue;
      if (countNeighbours(s, beta, CARBON, 1) + s.graph.hydrogens[beta] !== 2 || atomicNumbers[beta] !== CARBON) continue;
      count++;
      report?.([a, alpha, beta]);
    }
  }
  return count;
}
