import { parseEvidence } from '../../../../shared/chemistry/check-evidence';
import { correlations, evidenceOptions, type EvidenceDocument, type ValenceGroup } from '../../../../shared/schemas/evidence';
import type { InputIssue } from '../../../../shared/schemas/problem';
import { parseNumberText } from '../../../lib/numbers';

export interface CarbonRow {
  shift: string;
  hydrogens: string;
  count: string;
}
export interface ProtonRow {
  shift: string;
  count: string;
  multiplicity: string;
  couplings: string;
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
 * because unsaved edits are kept in the browser. What the form does not show (IR, MS, 2D) is carried along untouched.
 */
export interface EvidenceDraft {
  formula: string;
  required: RequiredRow[];
  excluded: ExcludedRow[];
  carbons: CarbonRow[];
  protons: ProtonRow[];
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
    keep: string;
    maxSeconds: string;
  };
  carried: Pick<EvidenceDocument, 'infraredBands' | 'massPeaks' | 'correlations'>;
}

const text = (value: number | null | undefined): string => (value === undefined || value === null ? '' : String(value));

export function draftOf(document: EvidenceDocument): EvidenceDraft {
  const { options } = document;
  return {
    formula: document.formula,
    required: document.fragments.required.map(({ smiles, count, label }) => ({ smiles, count: String(count), label: label ?? '' })),
    excluded: document.fragments.excluded.map(({ smiles, label }) => ({ smiles, label: label ?? '' })),
    carbons: document.carbonSignals.map(({ shift, hydrogens, count }) => ({
      shift: String(shift),
      hydrogens: text(hydrogens),
      count: text(count),
    })),
    protons: document.protonSignals.map(({ shift, count, multiplicity, couplings }) => ({
      shift: String(shift),
      count: text(count),
      multiplicity: multiplicity ?? '',
      couplings: (couplings ?? []).join(', '),
    })),
    options: {
      solvent: options.solvent,
      mergeResonanceForms: options.mergeResonanceForms,
      plausibility: options.plausibility,
      disabledRules: options.disabledRules,
      smallestRing: String(options.ringSizes.min),
      largestRing: text(options.ringSizes.max),
      carbonList: options.carbonList,
      valenceGroups: options.valenceGroups ?? null,
      keep: String(options.keep),
      maxSeconds: text(options.maxSeconds),
    },
    carried: { infraredBands: document.infraredBands, massPeaks: document.massPeaks, correlations: document.correlations },
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

export const EMPTY_CARBON: CarbonRow = { shift: '', hydrogens: '', count: '' };
export const EMPTY_PROTON: ProtonRow = { shift: '', count: '', multiplicity: '', couplings: '' };
const isBlank = (row: CarbonRow | ProtonRow): boolean => Object.values(row).every((cell: string) => cell.trim() === '');

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
  const carbonRows = draft.carbons.flatMap((row, index) => (isBlank(row) ? [] : [index]));
  const protonRows = draft.protons.flatMap((row, index) => (isBlank(row) ? [] : [index]));
  const { options } = draft;
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
      return defined({ shift: numberOrText(row.shift) ?? '', hydrogens: numberOrText(row.hydrogens), count: numberOrText(row.count) });
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
    ...draft.carried,
    options: defined({
      solvent: options.solvent,
      mergeResonanceForms: options.mergeResonanceForms,
      plausibility: options.plausibility,
      disabledRules: options.disabledRules,
      ringSizes: { min: numberOrText(options.smallestRing) ?? '', max: numberOrText(options.largestRing) ?? null },
      carbonList: options.carbonList,
      // Edits that were kept in the browser before this option existed lack it.
      valenceGroups: options.valenceGroups ?? undefined,
      keep: numberOrText(options.keep) ?? '',
      maxSeconds: numberOrText(options.maxSeconds) ?? null,
    }),
  });
  if (result.ok) return { ok: true, document: result.document, notes: result.notes, issues: [] };
  const rowsBack = (path: string): string =>
    path
      .replace(/^carbonSignals\[(\d+)\]/, (_, at: string) => `carbonSignals[${carbonRows[Number(at)] ?? at}]`)
      .replace(/^protonSignals\[(\d+)\]/, (_, at: string) => `protonSignals[${protonRows[Number(at)] ?? at}]`);
  return { ok: false, issues: result.issues.map((issue) => ({ ...issue, path: rowsBack(issue.path) })) };
}

/** First message for a field or anything below it. */
export function issueAt(issues: readonly InputIssue[], path: string): string | undefined {
  return issues.find((issue) => issue.path === path || issue.path.startsWith(`${path}.`) || issue.path.startsWith(`${path}[`))?.message;
}
