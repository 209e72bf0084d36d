import type { AutomorphismCheck, NormalisedGraph } from './automorphism.js';
import { findAutomorphism } from './automorphism.js';

/** An end of a double bond: its atom and its two places; −1 stands for a hydrogen or a lone pair. */
interface BondEnd {
  readonly atom: number;
  readonly places: readonly [number, number];
}

/** Something with two configurations: a tetrahedral centre, or a bond about which groups do not turn. */
export type StereoUnit =
  | { readonly kind: 'centre'; readonly atom: number; readonly inCage: boolean }
  | { readonly kind: 'bond'; readonly ends: readonly [BondEnd, BondEnd]; readonly isDoubleBond: boolean };

/** Smallest ring in which a double bond can be trans (SCIENCE.md 2.4). */
const TRANS_RING = 8;

/**
 * Lists every atom and bond that has a configuration at all, stereogenic or not: four-coordinate C, Si, N⁺ and P with
 * at most one hydrogen, sulfoxide-type S; C=C and C=N outside small rings; the C–N bond of tertiary amides, whose
 * groups are told apart at room temperature. Cumulenes, biaryl axes and pyramidal N and P are left out: their
 * configurations either swap fast or are rare.
 */
export function listStereoUnits(normalised: NormalisedGraph): StereoUnit[] {
  const { analysis, atomCount: n } = normalised;
  const { atomicNumbers, hydrogens, charges } = analysis.graph;
  const units: StereoUnit[] = [];
  const caged = findCageAtoms(normalised);
  for (let a = 0; a < n; a++) {
    const z = atomicNumbers[a];
    const degree = analysis.degrees[a];
    const isFourfold = (z === 6 || z === 14 || z === 15 || (z === 7 && charges[a] === 1)) && analysis.hybridisation[a] === 3;
    const isSulfoxide = z === 16 && degree === 3 && hydrogens[a] === 0;
    if ((isFourfold && degree + hydrogens[a] === 4 && hydrogens[a] <= 1) || isSulfoxide) {
      units.push({ kind: 'centre', atom: a, inCage: caged[a] === 1 });
    }
  }
  for (let a = 0; a < n; a++) {
    for (const b of normalised.neighbourLists[a]) {
      if (isStereoDoubleBond(normalised, a, b) && a < b) {
        const [left, right] = [bondEnd(normalised, a, b), bondEnd(normalised, b, a)];
        if (left !== null && right !== null) units.push({ kind: 'bond', ends: [left, right], isDoubleBond: true });
      }
      if (isTertiaryAmide(normalised, a, b)) {
        units.push({ kind: 'bond', ends: [bondEnd(normalised, a, b)!, bondEnd(normalised, b, a)!], isDoubleBond: false });
      }
    }
  }
  return units;
}

function isStereoDoubleBond(normalised: NormalisedGraph, a: number, b: number): boolean {
  const { analysis, atomCount: n, bondTypes } = normalised;
  const ring = analysis.smallestRingOfBond[a * n + b];
  const isCarbonOrNitrogen = (atom: number): boolean =>
    analysis.graph.atomicNumbers[atom] === 6 || analysis.graph.atomicNumbers[atom] === 7;
  return (
    bondTypes[a * n + b] === 2 &&
    (ring === 0 || ring >= TRANS_RING) &&
    analysis.hybridisation[a] === 2 &&
    analysis.hybridisation[b] === 2 &&
    isCarbonOrNitrogen(a) &&
    isCarbonOrNitrogen(b)
  );
}

/** Is a the carbonyl (or thiocarbonyl) carbon and b the nitrogen of RC(=O)–N(R')R''? Ureas and carbamates turn too easily. */
function isTertiaryAmide(normalised: NormalisedGraph, a: number, b: number): boolean {
  const { analysis, atomCount: n, bondTypes } = normalised;
  const { atomicNumbers, charges } = analysis.graph;
  if (atomicNumbers[a] !== 6 || atomicNumbers[b] !== 7 || charges[b] !== 0) return false;
  if (bondTypes[a * n + b] !== 1 || analysis.smallestRingOfBond[a * n + b] !== 0) return false;
  if (analysis.degrees[b] !== 3 || analysis.hybridisation[b] !== 3) return false;
  let hasDoubleHetero = false;
  for (const c of normalised.neighbourLists[a]) {
    if (c === b) continue;
    if (bondTypes[a * n + c] === 2 && (atomicNumbers[c] === 8 || atomicNumbers[c] === 16)) hasDoubleHetero = true;
    else if (atomicNumbers[c] !== 6) return false;
  }
  return hasDoubleHetero;
}

/** The places of an end, or null when both are alike by hydrogen (=CH2) or the end has no direction (=NH). */
function bondEnd(normalised: NormalisedGraph, atom: number, other: number): BondEnd | null {
  const places = normalised.neighbourLists[atom].filter((b) => b !== other);
  if (places.length === 0 || places.length > 2) return null;
  return { atom, places: places.length === 2 ? [places[0], places[1]] : [places[0], -1] };
}

/** Atoms of bridged ring systems (two rings sharing more than one bond), where one bridgehead fixes the other. */
function findCageAtoms(normalised: NormalisedGraph): Uint8Array {
  const caged = new Uint8Array(normalised.atomCount);
  const rings = normalised.analysis.rings;
  for (let i = 0; i < rings.length; i++) {
    for (let j = i + 1; j < rings.length; j++) {
      const shared = rings[i].filter((atom) => rings[j].includes(atom));
      if (shared.length <= 2) continue;
      for (const atom of rings[i]) caged[atom] = 1;
      for (const atom of rings[j]) caged[atom] = 1;
    }
  }
  return caged;
}

/** Parity of the unit under the automorphism if it stays where it is: +1 kept, −1 turned over; 0 = it moves elsewhere. */
export function unitParity(normalised: NormalisedGraph, unit: StereoUnit, image: Int16Array): -1 | 0 | 1 {
  if (unit.kind === 'centre') {
    if (image[unit.atom] !== unit.atom) return 0;
    const places = normalised.neighbourLists[unit.atom];
    let isOdd = false;
    for (let i = 0; i < places.length; i++) {
      for (let j = i + 1; j < places.length; j++) if (image[places[i]] > image[places[j]]) isOdd = !isOdd;
    }
    return isOdd ? -1 : 1;
  }
  const [left, right] = unit.ends;
  const isSwapped = image[left.atom] === right.atom && image[right.atom] === left.atom;
  if (!isSwapped && (image[left.atom] !== left.atom || image[right.atom] !== right.atom)) return 0;
  // First places on one side of the bond: kept when both first places go to first places or both to second ones.
  const isFirst = (end: BondEnd, target: BondEnd): boolean => image[end.places[0]] === target.places[0];
  return isFirst(left, isSwapped ? right : left) === isFirst(right, isSwapped ? left : right) ? 1 : -1;
}

/** Atoms whose images decide {@link unitParity}. */
export function unitAtoms(normalised: NormalisedGraph, unit: StereoUnit): number[] {
  if (unit.kind === 'centre') return [unit.atom, ...normalised.neighbourLists[unit.atom]];
  return unit.ends.flatMap((end) => [end.atom, ...end.places.filter((place) => place !== -1)]);
}

/**
 * Tells which units are stereogenic: turning over this one alone gives another stereoisomer in at least one
 * configuration of the rest. A centre with four different groups always is; ring pairs such as C1 and C4 of
 * 1,4-dimethylcyclohexane and pseudo-asymmetric centres are found by asking for an automorphism that turns over this
 * unit and nothing else. In cages only the first kind counts, because their bridgeheads are not free.
 */
export function findStereogenicUnits(normalised: NormalisedGraph, units: readonly StereoUnit[]): boolean[] {
  const parityCheck = (unit: StereoUnit, accepts: (parity: -1 | 0 | 1) => boolean): AutomorphismCheck => ({
    atoms: unitAtoms(normalised, unit),
    accepts: (image) => accepts(unitParity(normalised, unit, image)),
  });
  const fixing = (unit: StereoUnit): ReadonlyArray<readonly [number, number]> => {
    const atom = unit.kind === 'centre' ? unit.atom : unit.ends[0].atom;
    return [[atom, atom]];
  };
  const isTurnedBySome = units.map((unit) => findAutomorphism(normalised, fixing(unit), [parityCheck(unit, (p) => p === -1)]) !== null);
  return units.map((unit, index) => {
    if (!isTurnedBySome[index]) return true;
    if (unit.kind === 'centre' && unit.inCage) return false;
    const checks = units.map((other, otherIndex) => {
      if (other === unit) return parityCheck(other, (p) => p === -1);
      // A true centre that moves has, in some stereoisomer, a partner of the other hand.
      return parityCheck(other, (p) => p === 1 || (p === 0 && isTurnedBySome[otherIndex]));
    });
    return findAutomorphism(normalised, fixing(unit), checks) === null;
  });
}
