import { MAX_DISTANCE, PATH_COUNT, shellTerm, TERM_BY_NAME, TERM_COUNT } from './features.js';
import { ATOM_TYPE_COUNT } from './atom-types.js';
import type { TextbookEntry } from './textbook-carbon.js';

/** Increments of one nucleus, class by class: row c, term t at `c * TERM_COUNT + t`. */
export interface IncrementTable {
  /** ppm. */
  readonly values: Float32Array;
  /** What each occurrence of the term adds to the variance of a prediction, ppm². */
  readonly variances: Float32Array;
  readonly classes: readonly string[];
}

/** How uncertain an increment is before data: standard deviations in ppm. */
export interface PriorSpread {
  readonly base: number;
  /** Substituents at one to four bonds on the main path; half of it on the others. */
  readonly byDistance: readonly [number, number, number, number];
  readonly ring: number;
  readonly pair: number;
  readonly chain: number;
}
/** Guesses from the scatter of textbook rules (common practice), refined where data exist. */
export const CARBON_SPREAD: PriorSpread = { base: 2, byDistance: [6, 3, 1.5, 0.7], ring: 3, pair: 4, chain: 2 };
export const PROTON_SPREAD: PriorSpread = { base: 0.2, byDistance: [0.4, 0.2, 0.1, 0.05], ring: 0.2, pair: 0.3, chain: 0.15 };

/** Prior standard deviation of a term, ppm. */
export function priorSpreadOf(term: number, spread: PriorSpread): number {
  const shellEnd = shellTerm(MAX_DISTANCE + 1, 0, 0);
  if (term < shellEnd) {
    const shell = Math.floor(term / ATOM_TYPE_COUNT);
    const width = spread.byDistance[Math.floor(shell / PATH_COUNT)];
    return shell % PATH_COUNT > 1 ? width / 2 : width;
  }
  if (term === TERM_COUNT - 1) return spread.base;
  return term < PAIR_START ? spread.ring : term < CHAIN_START ? spread.pair : spread.chain;
}
const PAIR_START = TERM_BY_NAME.get('alkyl&alkyl')!;
const CHAIN_START = TERM_BY_NAME.get('alkyl>alkyl')!;

/** Table with published increments only. @throws Error on an unknown class or term, or one given twice: a slip in the tables. */
export function createTextbookTable(classes: readonly string[], entries: readonly TextbookEntry[], spread: PriorSpread): IncrementTable {
  const values = new Float32Array(classes.length * TERM_COUNT);
  const variances = new Float32Array(classes.length * TERM_COUNT);
  for (let term = 0; term < TERM_COUNT; term++) {
    const variance = priorSpreadOf(term, spread) ** 2;
    for (let c = 0; c < classes.length; c++) variances[c * TERM_COUNT + term] = variance;
  }
  const isSet = new Set<number>();
  for (const { classes: names, term, value } of entries) {
    const offset = TERM_BY_NAME.get(term);
    if (offset === undefined) throw new Error(`Increment table: no term "${term}"`);
    for (const name of names) {
      const row = classes.indexOf(name);
      if (row === -1) throw new Error(`Increment table: no class "${name}"`);
      if (isSet.has(row * TERM_COUNT + offset)) throw new Error(`Increment table: "${name}" has "${term}" twice`);
      isSet.add(row * TERM_COUNT + offset);
      values[row * TERM_COUNT + offset] = value;
    }
  }
  return { values, variances, classes };
}

/**
 * Lays fitted corrections over a table. Text form, one class a line: `class|term=correction±spread;…`; the spread in
 * ppm, the correction added to what the table has.
 *
 * @throws Error on an unknown class or term: the fit belongs to another version of the terms.
 */
export function applyCorrections(table: IncrementTable, text: string): void {
  for (const line of text.split('\n')) {
    if (line === '') continue;
    const bar = line.indexOf('|');
    const row = table.classes.indexOf(line.slice(0, bar));
    if (row === -1) throw new Error(`Fitted increments: no class "${line.slice(0, bar)}"`);
    for (const item of line.slice(bar + 1).split(';')) {
      const equals = item.lastIndexOf('=');
      const offset = TERM_BY_NAME.get(item.slice(0, equals));
      if (offset === undefined) throw new Error(`Fitted increments: no term "${item.slice(0, equals)}"`);
      const [correction, spread] = item
        .slice(equals + 1)
        .split('±')
        .map(Number);
      table.values[row * TERM_COUNT + offset] += correction;
      table.variances[row * TERM_COUNT + offset] = spread ** 2;
    }
  }
}

/** A term never adds more than this multiple of its prior variance, however little is known of it. */
const VARIANCE_CAP = 2.25;

/** Variance that a term adds to a prediction: its own, weighted for what duplicates in the data hide, within the cap. */
export function termVariance(variance: number, weight: number, prior: number): number {
  return Math.min(weight * variance, VARIANCE_CAP * prior * prior);
}

/** Replaces the variances of a table by {@link termVariance}, so that a prediction only has to add them up. */
export function weightVariances(table: IncrementTable, weight: number, spread: PriorSpread): void {
  for (let term = 0; term < TERM_COUNT; term++) {
    const prior = priorSpreadOf(term, spread);
    for (let row = 0; row < table.classes.length; row++) {
      const index = row * TERM_COUNT + term;
      table.variances[index] = termVariance(table.variances[index], weight, prior);
    }
  }
}
