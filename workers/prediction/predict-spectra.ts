import type { PredictedCarbon, PredictedProton, PredictedSpectra } from '../../shared/jobs/contract.js';
import type { MolecularGraph } from '../../shared/types/molecular-graph.js';
import { analyseStructure, type StructureAnalysis } from '../graph/analysis.js';
import { neighboursOf } from '../graph/automorphism.js';
import { findEquivalence } from '../graph/equivalence.js';
import { fillAtomTypes } from './atom-types.js';
import { createShiftPredictor } from './create-shift-predictor.js';
import { createPredictedShifts, type ShiftPredictor } from './predicted-shifts.js';
import { listProtonGroups, type ProtonGroup } from './proton-groups.js';
import { patternOf } from './proton-patterns.js';
import { IS_EXCHANGEABLE_CLASS, PROTON_CLASSES, protonClassOf } from './shift-classes.js';
import { exchangeBehaviourOf } from './solvents.js';
import { vinylPlaceDifference } from './vinyl-places.js';

/** Made on first use: building the increment tables takes some milliseconds. */
let sharedPredictor: ShiftPredictor | null = null;

/** Range middles of exchangeable hydrogens in other solvents than CDCl3 are wide, ppm. */
const EXCHANGEABLE_SD = 1.5;

/**
 * 13C and 1H spectra of a constitution: one entry for each set of equivalent carbons and for each set of equivalent
 * hydrogens, falling shift. The shifts are those of the hot path; the two hydrogens of a =CH2 are set apart about
 * their common shift, and exchangeable hydrogens take the range of the solvent.
 *
 * Multiplicities are first order at 400 MHz with typical couplings. In D2O and CD3OD hydrogens on O, N and S have no signal.
 *
 * @param graph - connected, 1 to 40 heavy atoms. Read only.
 * @param solvent - by its common name, default CDCl3; other names than the known ones count as CDCl3.
 * @returns shifts in ppm, couplings in Hz, atoms as indexes into the graph.
 */
export function predictSpectra(graph: MolecularGraph, solvent = 'CDCl3'): PredictedSpectra {
  const predictor = (sharedPredictor ??= createShiftPredictor());
  const analysis = analyseStructure(graph);
  const equivalence = findEquivalence(graph, analysis);
  const shifts = createPredictedShifts(graph.atomCount);
  predictor.predictInto(graph, analysis, shifts);
  const exchange = exchangeBehaviourOf(solvent);

  const carbons: PredictedCarbon[] = [];
  for (let shiftClass = 0; shiftClass < equivalence.shiftClassCount; shiftClass++) {
    const atoms: number[] = [];
    for (let a = 0; a < graph.atomCount; a++) if (equivalence.shiftClasses[a] === shiftClass) atoms.push(a);
    const [first] = atoms;
    if (graph.atomicNumbers[first] !== 6) continue;
    carbons.push({
      atoms,
      shift: round(shifts.carbonShift[first], 2),
      sd: round(shifts.carbonSd[first], 2),
      hydrogens: graph.hydrogens[first],
      basis: predictor.carbonRules[shifts.carbonRule[first]],
    });
  }

  const types = new Uint8Array(graph.atomCount);
  fillAtomTypes(analysis, types);
  const protons: PredictedProton[] = [];
  for (const group of listProtonGroups(analysis, equivalence)) {
    const [first] = group.atoms;
    const protonClass = protonClassOf(analysis, types, first);
    const isExchangeable = IS_EXCHANGEABLE_CLASS[protonClass] === 1;
    if (isExchangeable && exchange.isDeuterating) continue;
    const inSolvent = isExchangeable ? exchange.shifts[PROTON_CLASSES[protonClass]] : undefined;
    const pattern = isExchangeable
      ? exchangeablePattern(analysis, first)
      : patternOf(analysis, equivalence, group, shifts.protonShift, exchange);
    protons.push({
      atoms: group.atoms,
      shift: round(inSolvent ?? shifts.protonShift[first] + placeOffset(analysis, types, group), 3),
      sd: round(inSolvent === undefined ? shifts.protonSd[first] : Math.max(EXCHANGEABLE_SD, shifts.protonSd[first]), 3),
      count: group.count,
      multiplicity: pattern.multiplicity,
      couplings: pattern.couplings,
      exchangeable: isExchangeable,
      basis: predictor.protonRules[shifts.protonRule[first]],
    });
  }
  const byFallingShift = (a: { shift: number; atoms: readonly number[] }, b: { shift: number; atoms: readonly number[] }): number =>
    b.shift - a.shift || a.atoms[0] - b.atoms[0];
  return { carbons: carbons.sort(byFallingShift), protons: protons.sort(byFallingShift) };
}

/** OH, NH and SH: broadened by exchange or by nitrogen; thiols exchange slowly and stay sharp, but without a pattern that could be relied on. */
function exchangeablePattern(analysis: StructureAnalysis, atom: number): { multiplicity: string; couplings: readonly number[] } {
  return { multiplicity: analysis.graph.atomicNumbers[atom] === 16 ? 's' : 'br s', couplings: [] };
}

/** ppm by which one half of a =CH2 lies off the common shift of both. */
function placeOffset(analysis: StructureAnalysis, types: Uint8Array, group: ProtonGroup): number {
  if (group.half === 0 || analysis.hybridisation[group.atoms[0]] !== 2) return 0;
  const [partner] = neighboursOf(analysis, group.atoms[0]);
  const places = neighboursOf(analysis, partner).filter((b) => b !== group.atoms[0]);
  const difference = vinylPlaceDifference(types[places[0]], places.length > 1 ? types[places[1]] : null);
  return (group.half === 1 ? 1 : -1) * (difference / 2);
}

function round(value: number, digits: number): number {
  return Number(value.toFixed(digits));
}
