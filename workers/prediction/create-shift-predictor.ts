import type { ShiftPredictor } from './predicted-shifts.js';
import { FITTED_CARBON, FITTED_PROTON } from './fitted-increments.js';
import {
  applyCorrections,
  CARBON_SPREAD,
  createTextbookTable,
  PROTON_SPREAD,
  type IncrementTable,
  weightVariances,
} from './increment-table.js';
import { CARBON_CLASSES, IS_EXCHANGEABLE_CLASS, PROTON_CLASSES } from './shift-classes.js';
import { createIncrementPredictor, type SpreadModel } from './shift-predictor.js';
import { TEXTBOOK_CARBON } from './textbook-carbon.js';
import { TEXTBOOK_PROTON } from './textbook-proton.js';

/** Spread of exchangeable hydrogens too rare in the data, ppm: half the width of their ranges (SCIENCE.md 3.1). */
const EXCHANGEABLE_FLOOR = 2;

/** Share of the prior variances that published increments are taken to have: they are far better than a guess. */
const TEXTBOOK_WEIGHT = 0.02;

/** Published increments of both nuclei as tables: the start of every fit. */
export function createTextbookTables(): { carbon: IncrementTable; proton: IncrementTable } {
  return {
    carbon: createTextbookTable(CARBON_CLASSES, TEXTBOOK_CARBON, CARBON_SPREAD),
    proton: createTextbookTable(PROTON_CLASSES, TEXTBOOK_PROTON, PROTON_SPREAD),
  };
}

/**
 * Makes the shift predictor of the hot path.
 *
 * @param source - `fitted`: published increments with the corrections fitted on open data (the product);
 *   `textbook`: published increments alone, the yardstick of the bench.
 */
export function createShiftPredictor(source: 'fitted' | 'textbook' = 'fitted'): ShiftPredictor {
  const { carbon, proton } = createTextbookTables();
  if (source === 'textbook') {
    weightVariances(carbon, TEXTBOOK_WEIGHT, CARBON_SPREAD);
    weightVariances(proton, TEXTBOOK_WEIGHT, PROTON_SPREAD);
    return createIncrementPredictor(carbon, proton, {
      carbonFloor: new Float32Array(CARBON_CLASSES.length).fill(3),
      protonFloor: new Float32Array(PROTON_CLASSES.length).fill(0.25),
    });
  }
  applyCorrections(carbon, FITTED_CARBON.corrections);
  applyCorrections(proton, FITTED_PROTON.corrections);
  weightVariances(carbon, FITTED_CARBON.termWeight, CARBON_SPREAD);
  weightVariances(proton, FITTED_PROTON.termWeight, PROTON_SPREAD);
  const fitted: SpreadModel = {
    carbonFloor: Float32Array.from(CARBON_CLASSES, (name) => FITTED_CARBON.floors[name] ?? FITTED_CARBON.floorElsewhere),
    protonFloor: Float32Array.from(
      PROTON_CLASSES,
      (name, row) => FITTED_PROTON.floors[name] ?? (IS_EXCHANGEABLE_CLASS[row] === 1 ? EXCHANGEABLE_FLOOR : FITTED_PROTON.floorElsewhere),
    ),
  };
  return createIncrementPredictor(carbon, proton, fitted);
}
