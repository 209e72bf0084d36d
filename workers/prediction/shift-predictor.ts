import type { MolecularGraph } from '../../shared/types/molecular-graph.js';
import type { StructureAnalysis } from '../graph/analysis.js';
import { MAX_ATOMS } from '../graph/analysis.js';
import { fillAtomTypes } from './atom-types.js';
import { createTermScratch, fillTerms, MAX_TERMS, TERM_COUNT } from './features.js';
import type { IncrementTable } from './increment-table.js';
import type { PredictedShifts, ShiftPredictor } from './predicted-shifts.js';
import { CARBON_RULES, PROTON_RULES, ruleOfCarbonClass, ruleOfProtonClass } from './rules.js';
import { carbonClassOf, modeOf, protonClassOf } from './shift-classes.js';

/** Spread that remains when every increment is well known, by class, ppm; the term variances come on top. */
export interface SpreadModel {
  readonly carbonFloor: Float32Array;
  readonly protonFloor: Float32Array;
}

/**
 * Predictor that adds increments: shift = Σ increments of the terms of the atom, variance = floor² + Σ variances.
 * Every class has a base and every term a variance, so each atom gets a finite number; what the tables have never seen
 * shows as a wide standard deviation.
 */
export function createIncrementPredictor(carbon: IncrementTable, proton: IncrementTable, spread: SpreadModel): ShiftPredictor {
  const types = new Uint8Array(MAX_ATOMS);
  const terms = new Int32Array(MAX_TERMS);
  const scratch = createTermScratch();
  const { carbonFloor, protonFloor } = spread;
  const carbonRuleOfClass = Uint8Array.from(carbon.classes, ruleOfCarbonClass);
  const protonRuleOfClass = Uint8Array.from(proton.classes, ruleOfProtonClass);

  function predictInto(graph: MolecularGraph, context: StructureAnalysis, out: PredictedShifts): void {
    const { atomCount: n, atomicNumbers, hydrogens } = graph;
    const { carbonShift, carbonSd, protonShift, protonSd, carbonRule, protonRule } = out;
    fillAtomTypes(context, types);
    for (let a = 0; a < n; a++) {
      const isCarbon = atomicNumbers[a] === 6;
      carbonShift[a] = carbonSd[a] = protonShift[a] = protonSd[a] = 0;
      carbonRule[a] = protonRule[a] = 0;
      if (!isCarbon && hydrogens[a] === 0) continue;
      const count = fillTerms(context, types, a, modeOf(types[a]), scratch, terms);
      if (isCarbon) {
        const row = carbonClassOf(context, types, a);
        const { values, variances } = carbon;
        const start = row * TERM_COUNT;
        let shift = 0;
        let variance = 0;
        for (let k = 0; k < count; k++) {
          shift += values[start + terms[k]];
          variance += variances[start + terms[k]];
        }
        carbonShift[a] = shift;
        carbonSd[a] = Math.sqrt(carbonFloor[row] * carbonFloor[row] + variance);
        carbonRule[a] = carbonRuleOfClass[row];
      }
      if (hydrogens[a] > 0) {
        const row = protonClassOf(context, types, a);
        const { values, variances } = proton;
        const start = row * TERM_COUNT;
        let shift = 0;
        let variance = 0;
        for (let k = 0; k < count; k++) {
          shift += values[start + terms[k]];
          variance += variances[start + terms[k]];
        }
        protonShift[a] = shift;
        protonSd[a] = Math.sqrt(protonFloor[row] * protonFloor[row] + variance);
        protonRule[a] = protonRuleOfClass[row];
      }
    }
  }
  return { predictInto, carbonRules: CARBON_RULES, protonRules: PROTON_RULES };
}
