import type { ShiftPredictor } from './predicted-shifts.js';
import { FITTED_CARBON, FITTED_PROTON } from './fitted-increments.js';
import { applyCorrections, CARBON_SPREAD, createTextbookTable, PROTON_SPREAD, type IncrementTable } from './increment-table.js';
import { CARBON_CLASSES, IS_EXCHANGEABLE_CLASS, PROTON_CLASSES } from './shift-classes.js';
import { createIncrementPredictor, type SpreadModel } from './shift-predictor.js';
import { TEXTBOOK_CARBON } from './textbook-carbon.js';
import { TEXTBOOK_PROTON } from './textbook-proton.js';

/** Spread of exchangeable hydrogens too rare in the data, ppm: half the width of their ranges (SCIENCE.md 3.1). */
const EXCHANGEABLE_FLOOR = 2;

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
  const spread = {
    carbonFloor: new Float32Array(CARBON_CLASSES.length).fill(3),
    protonFloor: new Float32Array(PROTON_CLASSES.length).fill(0.25),
    carbonWeight: 0.02,
    protonWeight: 0.02,
  };
  if (source === 'textbook') return createIncrementPredictor(carbon, proton, spread);
  applyCorrections(carbon, FITTED_CARBON.corrections);
  applyCorrections(proton, FITTED_PROTON.corrections);
  const fitted: SpreadModel = {
    carbonFloor: Float32Array.from(CARBON_CLASSES, (name) => FITTED_CARBON.floors[name] ?? FITTED_CARBON.floorElsewhere),
    protonFloor: Float32Array.from(
      PROTON_CLASSES,
      (name, row) => FITTED_PROTON.floors[name] ?? (IS_EXCHANGEABLE_CLASS[row] === 1 ? EXCHANGEABLE_FLOOR : FITTED_PROTON.floorElsewhere),
    ),
    carbonWeight: FITTED_CARBON.termWeight,
    protonWeight: FITTED_PROTON.termWeight,
  };
  return createIncrementPredictor(carbon, proton, fitted);
}
