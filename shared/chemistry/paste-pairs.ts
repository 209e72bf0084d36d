import { EVIDENCE_LIMITS } from '../schemas/evidence.js';
import { PAIR_NUCLEI, type CorrelationKind } from './correlations.js';
import { isHeading, splitLines, withoutUnit } from './paste-table.js';

export interface PastedPairs {
  /** Cells as a form shows them, one row a pair. */
  readonly cells: readonly { readonly first: string; readonly second: string }[];
  /** What was skipped or read differently from how it was written. */
  readonly notes: readonly string[];
}

/** No proton resonates above this, ppm: such a shift is one of carbon (limit of the evidence document). */
const LARGEST_PROTON_SHIFT = 25;
const CARBON_HEADING = /13\s*C|¹³C|carbon|δ\s*C/i;
const PROTON_HEADING = /1\s*H(?!z)|¹H|proton|δ\s*H/i;

/**
 * Reads pairs of shifts pasted from a spreadsheet, two columns, the rest unused. Columns stand in the order of the form
 * unless a heading or a shift that no proton has says otherwise.
 */
export function parsePairTable(text: string, kind: CorrelationKind): PastedPairs {
  const notes: string[] = [];
  const lines = splitLines(text);
  let isSwapped = false;
  const rows: { first: string; second: string }[] = [];
  for (const { line, cells } of lines) {
    if (rows.length === 0 && isHeading(cells)) {
      notes.push(`Line ${line} skipped: heading`);
      const carbon = cells.findIndex((cell) => CARBON_HEADING.test(cell));
      const proton = cells.findIndex((cell) => PROTON_HEADING.test(cell) && !CARBON_HEADING.test(cell));
      if (carbon >= 0 && proton >= 0) isSwapped = kind === 'hsqc' ? proton < carbon : carbon < proton;
      continue;
    }
    rows.push({ first: withoutUnit(cells[0] ?? ''), second: withoutUnit(cells[1] ?? '') });
    if (cells.slice(2).some((cell) => cell !== '')) notes.push(`Line ${line}: cells beyond the second are not used`);
  }
  const ofProton = PAIR_NUCLEI[kind][0] === '1H' ? 'first' : 'second';
  const ofCarbon = ofProton === 'first' ? 'second' : 'first';
  const isCarbonShift = (cell: string): boolean => Number(cell) > LARGEST_PROTON_SHIFT;
  if (kind !== 'cosy' && !isSwapped)
    isSwapped = rows.some((row) => isCarbonShift(row[ofProton])) && !rows.some((row) => isCarbonShift(row[ofCarbon]));
  if (isSwapped && kind !== 'cosy') notes.push('columns exchanged, so that protons and carbons stand where they belong');
  if (rows.length > EVIDENCE_LIMITS.correlations) notes.push(`only the first ${EVIDENCE_LIMITS.correlations} pairs are taken`);
  const cells = rows
    .slice(0, EVIDENCE_LIMITS.correlations)
    .map(({ first, second }) => (isSwapped && kind !== 'cosy' ? { first: second, second: first } : { first, second }));
  return { cells, notes };
}
