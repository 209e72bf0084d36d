import type { StructureAnalysis } from '../graph/analysis.js';
import { neighboursOf } from '../graph/automorphism.js';
import type { Equivalence } from '../graph/equivalence.js';
import {
  ALKENE_CIS,
  ALKENE_TRANS,
  exchangeableCoupling,
  GEMINAL_SP2,
  GEMINAL_SP3,
  heteroCoupling,
  longRangeCoupling,
  vicinalCoupling,
} from './coupling-constants.js';
import { namePattern, type CouplingPartners, type SignalPattern } from './multiplicity.js';
import { isSplit, type ProtonGroup } from './proton-groups.js';
import type { ExchangeBehaviour } from './solvents.js';

/** Field at which "first order" is judged, MHz of 1H. */
const FIELD_MHZ = 400;
/** Below this ratio of shift difference to coupling a pattern is no longer first order (SCIENCE.md 3.4: about 5 to 8). */
const FIRST_ORDER_RATIO = 5;
/** Couplings of this size and more distort a pattern when the partners are close, Hz. */
const STRONG_COUPLING = 3;

/**
 * First-order pattern of one group of hydrogens on carbon.
 *
 * @param protonShift - ppm per heavy atom, to tell where shifts are too close for first order. Read only.
 * @returns name and couplings, `m` where the first-order rules do not reach.
 */
export function patternOf(
  analysis: StructureAnalysis,
  equivalence: Equivalence,
  group: ProtonGroup,
  protonShift: Float64Array,
  exchange: ExchangeBehaviour,
): SignalPattern {
  const { hydrogens, atomicNumbers } = analysis.graph;
  const atom = group.atoms[0];
  const partners: CouplingPartners[] = [];
  let isFirstOrder = true;
  const ownClass = equivalence.shiftClasses[atom];
  const couple = (other: number, coupling: number, count = hydrogens[other]): void => {
    if (coupling === 0 || count === 0) return;
    // Equivalent hydrogens do not split each other.
    if (equivalence.shiftClasses[other] === ownClass) return;
    partners.push({ coupling, count });
    const apart = Math.abs(protonShift[other] - protonShift[atom]) * FIELD_MHZ;
    if (coupling >= STRONG_COUPLING && apart < FIRST_ORDER_RATIO * coupling) isFirstOrder = false;
  };
  if (group.half !== 0) partners.push({ coupling: analysis.hybridisation[atom] === 3 ? GEMINAL_SP3 : GEMINAL_SP2, count: 1 });

  const skipsMeta = isSymmetricRing(analysis, equivalence, atom);
  const directlyBonded = neighboursOf(analysis, atom);
  /** Atoms two bonds away and the largest coupling over any of the ways to them. */
  const farther = new Map<number, number>();
  for (const b of directlyBonded) {
    if (atomicNumbers[b] === 6) coupleVicinal(analysis, equivalence, group, b, couple, partners);
    else if (hydrogens[b] > 0 && exchange.isSlow && (atomicNumbers[b] === 8 || atomicNumbers[b] === 7))
      couple(b, exchangeableCoupling(atomicNumbers[b]));
    coupleHetero(analysis, atom, b, 2, partners);
    for (const c of neighboursOf(analysis, b)) {
      if (c === atom || directlyBonded.includes(c)) continue;
      const coupling = atomicNumbers[c] === 6 ? longRangeCoupling(analysis, atom, b, c) : 0;
      farther.set(c, Math.max(coupling, farther.get(c) ?? 0));
    }
  }
  for (const [c, coupling] of farther) {
    coupleHetero(analysis, atom, c, 3, partners);
    if (!(skipsMeta && analysis.aromaticAtoms[c] === 1)) couple(c, coupling);
    if (analysis.aromaticAtoms[atom] === 0 || analysis.aromaticAtoms[c] === 0) continue;
    for (const d of neighboursOf(analysis, c)) if (analysis.aromaticAtoms[d] === 0) coupleHetero(analysis, atom, d, 4, partners);
  }
  if (!isFirstOrder || isRingEnvelope(analysis, equivalence, atom) || isInOrthoPair(analysis, equivalence, atom))
    return { multiplicity: 'm', couplings: [] };
  return namePattern(partners);
}

/** Three-bond couplings to the hydrogens on b, with E/Z places for =CH2 and the two halves of a CH2 taken one by one. */
function coupleVicinal(
  analysis: StructureAnalysis,
  equivalence: Equivalence,
  group: ProtonGroup,
  b: number,
  couple: (other: number, coupling: number, count?: number) => void,
  partners: CouplingPartners[],
): void {
  const atom = group.atoms[0];
  const { atomCount: n, hydrogens, bondOrders } = analysis.graph;
  const isAlkene = bondOrders[atom * n + b] === 2 && analysis.aromaticBonds[atom * n + b] === 0;
  if (isAlkene && group.half !== 0 && hydrogens[b] === 1) {
    // The first half of =CH2 is cis to the group on b, hence trans to its hydrogen.
    partners.push({ coupling: group.half === 1 ? ALKENE_TRANS : ALKENE_CIS, count: 1 });
    return;
  }
  if (isAlkene && isSplit(analysis, equivalence, b)) {
    partners.push({ coupling: ALKENE_TRANS, count: 1 }, { coupling: ALKENE_CIS, count: 1 });
    return;
  }
  couple(b, vicinalCoupling(analysis, atom, b));
}

function coupleHetero(analysis: StructureAnalysis, atom: number, other: number, bonds: number, partners: CouplingPartners[]): void {
  const coupling = heteroCoupling(analysis.graph.atomicNumbers[other], bonds, analysis.aromaticAtoms[atom] === 1);
  if (coupling > 0) partners.push({ coupling, count: 1 });
}

/** AA′ systems (mono- and para-substituted rings): small couplings are lost in the second-order pattern and are not reported. */
function isSymmetricRing(analysis: StructureAnalysis, equivalence: Equivalence, atom: number): boolean {
  if (analysis.aromaticAtoms[atom] === 0) return false;
  return analysis.rings.some(
    (ring) =>
      ring.includes(atom) &&
      ring.every((a) => analysis.aromaticAtoms[a] === 1) &&
      ring.some((a, i) =>
        ring.some((b, j) => i < j && analysis.graph.hydrogens[a] > 0 && equivalence.shiftClasses[a] === equivalence.shiftClasses[b]),
      ),
  );
}

/** Rings such as 1,2-X2C6H4 and naphthalene, where two equivalent hydrogens are neighbours: a symmetric multiplet (SCIENCE.md 3.4). */
function isInOrthoPair(analysis: StructureAnalysis, equivalence: Equivalence, atom: number): boolean {
  const { atomCount: n, hydrogens } = analysis.graph;
  const aromaticNeighbours = (a: number): number[] =>
    neighboursOf(analysis, a).filter(
      (b) => analysis.aromaticBonds[a * n + b] === 1 && analysis.smallestRingOfBond[a * n + b] === 6 && hydrogens[b] > 0,
    );
  return [atom, ...aromaticNeighbours(atom)].some(
    (a) =>
      aromaticNeighbours(a).some((b) => equivalence.shiftClasses[a] === equivalence.shiftClasses[b]) &&
      new Set(
        aromaticNeighbours(atom)
          .map((b) => equivalence.shiftClasses[b])
          .concat(equivalence.shiftClasses[atom]),
      ).size > 1,
  );
}

/** CH2 of a saturated ring with hydrogens on both sides, or a diastereotopic one with any: an unresolved envelope. */
function isRingEnvelope(analysis: StructureAnalysis, equivalence: Equivalence, atom: number): boolean {
  const { atomCount: n, hydrogens } = analysis.graph;
  if (analysis.hybridisation[atom] !== 3 || analysis.smallestRingOfAtom[atom] < 4 || hydrogens[atom] !== 2) return false;
  const flanks = neighboursOf(analysis, atom).filter(
    (b) =>
      analysis.smallestRingOfBond[atom * n + b] > 0 &&
      hydrogens[b] > 0 &&
      analysis.hybridisation[b] === 3 &&
      equivalence.shiftClasses[b] !== equivalence.shiftClasses[atom],
  );
  if (isSplit(analysis, equivalence, atom)) return flanks.length > 0;
  return flanks.some((b) => equivalence.shiftClasses[b] !== equivalence.shiftClasses[flanks[0]]);
}
