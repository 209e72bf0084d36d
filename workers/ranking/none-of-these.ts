import type { CarbonObservations, ProtonObservations } from './observations.js';
import { UNKNOWN_HYDROGENS } from './observations.js';
import type { ScoreModel } from './score-model.js';

/**
 * Where 13C signals of real compounds lie, by attached hydrogens: counts in bins of 10 ppm from −40 ppm (234,000
 * signals), and 1H signals in bins of 0.5 ppm from −1 ppm (86,000 signals). Statistics of open data: nmrshiftdb2
 * (S. Kuhn, N. E. Schlörer, Magn. Reson. Chem. 2015, 53, 582), public export.
 */
const CARBON_BIN = 10;
const CARBON_START = -40;
const CARBON_COUNTS: readonly (readonly number[])[] = [
  [
    0, 1, 0, 4, 3, 92, 182, 1523, 1297, 843, 782, 1666, 1883, 1331, 2283, 5459, 8679, 14725, 11452, 10417, 9448, 5255, 1514, 1570, 1242,
    491, 53, 19, 9, 5,
  ],
  [
    1, 2, 1, 9, 19, 119, 1009, 2551, 3166, 3174, 2801, 4621, 1620, 1563, 4232, 10874, 27654, 11541, 3176, 1129, 250, 74, 278, 354, 94, 0, 0,
    0, 0, 0,
  ],
  [1, 0, 3, 7, 205, 1597, 12513, 10748, 5764, 2820, 5060, 1398, 171, 189, 357, 943, 249, 65, 4, 1, 0, 1, 0, 0, 0, 0, 0, 0, 0, 0],
  [0, 1, 1, 267, 993, 10611, 9906, 1857, 642, 4397, 508, 2, 1, 0, 0, 0, 0, 0, 0, 2, 0, 2, 0, 0, 1, 0, 0, 0, 0, 0],
];
const PROTON_BIN = 0.5;
const PROTON_START = -1;
const PROTON_COUNTS: readonly number[] = [
  13, 62, 431, 3053, 7534, 6444, 6621, 4553, 4846, 7275, 6030, 4344, 3984, 3235, 3126, 4469, 7853, 5693, 2882, 1358, 658, 505, 330, 233,
  184, 168, 169, 105, 90, 47, 24, 18, 6, 11,
];

/** −ln density (per ppm) of a shift in a histogram, one count added to each bin; beyond its ends that of an empty bin. */
function histogramCost(counts: readonly number[], start: number, width: number, shift: number): number {
  const total = counts.reduce((sum, count) => sum + count, counts.length);
  const count = counts[Math.floor((shift - start) / width)] ?? 0;
  return -Math.log((count + 1) / (total * width));
}

/** −ln density of a 13C shift of any compound; without known hydrogens over all types. */
export function anyCarbonCost(shift: number, hydrogens: number): number {
  if (hydrogens !== UNKNOWN_HYDROGENS) return histogramCost(CARBON_COUNTS[hydrogens], CARBON_START, CARBON_BIN, shift);
  const all = CARBON_COUNTS[0].map((_, bin) => CARBON_COUNTS.reduce((sum, counts) => sum + counts[bin], 0));
  return histogramCost(all, CARBON_START, CARBON_BIN, shift);
}

/** −ln density of a 1H shift of any compound. */
export function anyProtonCost(shift: number): number {
  return histogramCost(PROTON_COUNTS, PROTON_START, PROTON_BIN, shift);
}

/**
 * Log-likelihood of the signals under "the right structure is not in the list" (SCIENCE.md 8.3): each signal lies where
 * signals of its type lie in compounds at large, tempered like the candidates' scores.
 */
export function noneOfTheseLogLikelihood(carbons: CarbonObservations, protons: ProtonObservations, model: ScoreModel): number {
  let carbonCost = 0;
  let protonCost = 0;
  for (let i = 0; i < carbons.size; i++) carbonCost += anyCarbonCost(carbons.shift[i], carbons.hydrogens[i]);
  for (let i = 0; i < protons.size; i++) protonCost += anyProtonCost(protons.shift[i]);
  return -carbonCost / model.temperature.carbon - protonCost / model.temperature.proton;
}
