import type { StructureAnalysis } from '../../graph/analysis.js';
import { CARBON, findNeighbour, neighbour, orderOf, type OccurrenceReport } from './atom-queries.js';

/** Smallest rings that keep, SCIENCE.md 2.4: cyclooctyne, 1,2-cyclononadiene, trans-cyclooctene. */
const SMALLEST_ALKYNE_RING = 8;
const SMALLEST_ALLENE_RING = 9;
const SMALLEST_TRANS_RING = 8;
/** Atoms of the shortest bridge over an aromatic ring from meta or para: [5]cyclophanes have been made (from memory). */
const SHORTEST_ARENE_BRIDGE = 5;
const LARGEST_ARENE = 7;
/** Triple bonds in rings below this size are bent although they keep. */
const UNSTRAINED_ALKYNE_RING = 12;

/** Scratch of the breadth-first searches below; the rules run one after the other, never nested. */
const queue = new Uint8Array(256);
const depth = new Uint8Array(256);
/** Marks in `depth` beside real depths. */
const IN_RING = 255;
const SEEN_ACROSS = 254;

export function findAlkynesInSmallRings(s: StructureAnalysis, report: OccurrenceReport): number {
  const n = s.graph.atomCount;
  let count = 0;
  for (let a = 0; a < n; a++) {
    // Not by hybridisation: the ring electrons of an aryne count as aromatic.
    if (s.ringBondCounts[a] === 0 || s.smallestRingOfAtom[a] >= SMALLEST_ALKYNE_RING) continue;
    const b = findNeighbour(s, a, 0, 3);
    if (b < a) continue;
    const size = s.smallestRingOfBond[a * n + b];
    if (size === 0 || size >= SMALLEST_ALKYNE_RING) continue;
    count++;
    report?.([a, b]);
  }
  return count;
}

/** Triple bonds in rings large enough to keep and small enough to bend them. */
export function findAlkynesInMediumRings(s: StructureAnalysis, report: OccurrenceReport): number {
  const n = s.graph.atomCount;
  let count = 0;
  for (let a = 0; a < n; a++) {
    if (s.ringBondCounts[a] === 0 || s.smallestRingOfAtom[a] < SMALLEST_ALKYNE_RING || s.smallestRingOfAtom[a] >= UNSTRAINED_ALKYNE_RING)
      continue;
    const b = findNeighbour(s, a, 0, 3);
    if (b < a) continue;
    count++;
    report?.([a, b]);
  }
  return count;
}

export function findAllenesInSmallRings(s: StructureAnalysis, report: OccurrenceReport): number {
  const n = s.graph.atomCount;
  let count = 0;
  for (let a = 0; a < n; a++) {
    if (s.ringBondCounts[a] === 0 || s.smallestRingOfAtom[a] >= SMALLEST_ALLENE_RING || s.graph.atomicNumbers[a] !== CARBON) continue;
    const b = findNeighbour(s, a, CARBON, 2);
    if (b === -1) continue;
    const c = findNeighbour(s, a, CARBON, 2, b);
    // The middle carbon has no third bond, so a ring through it holds both double bonds.
    if (c === -1) continue;
    count++;
    report?.([b, a, c]);
  }
  return count;
}

/** X=C=Y or X=N⁺=Y in a ring of fewer than nine atoms, C=C=C apart. */
export function findHeterocumulenesInSmallRings(s: StructureAnalysis, report: OccurrenceReport): number {
  let count = 0;
  for (let a = 0; a < s.graph.atomCount; a++) {
    if (s.ringBondCounts[a] === 0 || s.smallestRingOfAtom[a] >= SMALLEST_ALLENE_RING || s.degrees[a] !== 2) continue;
    const b = findNeighbour(s, a, 0, 2);
    if (b === -1) continue;
    const c = findNeighbour(s, a, 0, 2, b);
    if (c === -1) continue;
    const { atomicNumbers } = s.graph;
    if (atomicNumbers[a] === CARBON && atomicNumbers[b] === CARBON && atomicNumbers[c] === CARBON) continue;
    count++;
    report?.([b, a, c]);
  }
  return count;
}

/**
 * C=C bonds that no arrangement of their substituents saves from being trans in a ring of fewer than 8 atoms:
 * Bredt's rule for bridged rings. Fused rings with a C=C at the fusion pass, because the ring in which it is trans is
 * their large outer one. Aromatic bonds are left out: their strain is not that of a twisted double bond.
 */
export function findTwistedRingAlkenes(s: StructureAnalysis, report: OccurrenceReport): number {
  const n = s.graph.atomCount;
  let count = 0;
  for (let a = 0; a < n; a++) {
    if (s.ringBondCounts[a] === 0 || s.graph.atomicNumbers[a] !== CARBON) continue;
    const b = findNeighbour(s, a, CARBON, 2);
    if (b < a || s.smallestRingOfBond[a * n + b] === 0 || s.aromaticBonds[a * n + b] === 1) continue;
    // With two ring bonds at either end the other substituents hang outside and can be cis to nothing in the ring.
    if (s.ringBondCounts[a] < 3 && s.ringBondCounts[b] < 3) continue;
    if (findNeighbour(s, a, CARBON, 2, b) !== -1 || findNeighbour(s, b, CARBON, 2, a) !== -1) continue;
    const a1 = substituent(s, a, b, 0);
    const a2 = substituent(s, a, b, 1);
    const b1 = substituent(s, b, a, 0);
    const b2 = substituent(s, b, a, 1);
    const straight = isTransTooTight(s, a, b, a1, b2) || isTransTooTight(s, a, b, a2, b1);
    const crossed = isTransTooTight(s, a, b, a1, b1) || isTransTooTight(s, a, b, a2, b2);
    if (!straight || !crossed) continue;
    count++;
    report?.([a, b]);
  }
  return count;
}

/** Aromatic rings with a bridge of fewer than five atoms between atoms that are not neighbours in the ring. */
export function findBridgedArenes(s: StructureAnalysis, report: OccurrenceReport): number {
  if (!mayBridgeArene(s)) return 0;
  const n = s.graph.atomCount;
  let count = 0;
  for (const ring of s.rings) {
    // Large conjugated rings (porphyrins) are bridged by nature.
    if (ring.length > LARGEST_ARENE || !ring.every((atom, i) => s.aromaticBonds[atom * n + ring[(i + 1) % ring.length]] === 1)) continue;
    for (const a of ring) if (s.ringBondCounts[a] >= 3) count += countShortBridges(s, ring, a, report);
  }
  return count;
}

/** Cheap necessary test: two aromatic atoms with a ring bond that is not aromatic. */
function mayBridgeArene(s: StructureAnalysis): boolean {
  const n = s.graph.atomCount;
  let anchors = 0;
  for (let a = 0; a < n; a++) {
    if (s.aromaticAtoms[a] === 0 || s.ringBondCounts[a] < 3) continue;
    for (let k = 0; k < s.degrees[a]; k++) {
      const b = neighbour(s, a, k);
      if (s.smallestRingOfBond[a * n + b] > 0 && s.aromaticBonds[a * n + b] === 0) {
        anchors++;
        break;
      }
    }
  }
  return anchors >= 2;
}

/** Ring atoms after `a` and not beside it in the ring that a bridge of fewer than five atoms outside the ring joins to it. */
function countShortBridges(s: StructureAnalysis, ring: readonly number[], a: number, report: OccurrenceReport): number {
  const n = s.graph.atomCount;
  depth.fill(0, 0, n);
  for (const atom of ring) depth[atom] = IN_RING;
  let tail = 0;
  for (let k = 0; k < s.degrees[a]; k++) {
    const b = neighbour(s, a, k);
    if (depth[b] !== 0) continue;
    depth[b] = 1;
    queue[tail++] = b;
  }
  let count = 0;
  for (let head = 0; head < tail; head++) {
    const u = queue[head];
    for (let k = 0; k < s.degrees[u]; k++) {
      const v = neighbour(s, u, k);
      if (depth[v] === IN_RING) {
        // The bridge is met from its other end too; there it does not count.
        if (v <= a || orderOf(s, a, v) !== 0) continue;
        depth[v] = SEEN_ACROSS;
        count++;
        report?.([a, v]);
      } else if (depth[v] === 0 && depth[u] + 1 < SHORTEST_ARENE_BRIDGE) {
        depth[v] = depth[u] + 1;
        queue[tail++] = v;
      }
    }
  }
  return count;
}

/** The index-th neighbour of `atom` other than `partner`, −1 for a hydrogen. */
function substituent(s: StructureAnalysis, atom: number, partner: number, index: number): number {
  const degree = s.degrees[atom];
  for (let k = 0, seen = 0; k < degree; k++) {
    const b = neighbour(s, atom, k);
    if (b === partner) continue;
    if (seen++ === index) return b;
  }
  return -1;
}

/** True when a ring p–a=b–q of fewer than 8 atoms exists, p on a and q on b. */
function isTransTooTight(s: StructureAnalysis, a: number, b: number, p: number, q: number): boolean {
  if (p === -1 || q === -1) return false;
  if (p === q) return true;
  // Ring size = atoms on the way p…q (at least 2) + a and b.
  const longest = SMALLEST_TRANS_RING - 1 - 2;
  depth.fill(0, 0, s.graph.atomCount);
  depth[a] = depth[b] = 255;
  depth[p] = 1;
  queue[0] = p;
  let tail = 1;
  for (let head = 0; head < tail; head++) {
    const u = queue[head];
    if (depth[u] >= longest) return false;
    const degree = s.degrees[u];
    for (let k = 0; k < degree; k++) {
      const v = neighbour(s, u, k);
      if (depth[v] !== 0) continue;
      if (v === q) return true;
      depth[v] = depth[u] + 1;
      queue[tail++] = v;
    }
  }
  return false;
}

export function findThreeMemberedRings(s: StructureAnalysis, report: OccurrenceReport): number {
  const n = s.graph.atomCount;
  let count = 0;
  for (let a = 0; a < n; a++) {
    if (s.smallestRingOfAtom[a] !== 3) continue;
    for (let b = a + 1; b < n; b++) {
      if (s.smallestRingOfBond[a * n + b] !== 3) continue;
      for (let c = b + 1; c < n; c++) {
        if (orderOf(s, a, c) === 0 || orderOf(s, b, c) === 0) continue;
        count++;
        report?.([a, b, c]);
      }
    }
  }
  return count;
}

export function findFourMemberedRings(s: StructureAnalysis, report: OccurrenceReport): number {
  const n = s.graph.atomCount;
  let count = 0;
  for (let a = 0; a < n; a++) {
    if (!isInSmallRing(s, a)) continue;
    for (let c = a + 1; c < n; c++) {
      if (!isInSmallRing(s, c) || orderOf(s, a, c) !== 0) continue;
      for (let b = a + 1; b < n; b++) {
        if (orderOf(s, a, b) === 0 || orderOf(s, b, c) === 0) continue;
        for (let d = b + 1; d < n; d++) {
          // a is the lowest atom, b < d: each ring without a chord is met once.
          if (orderOf(s, a, d) === 0 || orderOf(s, d, c) === 0 || orderOf(s, b, d) !== 0) continue;
          count++;
          report?.([a, b, c, d]);
        }
      }
    }
  }
  return count;
}

const isInSmallRing = (s: StructureAnalysis, atom: number): boolean => s.smallestRingOfAtom[atom] === 3 || s.smallestRingOfAtom[atom] === 4;

export function findSmallRingAlkenes(s: StructureAnalysis, report: OccurrenceReport): number {
  const n = s.graph.atomCount;
  let count = 0;
  for (let a = 0; a < n; a++) {
    if (!isInSmallRing(s, a)) continue;
    for (let b = a + 1; b < n; b++) {
      const size = s.smallestRingOfBond[a * n + b];
      if ((size !== 3 && size !== 4) || orderOf(s, a, b) !== 2 || s.aromaticBonds[a * n + b] === 1) continue;
      count++;
      report?.([a, b]);
    }
  }
  return count;
}

/** Bonds that belong to two or more rings of three or four atoms. */
export function findFusedSmallRings(s: StructureAnalysis, report: OccurrenceReport): number {
  const n = s.graph.atomCount;
  let count = 0;
  for (let a = 0; a < n; a++) {
    if (!isInSmallRing(s, a) || s.ringBondCounts[a] < 3) continue;
    for (let b = a + 1; b < n; b++) {
      const size = s.smallestRingOfBond[a * n + b];
      if ((size !== 3 && size !== 4) || s.ringBondCounts[b] < 3 || countSmallRingsOfBond(s, a, b) < 2) continue;
      count++;
      report?.([a, b]);
    }
  }
  return count;
}

function countSmallRingsOfBond(s: StructureAnalysis, a: number, b: number): number {
  let rings = 0;
  for (let k = 0; k < s.degrees[a]; k++) {
    const x = neighbour(s, a, k);
    if (x === b) continue;
    if (orderOf(s, x, b) !== 0) {
      rings++;
      continue;
    }
    for (let l = 0; l < s.degrees[b]; l++) {
      const y = neighbour(s, b, l);
      if (y !== a && orderOf(s, x, y) !== 0 && orderOf(s, a, y) === 0) rings++;
    }
  }
  return rings;
}
