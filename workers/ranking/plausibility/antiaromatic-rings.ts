import type { StructureAnalysis } from '../../graph/analysis.js';
import { CARBON, neighbour, NITROGEN, orderOf, OXYGEN, SULFUR, type OccurrenceReport } from './atom-queries.js';

const NOT_CONJUGATED = -1;

/**
 * Fully conjugated rings with 4k π electrons, none of whose bonds is aromatic: oxirene, cyclobutadiene,
 * cyclopentadienone, oxepine, cyclooctatetraene. At most one atom may give a lone pair and at most one may be a C=O
 * carbon: quinones, 1,4-dioxin and the like count 4k as well but are ordinary compounds.
 */
export function findAntiaromaticRings(s: StructureAnalysis, report: OccurrenceReport): number {
  if (!mayHoldOne(s)) return 0;
  let count = 0;
  for (const ring of s.rings) {
    if (!isAntiaromatic(s, ring)) continue;
    count++;
    report?.(ring);
  }
  return count;
}

/** Cheap necessary test: an in-ring double bond outside aromatic rings, with an sp2 or lone-pair atom beyond it. */
function mayHoldOne(s: StructureAnalysis): boolean {
  const { atomCount: n, atomicNumbers } = s.graph;
  let sp2 = 0;
  let smallHeterocycle = false;
  for (let a = 0; a < n; a++) {
    if (s.ringBondCounts[a] === 0 || s.aromaticAtoms[a] === 1) continue;
    if (s.hybridisation[a] === 2) sp2++;
    else if (atomicNumbers[a] !== CARBON && s.smallestRingOfAtom[a] === 3) smallHeterocycle = true;
  }
  return sp2 >= 4 || (sp2 >= 2 && smallHeterocycle);
}

function isAntiaromatic(s: StructureAnalysis, ring: readonly number[]): boolean {
  const n = s.graph.atomCount;
  let electrons = 0;
  let lonePairs = 0;
  let carbonyls = 0;
  for (let i = 0; i < ring.length; i++) {
    const atom = ring[i];
    if (s.aromaticBonds[atom * n + ring[(i + 1) % ring.length]] === 1) return false;
    const given = electronsGiven(s, ring, i);
    if (given === NOT_CONJUGATED) return false;
    electrons += given;
    if (given === 2) lonePairs++;
    if (given === 0) carbonyls++;
  }
  return electrons > 0 && electrons % 4 === 0 && lonePairs <= 1 && carbonyls <= 1;
}

/** π electrons of the i-th ring atom: 1 from a double bond inside the ring, 2 from a lone pair, 0 from C=O and C=N outside. */
function electronsGiven(s: StructureAnalysis, ring: readonly number[], i: number): number {
  const { atomicNumbers, charges } = s.graph;
  const atom = ring[i];
  const before = ring[(i + ring.length - 1) % ring.length];
  const after = ring[(i + 1) % ring.length];
  if (orderOf(s, atom, before) === 2 || orderOf(s, atom, after) === 2) return s.hybridisation[atom] === 2 ? 1 : NOT_CONJUGATED;
  if (s.hybridisation[atom] === 2) {
    for (let k = 0; k < s.degrees[atom]; k++) {
      const b = neighbour(s, atom, k);
      if (orderOf(s, atom, b) === 2) return atomicNumbers[b] === CARBON ? NOT_CONJUGATED : 0;
    }
  }
  const z = atomicNumbers[atom];
  const hasLonePair = z === NITROGEN || z === OXYGEN || (z === SULFUR && s.degrees[atom] === 2);
  return hasLonePair && s.hybridisation[atom] === 3 && charges[atom] === 0 ? 2 : NOT_CONJUGATED;
}
