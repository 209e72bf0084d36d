import { type CarbonSignal, type CarbonWindow, type EvidenceOptions, HYBRIDISATIONS } from '../schemas/evidence.js';
import type { FormulaCounts } from './formula.js';
import { SHIFT_RANGES, type ShiftRange } from './shift-window-table.js';

/** Kinds of neighbour atoms that the ranges tell apart, by what they do to the shift: O and F; N; S and P; Cl and Br; I and Si. */
export const NEIGHBOUR_KINDS = ['O', 'N', 'S', 'X', 'Z'] as const;
export type NeighbourKind = (typeof NEIGHBOUR_KINDS)[number];
const KIND_OF: Readonly<Record<string, NeighbourKind>> = { O: 'O', F: 'O', N: 'N', S: 'S', P: 'S', Cl: 'X', Br: 'X', I: 'Z', Si: 'Z' };

export const HYBRIDISATION_OF = { single: 'sp3', double: 'sp2', triple: 'sp', cumulated: 'sp' } as const;

/** null for C and H. */
export function neighbourKindOf(symbol: string): NeighbourKind | null {
  return KIND_OF[symbol] ?? null;
}

/** Name of a set of bonded heteroatoms in the ranges: their kinds in order; three or more are not told apart. */
export function neighboursName(kinds: readonly NeighbourKind[]): string {
  if (kinds.length >= 3) return '3';
  return [...kinds].sort((a, b) => NEIGHBOUR_KINDS.indexOf(a) - NEIGHBOUR_KINDS.indexOf(b)).join('');
}

/**
 * What a 13C shift says of its carbon, with wide margins: every kind of carbon stays whose range of observed shifts
 * (`shift-window-table`, fitted) holds this shift and whose heteroatoms the formula has.
 *
 * @param shift - ppm. @param hydrogens - attached to the carbon; undefined = not known.
 * @param counts - the formula, of which only the heteroatoms matter.
 * @param ranges - another table, for fitting one.
 * @returns no restriction at all where no kind of carbon was ever seen at this shift.
 */
export function deriveWindow(
  shift: number,
  hydrogens: number | undefined,
  counts: FormulaCounts,
  ranges: readonly ShiftRange[] = SHIFT_RANGES,
): CarbonWindow {
  const available = { O: 0, N: 0, S: 0, X: 0, Z: 0 };
  for (const [symbol, count] of counts) {
    const kind = neighbourKindOf(symbol);
    if (kind !== null) available[kind] += count;
  }
  const total = NEIGHBOUR_KINDS.reduce((sum, kind) => sum + available[kind], 0);
  const fitting = ranges.filter(
    (range) =>
      (hydrogens === undefined || range.hydrogens === hydrogens) &&
      shift >= range.low &&
      shift <= range.high &&
      isAvailable(range, available, total),
  );
  if (fitting.length === 0) return { hybridisations: [...HYBRIDISATIONS], heteroNeighbours: { min: 0, max: 4 } };
  return {
    hybridisations: HYBRIDISATIONS.filter((hybridisation) => fitting.some(({ bonds }) => HYBRIDISATION_OF[bonds] === hybridisation)),
    heteroNeighbours: {
      min: Math.min(...fitting.map(({ neighbours }) => (neighbours === '3' ? 3 : neighbours.length))),
      max: Math.max(...fitting.map(({ neighbours }) => (neighbours === '3' ? 4 : neighbours.length))),
    },
  };
}

function isAvailable({ neighbours }: ShiftRange, available: Readonly<Record<NeighbourKind, number>>, total: number): boolean {
  if (neighbours === '3') return total >= 3;
  return NEIGHBOUR_KINDS.every((kind) => [...neighbours].filter((name) => name === kind).length <= available[kind]);
}

/**
 * The window that holds for a signal: its own, or the derived one where the options ask for it.
 *
 * @param options - `shiftWindows` absent counts as off: resolve the options first.
 * @param counts - of the document's formula. @param ranges - another table than the fitted one.
 * @returns null when the signal has no window.
 */
export function windowOf(
  signal: CarbonSignal,
  { shiftWindows }: Pick<EvidenceOptions, 'shiftWindows'>,
  counts: FormulaCounts,
  ranges: readonly ShiftRange[] = SHIFT_RANGES,
): CarbonWindow | null {
  if (signal.window !== undefined) return signal.window;
  return shiftWindows === true ? deriveWindow(signal.shift, signal.hydrogens, counts, ranges) : null;
}
