import { parseEvidence } from '../../../../shared/chemistry/check-evidence';
import { CARBON_TOLERANCE, PROTON_TOLERANCE, signalsNear, type CorrelationKind } from '../../../../shared/chemistry/correlations';
import {
  correlations,
  evidenceOptions,
  type CarbonWindow,
  type EvidenceDocument,
  type ValenceGroup,
} from '../../../../shared/schemas/evidence';
import { parseFormula, type FormulaCounts } from '../../../../shared/chemistry/formula';
import { readIntensity } from '../../../../shared/chemistry/paste-bands';
import { deriveWindow } from '../../../../shared/chemistry/shift-windows';
import type { InputIssue } from '../../../../shared/schemas/problem';
import { parseNumberText } from '../../../lib/numbers';
import { DERIVED, readWindowText, windowText, type WindowText } from './window-text';

export interface CarbonRow {
  shift: string;
  hydrogens: string;
  count: string;
  window: WindowText;
}
export interface ProtonRow {
  shift: string;
  count: string;
  multiplicity: string;
  couplings: string;
}
export interface PairRow {
  first: string;
  second: string;
}
export interface BandRow {
  wavenumber: string;
  intensity: string;
}
export interface PeakRow {
  mz: string;
  intensity: string;
}
export interface RequiredRow {
  smiles: string;
  count: string;
  label: string;
}
export interface ExcludedRow {
  smiles: string;
  label: string;
}

/**
 * Evidence while it is being typed: numbers stay text, so that half-typed and wrong input stays on the page. JSON-safe,
 * because unsaved edits are kept in the browser.
 */
export interface EvidenceDraft {
  formula: string;
  required: RequiredRow[];
  excluded: ExcludedRow[];
  carbons: CarbonRow[];
  protons: ProtonRow[];
  pairs: Record<CorrelationKind, PairRow[]>;
  pairLimits: { cosyBonds: string; hmbcBonds: string; exceptions: string };
  bands: BandRow[];
  peaks: PeakRow[];
  options: {
    solvent: string;
    mergeResonanceForms: boolean;
    plausibility: boolean;
    disabledRules: string[];
    smallestRing: string;
    largestRing: string;
    carbonList: 'complete' | 'partial';
    /** null: all in a ranking, none when counting or listing. */
    valenceGroups: ValenceGroup[] | null;
    /** null: on in rankings. */
    shiftWindows: boolean | null;
    keep: string;
    maxSeconds: string;
    maxConstitutions: string;
  };
}

const text = (value: number | null | undefined): string => (value === undefined || value === null ? '' : String(value));

const pairRows = (pairs: readonly (readonly [number, number])[]): PairRow[] =>
  pairs.map(([first, second]) => ({ first: String(first), second: String(second) }));

export function draftOf(document: EvidenceDocument): EvidenceDraft {
  const { options } = document;
  return {
    formula: document.formula,
    required: document.fragments.required.map(({ smiles, count, label }) => ({ smiles, count: String(count), label: label ?? '' })),
    excluded: document.fragments.excluded.map(({ smiles, label }) => ({ smiles, label: label ?? '' })),
    carbons: document.carbonSignals.map(({ shift, hydrogens, count, window }) => ({
      shift: String(shift),
      hydrogens: text(hydrogens),
      count: text(count),
      window: windowText(window),
    })),
    protons: document.protonSignals.map(({ shift, count, multiplicity, couplings }) => ({
      shift: String(shift),
      count: text(count),
      multiplicity: multiplicity ?? '',
      couplings: (couplings ?? []).join(', '),
    })),
    pairs: {
      cosy: pairRows(document.correlations.cosy),
      hsqc: pairRows(document.correlations.hsqc),
      hmbc: pairRows(document.correlations.hmbc),
    },
    pairLimits: {
      cosyBonds: String(document.correlations.cosyBonds),
      hmbcBonds: String(document.correlations.hmbcBonds),
      exceptions: String(document.correlations.exceptions),
    },
    options: {
      solvent: options.solvent,
      mergeResonanceForms: options.mergeResonanceForms,
      plausibility: options.plausibility,
      disabledRules: options.disabledRules,
      smallestRing: String(options.ringSizes.min),
      largestRing: text(options.ringSizes.max),
      carbonList: options.carbonList,
      valenceGroups: options.valenceGroups ?? null,
      shiftWindows: options.shiftWindows ?? null,
      keep: String(options.keep),
      maxSeconds: text(options.maxSeconds),
      maxConstitutions: text(options.maxConstitutions),
    },
    bands: document.infraredBands.map(({ wavenumber, intensity }) => ({ wavenumber: String(wavenumber), intensity: intensity ?? '' })),
    peaks: document.massPeaks.map(({ mz, intensity }) => ({ mz: String(mz), intensity: text(intensity) })),
  };
}

export function emptyDraft(): EvidenceDraft {
  const options = evidenceOptions.parse({});
  return draftOf({
    formula: '',
    fragments: { required: [], excluded: [] },
    carbonSignals: [],
    protonSignals: [],
    infraredBands: [],
    massPeaks: [],
    correlations: correlations.parse({}),
    options,
  });
}

export const EMPTY_CARBON: CarbonRow = { shift: '', hydrogens: '', count: '', window: DERIVED };
export const EMPTY_PROTON: ProtonRow = { shift: '', count: '', multiplicity: '', couplings: '' };
export const EMPTY_PAIR: PairRow = { first: '', second: '' };
export const EMPTY_BAND: BandRow = { wavenumber: '', intensity: '' };
export const EMPTY_PEAK: PeakRow = { mz: '', intensity: '' };
const isBlank = (row: CarbonRow | ProtonRow | PairRow | BandRow | PeakRow): boolean =>
  Object.values(row).every((cell: string) => cell.trim() === '');
const indexesOfFilled = (rows: readonly (CarbonRow | ProtonRow | PairRow | BandRow | PeakRow)[]): number[] =>
  rows.flatMap((row, index) => (isBlank(row) ? [] : [index]));

/** A number, nothing for an empty cell, or the text itself, which the schema then refuses by name. */
function numberOrText(cell: string): number | string | undefined {
  const read = parseNumberText(cell);
  return read.kind === 'number' ? read.value : read.kind === 'empty' ? undefined : cell;
}

function couplingsOf(cell: string): (number | string)[] | undefined {
  // A comma between digits without a blank is a decimal comma only when no other separator says otherwise.
  const parts = cell.split(/\s*;\s*|,\s+|\s+|(?<=\.\d+),/).filter((part) => part !== '');
  return parts.length === 0 ? undefined : parts.map((part) => numberOrText(part) ?? part);
}

const defined = (entries: Record<string, unknown>): Record<string, unknown> =>
  Object.fromEntries(Object.entries(entries).filter(([, value]) => value !== undefined));

export type DraftResult =
  | { readonly ok: true; readonly document: EvidenceDocument; readonly notes: readonly string[]; readonly issues: readonly [] }
  | { readonly ok: false; readonly issues: readonly InputIssue[] };

/** Reads a draft as a document. Issue paths count the rows of the draft, blank ones included, so that cells find theirs. */
export function readDraft(draft: EvidenceDraft): DraftResult {
  const carbonRows = indexesOfFilled(draft.carbons);
  const protonRows = indexesOfFilled(draft.protons);
  const bandRows = indexesOfFilled(draft.bands);
  const peakRows = indexesOfFilled(draft.peaks);
  const { pairs } = draft;
  const pairsAt = { cosy: indexesOfFilled(pairs.cosy), hsqc: indexesOfFilled(pairs.hsqc), hmbc: indexesOfFilled(pairs.hmbc) };
  const pairsOf = (kind: CorrelationKind): (number | string)[][] =>
    pairsAt[kind].map((index) => {
      const { first, second } = draft.pairs[kind][index]!;
      return [numberOrText(first) ?? '', numberOrText(second) ?? ''];
    });
  const { options, pairLimits } = draft;
  const result = parseEvidence({
    formula: draft.formula,
    fragments: {
      required: draft.required.map(({ smiles, count, label }) =>
        defined({ smiles, count: numberOrText(count) ?? count, label: label === '' ? undefined : label }),
      ),
      excluded: draft.excluded.map(({ smiles, label }) => defined({ smiles, label: label === '' ? undefined : label })),
    },
    carbonSignals: carbonRows.map((index) => {
      const row = draft.carbons[index]!;
      return defined({
        shift: numberOrText(row.shift) ?? '',
        hydrogens: numberOrText(row.hydrogens),
        count: numberOrText(row.count),
        window: readWindowText(row.window),
      });
    }),
    protonSignals: protonRows.map((index) => {
      const row = draft.protons[index]!;
      return defined({
        shift: numberOrText(row.shift) ?? '',
        count: numberOrText(row.count),
        multiplicity: row.multiplicity.trim() === '' ? undefined : row.multiplicity,
        couplings: couplingsOf(row.couplings),
      });
    }),
    infraredBands: bandRows.map((index) => {
      const { wavenumber, intensity } = draft.bands[index]!;
      return defined({
        wavenumber: numberOrText(wavenumber) ?? '',
        intensity: intensity.trim() === '' ? undefined : readIntensity(intensity),
      });
    }),
    massPeaks: peakRows.map((index) => {
      const { mz, intensity } = draft.peaks[index]!;
      return defined({ mz: numberOrText(mz) ?? '', intensity: numberOrText(intensity) });
    }),
    correlations: {
      cosy: pairsOf('cosy'),
      hsqc: pairsOf('hsqc'),
      hmbc: pairsOf('hmbc'),
      cosyBonds: numberOrText(pairLimits.cosyBonds) ?? '',
      hmbcBonds: numberOrText(pairLimits.hmbcBonds) ?? '',
      exceptions: numberOrText(pairLimits.exceptions) ?? '',
    },
    options: defined({
      solvent: options.solvent,
      mergeResonanceForms: options.mergeResonanceForms,
      plausibility: options.plausibility,
      disabledRules: options.disabledRules,
      ringSizes: { min: numberOrText(options.smallestRing) ?? '', max: numberOrText(options.largestRing) ?? null },
      carbonList: options.carbonList,
      valenceGroups: options.valenceGroups ?? undefined,
      keep: numberOrText(options.keep) ?? '',
      maxSeconds: numberOrText(options.maxSeconds) ?? null,
      shiftWindows: options.shiftWindows ?? undefined,
      maxConstitutions: numberOrText(options.maxConstitutions),
    }),
  });
  if (result.ok) return { ok: true, document: result.document, notes: result.notes, issues: [] };
  const rowsBack = (path: string): string =>
    path
      .replace(/^carbonSignals\[(\d+)\]/, (_, at: string) => `carbonSignals[${carbonRows[Number(at)] ?? at}]`)
      .replace(/^protonSignals\[(\d+)\]/, (_, at: string) => `protonSignals[${protonRows[Number(at)] ?? at}]`)
      .replace(/^infraredBands\[(\d+)\]/, (_, at: string) => `infraredBands[${bandRows[Number(at)] ?? at}]`)
      .replace(/^massPeaks\[(\d+)\]/, (_, at: string) => `massPeaks[${peakRows[Number(at)] ?? at}]`)
      .replace(
        /^correlations\.(cosy|hsqc|hmbc)\[(\d+)\]/,
        (_, kind: CorrelationKind, at: string) => `correlations.${kind}[${pairsAt[kind][Number(at)] ?? at}]`,
      );
  return { ok: false, issues: result.issues.map((issue) => ({ ...issue, path: rowsBack(issue.path) })) };
}

/**
 * Shifts of the listed signals that a shift of a 2D pair can mean, nearest first; null while the cell holds no number.
 * Rows whose shift is no number yet are passed over.
 */
export function signalsMeant(draft: EvidenceDraft, nucleus: '1H' | '13C', cell: string): readonly string[] | null {
  const read = parseNumberText(cell);
  if (read.kind !== 'number') return null;
  const listed = (nucleus === '13C' ? draft.carbons : draft.protons).flatMap(({ shift }) => {
    const own = parseNumberText(shift);
    return own.kind === 'number' ? [{ shift: own.value, text: shift.trim() }] : [];
  });
  return signalsNear(listed, read.value, nucleus === '13C' ? CARBON_TOLERANCE : PROTON_TOLERANCE).map((index) => listed[index]!.text);
}

/** What the shift of a row says of its carbon; null while it is no number, or where such windows are switched off. */
export function derivedWindow(draft: EvidenceDraft, row: number): CarbonWindow | null {
  const shift = parseNumberText(draft.carbons[row]?.shift ?? '');
  if (draft.options.shiftWindows === false || shift.kind !== 'number') return null;
  const hydrogens = parseNumberText(draft.carbons[row]?.hydrogens ?? '');
  const formula = parseFormula(draft.formula);
  return deriveWindow(shift.value, hydrogens.kind === 'number' ? hydrogens.value : undefined, formula.ok ? formula.counts : NO_ATOMS);
}
const NO_ATOMS: FormulaCounts = new Map();

/** First message for a field or anything below it. */
export function issueAt(issues: readonly InputIssue[], path: string): string | undefined {
  return issues.find((issue) => issue.path === path || issue.path.startsWith(`${path}.`) || issue.path.startsWith(`${path}[`))?.message;
}
