import { EVIDENCE_LIMITS, infraredBand } from '../schemas/evidence.js';
import { isHeading, splitLines } from './paste-table.js';

export interface PastedRows<Column extends string> {
  /** Cells as a form shows them. */
  readonly cells: ReadonlyArray<Record<Column, string>>;
  /** What was skipped or read differently from how it was written. */
  readonly notes: readonly string[];
}

const INTENSITIES = infraredBand.shape.intensity.unwrap().options;
/** Letters and words by which tables of bands say how strong one is. */
const INTENSITY_WORDS: Readonly<Record<string, (typeof INTENSITIES)[number]>> = {
  w: 'weak',
  vw: 'weak',
  m: 'medium',
  med: 'medium',
  s: 'strong',
  vs: 'strong',
  b: 'broad',
  br: 'broad',
};

/** Intensity of a band as the document writes it; text that is none of them stays, so that the form can say so. */
export function readIntensity(cell: string): string {
  const word = cell.trim().toLowerCase().replace(/[().]/g, '');
  return INTENSITIES.find((known) => known === word) ?? INTENSITY_WORDS[word] ?? cell.trim();
}

/** Reads IR bands: a wavenumber and, if there is one, its intensity on each line. */
export function parseBandTable(text: string): PastedRows<'wavenumber' | 'intensity'> {
  return readRows(text, EVIDENCE_LIMITS.bands, 'bands', ([wavenumber = '', intensity = '']) => ({
    wavenumber: wavenumber.replace(/\s*cm\s*(\^?-1|⁻¹)\.?$/i, '').trim(),
    intensity: readIntensity(intensity),
  }));
}

/** Reads mass peaks: m/z and, if there is one, an intensity on each line. */
export function parsePeakTable(text: string): PastedRows<'mz' | 'intensity'> {
  return readRows(text, EVIDENCE_LIMITS.peaks, 'peaks', ([mz = '', intensity = '']) => ({
    mz: mz.replace(/^m\/z\s*/i, '').trim(),
    intensity: intensity.replace(/\s*%$/, '').trim(),
  }));
}

function readRows<Column extends string>(
  text: string,
  most: number,
  what: string,
  read: (cells: readonly string[]) => Record<Column, string>,
): PastedRows<Column> {
  const notes: string[] = [];
  const rows: Record<Column, string>[] = [];
  for (const { line, cells } of splitLines(text)) {
    if (rows.length === 0 && isHeading(cells.map((cell) => cell.replace(/\s*cm.*$/i, '')))) {
      notes.push(`Line ${line} skipped: heading`);
      continue;
    }
    rows.push(read(cells));
    if (cells.slice(2).some((cell) => cell !== '')) notes.push(`Line ${line}: cells beyond the second are not used`);
  }
  if (rows.length > most) notes.push(`only the first ${most} ${what} are taken`);
  return { cells: rows.slice(0, most), notes };
}
