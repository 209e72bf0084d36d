import type { MolecularGraph } from '../../shared/types/molecular-graph.js';
import { analyseStructure, type StructureAnalysis } from './analysis.js';
import { findAutomorphism, normaliseGraph, type AutomorphismCheck, type NormalisedGraph } from './automorphism.js';
import { findStereogenicUnits, listStereoUnits, unitAtoms, unitParity, type StereoUnit } from './stereo-units.js';

/** How the two hydrogens of a CH2 (or =CH2) are related; `none` for every other atom. */
export type HydrogenTopicity = 'none' | 'homotopic' | 'enantiotopic' | 'diastereotopic';

/** Which atoms and hydrogens a spectrum in an achiral solvent cannot tell apart. */
export interface Equivalence {
  /** Automorphism orbit of each atom after laying resonance forms over each other, numbered from 0 by first member. */
  readonly orbits: Uint8Array;
  readonly orbitCount: number;
  /** Orbits split where like groups are diastereotopic: atoms of one class share one shift. Numbered from 0 by first member. */
  readonly shiftClasses: Uint8Array;
  readonly shiftClassCount: number;
  /** Per heavy atom. */
  readonly hydrogenTopicity: readonly HydrogenTopicity[];
  /** Atoms that are stereocentres (pseudo-asymmetric ones and ring pairs included). */
  readonly stereocentres: readonly number[];
  /** Double bonds with two different arrangements. */
  readonly stereoDoubleBonds: ReadonlyArray<readonly [number, number]>;
}

/**
 * Exact topological equivalence and the substitution test of a constitution.
 *
 * Two atoms share an orbit when an automorphism maps one onto the other. They share a shift class when such an
 * automorphism exists that keeps every configuration that stays in place, or turns over all of them: the
 * constitutional form of "related by rotation or by reflection". Where the automorphism moves stereogenic units onto
 * each other, the atoms are taken as equivalent, because at least one stereoisomer makes them so; for the hydrogens
 * of a CH2 the opposite holds, as one stereoisomer (such as the meso form of a 1,3-diol) tells them apart.
 *
 * @param graph - connected, at most 40 heavy atoms. Read only.
 * @param analysis - analysis of the same graph; made here when absent. Read only.
 * @see Mislow & Raban, Top. Stereochem. 1967, 1, 1 (from memory): homotopic, enantiotopic and diastereotopic groups.
 */
export function findEquivalence(graph: MolecularGraph, analysis: StructureAnalysis = analyseStructure(graph)): Equivalence {
  const normalised = normaliseGraph(analysis);
  const units = listStereoUnits(normalised);
  const isStereogenic = findStereogenicUnits(normalised, units);
  const orbits = partition(normalised, (atom, other) => findAutomorphism(normalised, [[atom, other]]) !== null);
  const shiftClasses = partition(
    normalised,
    (atom, other) =>
      orbits[atom] === orbits[other] &&
      (hasSymmetry(normalised, units, isStereogenic, [[atom, other]], 1, 'lenient') ||
        hasSymmetry(normalised, units, isStereogenic, [[atom, other]], -1, 'lenient')),
  );
  const stereocentres: number[] = [];
  const stereoDoubleBonds: (readonly [number, number])[] = [];
  units.forEach((unit, index) => {
    if (!isStereogenic[index]) return;
    if (unit.kind === 'centre') stereocentres.push(unit.atom);
    else if (unit.isDoubleBond) stereoDoubleBonds.push([unit.ends[0].atom, unit.ends[1].atom]);
  });
  return {
    orbits,
    orbitCount: countClasses(orbits),
    shiftClasses,
    shiftClassCount: countClasses(shiftClasses),
    hydrogenTopicity: Array.from({ length: graph.atomCount }, (_, atom) => topicityOf(normalised, units, isStereogenic, atom)),
    stereocentres,
    stereoDoubleBonds,
  };
}

/** Groups atoms of equal colour by a relation that is known to be an equivalence; each is compared with first members only. */
function partition(normalised: NormalisedGraph, isSame: (atom: number, first: number) => boolean): Uint8Array {
  const classes = new Uint8Array(normalised.atomCount);
  const firsts: number[] = [];
  for (let atom = 0; atom < normalised.atomCount; atom++) {
    let found = firsts.findIndex((first) => normalised.colours[first] === normalised.colours[atom] && isSame(atom, first));
    if (found === -1) found = firsts.push(atom) - 1;
    classes[atom] = found;
  }
  return classes;
}

function countClasses(classes: Uint8Array): number {
  return classes.length === 0 ? 0 : Math.max(...classes) + 1;
}

/**
 * Is there an automorphism with the forced images that acts as a rotation (+1) or a reflection (−1) on the units?
 * `strict` forbids moving stereogenic units outside cages, `lenient` allows it. Bonds keep their side under both.
 */
function hasSymmetry(
  normalised: NormalisedGraph,
  units: readonly StereoUnit[],
  isStereogenic: readonly boolean[],
  forced: ReadonlyArray<readonly [number, number]>,
  hand: 1 | -1,
  policy: 'strict' | 'lenient',
): boolean {
  const checks = units.map((unit, index): AutomorphismCheck => {
    const wanted = unit.kind === 'centre' ? hand : 1;
    const mayMove = policy === 'lenient' || !isStereogenic[index] || (unit.kind === 'centre' && unit.inCage);
    return {
      atoms: unitAtoms(normalised, unit),
      accepts: (image) => {
        const parity = unitParity(normalised, unit, image);
        return parity === 0 ? mayMove : parity === wanted;
      },
    };
  });
  return findAutomorphism(normalised, forced, checks) !== null;
}

/** Substitution test on the two hydrogens of one atom, put as a search for the symmetry that exchanges them. */
function topicityOf(
  normalised: NormalisedGraph,
  units: readonly StereoUnit[],
  isStereogenic: readonly boolean[],
  atom: number,
): HydrogenTopicity {
  const { analysis, atomCount: n, bondTypes } = normalised;
  const { atomicNumbers, hydrogens } = analysis.graph;
  if (hydrogens[atom] !== 2 || (atomicNumbers[atom] !== 6 && atomicNumbers[atom] !== 14)) return 'none';
  const around = normalised.neighbourLists[atom];
  if (around.length === 0) return 'homotopic';

  /** Faces: both hydrogens lie in one plane with or across from the pair of places [left, right] of `axis`. */
  const exchangedAcross = (fixed: readonly number[], places: readonly number[]): HydrogenTopicity => {
    const stay = [atom, ...fixed].map((a) => [a, a] as const);
    if (places.length === 0) return 'homotopic';
    if (places.length === 2) {
      const swap = [...stay, [places[0], places[1]] as const, [places[1], places[0]] as const];
      if (hasSymmetry(normalised, units, isStereogenic, swap, 1, 'strict')) return 'homotopic';
    }
    const keep = [...stay, ...places.map((a) => [a, a] as const)];
    return hasSymmetry(normalised, units, isStereogenic, keep, -1, 'strict') ? 'enantiotopic' : 'diastereotopic';
  };

  if (analysis.hybridisation[atom] === 3) return exchangedAcross([], around);

  // =CH2: walk along cumulated double bonds to the atom at the far end.
  const walked = [atom];
  let end = around[0];
  let next = around[0];
  while (next !== -1) {
    walked.push(next);
    end = next;
    next = normalised.neighbourLists[end].find((b) => bondTypes[end * n + b] === 2 && !walked.includes(b)) ?? -1;
    if (analysis.hybridisation[end] !== 1) next = -1;
  }
  const places = normalised.neighbourLists[end].filter((b) => !walked.includes(b));
  // An even number of cumulated bonds (allene, ketene) turns the far plane by 90°: as in a CH2 between two places.
  const isCrossed = walked.length % 2 === 1;
  if (isCrossed) return exchangedAcross(walked.slice(1), places);
  if (places.length === 0) return 'homotopic';
  if (places.length === 1) return 'diastereotopic';
  const swap = [...walked.map((a) => [a, a] as const), [places[0], places[1]] as const, [places[1], places[0]] as const];
  const isExchanged =
    hasSymmetry(normalised, units, isStereogenic, swap, 1, 'strict') || hasSymmetry(normalised, units, isStereogenic, swap, -1, 'strict');
  return isExchanged ? 'homotopic' : 'diastereotopic';
}
