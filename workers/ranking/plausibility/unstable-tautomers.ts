import type { StructureAnalysis } from '../../graph/analysis.js';
import {
  CARBON,
  findNeighbour,
  hasAcceptor,
  isAcylated,
  neighbour,
  NITROGEN,
  orderOf,
  OXYGEN,
  SULFUR,
  type OccurrenceReport,
} from './atom-queries.js';

/**
 * X–H (X = OH, NH, SH) on a carbon of a C=C or C≡C bond that belongs to no aromatic ring and that no acceptor on either
 * carbon stabilises (1,3-dicarbonyls, enaminones).
 */
function countOnAlkene(s: StructureAnalysis, element: number, report: OccurrenceReport): number {
  const { atomCount: n, atomicNumbers, hydrogens, charges } = s.graph;
  let count = 0;
  for (let x = 0; x < n; x++) {
    if (atomicNumbers[x] !== element || hydrogens[x] === 0 || charges[x] !== 0 || s.aromaticAtoms[x] === 1) continue;
    if (element === NITROGEN && isAcylated(s, x)) continue;
    for (let k = 0; k < s.degrees[x]; k++) {
      const a = neighbour(s, x, k);
      if (atomicNumbers[a] !== CARBON || orderOf(s, x, a) !== 1 || s.aromaticAtoms[a] === 1) continue;
      let b = findNeighbour(s, a, CARBON, 2);
      if (b === -1) b = findNeighbour(s, a, CARBON, 3);
      if (b === -1 || hasAcceptor(s, a) || hasAcceptor(s, b)) continue;
      count++;
      report?.([x, a, b]);
    }
  }
  return count;
}

export const findEnols = (s: StructureAnalysis, report: OccurrenceReport): number => countOnAlkene(s, OXYGEN, report);
export const findEnamines = (s: StructureAnalysis, report: OccurrenceReport): number => countOnAlkene(s, NITROGEN, report);
export const findEnethiols = (s: StructureAnalysis, report: OccurrenceReport): number => countOnAlkene(s, SULFUR, report);

/** HO–C=N and HS–C=N outside aromatic rings. */
export function findImidicAcids(s: StructureAnalysis, report: OccurrenceReport): number {
  const { atomCount: n, atomicNumbers, hydrogens } = s.graph;
  let count = 0;
  for (let x = 0; x < n; x++) {
    if ((atomicNumbers[x] !== OXYGEN && atomicNumbers[x] !== SULFUR) || hydrogens[x] !== 1 || s.degrees[x] !== 1) continue;
    const a = neighbour(s, x, 0);
    if (atomicNumbers[a] !== CARBON || s.aromaticAtoms[a] === 1) continue;
    const nitrogen = findNeighbour(s, a, NITROGEN, 2);
    if (nitrogen === -1) continue;
    count++;
    report?.([x, a, nitrogen]);
  }
  return count;
}

/** O=N on a carbon that carries hydrogen. */
export function findNitrosoWithHydrogens(s: StructureAnalysis, report: OccurrenceReport): number {
  const { atomCount: n, atomicNumbers, hydrogens, charges } = s.graph;
  let count = 0;
  for (let x = 0; x < n; x++) {
    if (atomicNumbers[x] !== NITROGEN || charges[x] !== 0) continue;
    const oxygen = findNeighbour(s, x, OXYGEN, 2);
    const carbon = findNeighbour(s, x, CARBON, 1);
    if (oxygen === -1 || carbon === -1 || hydrogens[carbon] === 0 || s.hybridisation[carbon] !== 3) continue;
    count++;
    report?.([oxygen, x, carbon]);
  }
  return count;
}

/** True when the carbon has, besides the double bond to `partner`, only carbon and hydrogen around it. */
function hasOnlyCarbons(s: StructureAnalysis, carbon: number, partner: number): boolean {
  for (let k = 0; k < s.degrees[carbon]; k++) {
    const b = neighbour(s, carbon, k);
    if (b !== partner && s.graph.atomicNumbers[b] !== CARBON) return false;
  }
  return true;
}

/** HN=C with carbon or hydrogen at the carbon; amidines, guanidines and imidates are stable. */
export function findUnsubstitutedImines(s: StructureAnalysis, report: OccurrenceReport): number {
  const { atomCount: n, atomicNumbers, hydrogens } = s.graph;
  let count = 0;
  for (let x = 0; x < n; x++) {
    if (atomicNumbers[x] !== NITROGEN || hydrogens[x] !== 1 || s.degrees[x] !== 1) continue;
    const carbon = findNeighbour(s, x, CARBON, 2);
    if (carbon === -1 || !hasOnlyCarbons(s, carbon, x)) continue;
    count++;
    report?.([x, carbon]);
  }
  return count;
}

function countThiocarbonyls(s: StructureAnalysis, withHydrogen: boolean, report: OccurrenceReport): number {
  const { atomCount: n, atomicNumbers, hydrogens } = s.graph;
  let count = 0;
  for (let x = 0; x < n; x++) {
    if (atomicNumbers[x] !== SULFUR || s.degrees[x] !== 1) continue;
    const carbon = findNeighbour(s, x, CARBON, 2);
    if (carbon === -1 || s.aromaticAtoms[carbon] === 1 || s.hybridisation[carbon] === 1) continue;
    if (hydrogens[carbon] > 0 !== withHydrogen || !hasOnlyCarbons(s, carbon, x)) continue;
    count++;
    report?.([x, carbon]);
  }
  return count;
}

export const findThioaldehydes = (s: StructureAnalysis, report: OccurrenceReport): number => countThiocarbonyls(s, true, report);
export const findThioketones = (s: StructureAnalysis, report: OccurrenceReport): number => countThiocarbonyls(s, false, report);
