import {
  carbonSignal,
  EVIDENCE_LIMITS,
  MULTIPLICITY_PATTERN,
  protonSignal,
  type CarbonSignal,
  type ProtonSignal,
} from '../schemas/evidence.js';

/** Text of one table row by column, as a form shows it: decimal points, no units. Empty text = no entry. */
export type CarbonCells = Record<'shift' | 'hydrogens' | 'count', string>;
export type ProtonCells = Record<'shift' | 'count' | 'multiplicity' | 'couplings', string>;

export interface PastedRow<Signal, Column extends string> {
  /** Line in the pasted text, from 1. */
  readonly line: number;
  readonly cells: Record<Column, string>;
  /** Null when a cell of this row has an issue. */
  readonly signal: Signal | null;
}
export interface PasteIssue<Column extends string> {
  readonly line: number;
  /** Null when the whole line or text is meant. */
  readonly column: Column | null;
  readonly message: string;
}
export interface PastedTable<Signal, Column extends string> {
  readonly rows: ReadonlyArray<PastedRow<Signal, Column>>;
  readonly issues: ReadonlyArray<PasteIssue<Column>>;
  /** What was skipped or read differently from how it was written. */
  readonly notes: readonly string[];
}

interface TextLine {
  readonly line: number;
  readonly cells: readonly string[];
}

const DASH = '[-–—]';
const NUMBER = /^[-+]?(\d+\.?\d*|\.\d+)$/;
const RANGE = new RegExp(`^(-?\\d+(?:\\.\\d+)?)\\s*${DASH}\\s*(-?\\d+(?:\\.\\d+)?)$`);

/**
 * Splits pasted text into lines and cells. One separator for the whole text: tabs if there are any, else semicolons,
 * else commas where numbers have decimal points, else blanks. Decimal commas become points.
 */
export function splitLines(text: string): TextLine[] {
  const clean = text.replace(/\u2212/g, '-').replace(/[\u00a0\u202f]/g, ' ');
  const hasDecimalPoints = /\d\.\d/.test(clean);
  const isCommaSeparated = hasDecimalPoints && clean.includes(',');
  const separator = clean.includes('\t') ? /\t/ : clean.includes(';') ? /;/ : isCommaSeparated ? /,/ : /\s+/;
  return clean.split(/\r\n|\r|\n/).flatMap((row, index) => {
    if (row.trim() === '') return [];
    const source = separator.source === '\\s+' ? row.trim() : row;
    const cells = source.split(separator).map((cell) =>
      cell
        .trim()
        .replace(/^"(.*)"$/, '$1')
        .trim(),
    );
    return [{ line: index + 1, cells: hasDecimalPoints ? cells : cells.map((cell) => cell.replace(/(\d),(?=\d)/g, '$1.')) }];
  });
}

export const withoutUnit = (cell: string): string =>
  cell
    .replace(/^(δ|delta)\s*=?\s*/i, '')
    .replace(/\s*(ppm|hz)\.?$/i, '')
    .trim();

/** A line before the first data line whose cells hold no number is a heading. */
export const isHeading = (cells: readonly string[]): boolean =>
  cells.every((cell) => !NUMBER.test(withoutUnit(cell)) && !RANGE.test(withoutUnit(cell)));

/** Shift as typed; a range becomes its middle. */
function readShift(cell: string, line: number, notes: string[]): string {
  const bare = withoutUnit(cell);
  const range = RANGE.exec(bare);
  if (range === null) return bare;
  const middle = Number(((Number(range[1]) + Number(range[2])) / 2).toFixed(4));
  notes.push(`Line ${line}: range ${bare} read as its middle, ${middle}`);
  return String(middle);
}

/** Assigns the cells of data lines to columns, by heading where there is one. */
function assignColumns<Column extends string>(
  lines: readonly TextLine[],
  headings: ReadonlyArray<readonly [Column, RegExp]>,
  assignByContent: (cells: readonly string[]) => Partial<Record<Column, string>>,
  notes: string[],
): { line: number; cells: Partial<Record<Column, string>> }[] {
  let columns: (Column | null)[] | null = null;
  const rows: { line: number; cells: Partial<Record<Column, string>> }[] = [];
  for (const { line, cells } of lines) {
    if (rows.length === 0 && isHeading(cells)) {
      notes.push(`Line ${line} skipped: heading`);
      const found = cells.map((cell) => headings.find(([, pattern]) => pattern.test(cell))?.[0] ?? null);
      if (!found.some((column) => column === 'shift')) continue;
      columns = found;
      cells.forEach((cell, i) => {
        if (found[i] === null && cell !== '') notes.push(`Column "${cell}" is not used`);
      });
      continue;
    }
    if (columns === null) {
      rows.push({ line, cells: assignByContent(cells) });
      continue;
    }
    const row: Partial<Record<Column, string>> = {};
    columns.forEach((column, i) => {
      if (column !== null && row[column] === undefined && cells[i] !== undefined) row[column] = cells[i];
    });
    if (cells.slice(columns.length).some((cell) => cell !== '')) notes.push(`Line ${line}: cells beyond the heading are not used`);
    rows.push({ line, cells: row });
  }
  return rows;
}

/** Number of a cell for the schema; text that is none stays text, so that the schema names what it expected. */
const numberOrText = (text: string): number | string => (NUMBER.test(text) ? Number(text) : text);

function collect<Signal, Column extends string>(
  rows: ReadonlyArray<{ line: number; cells: Record<Column, string> }>,
  parse: (cells: Record<Column, string>) => { signal: Signal } | { issues: ReadonlyArray<{ column: Column; message: string }> },
  notes: readonly string[],
): PastedTable<Signal, Column> {
  const issues: PasteIssue<Column>[] = [];
  if (rows.length === 0) issues.push({ line: 1, column: null, message: 'no numbers found; expected one signal a line, the shift first' });
  if (rows.length > EVIDENCE_LIMITS.signals) {
    issues.push({
      line: rows[EVIDENCE_LIMITS.signals]!.line,
      column: null,
      message: `expected at most ${EVIDENCE_LIMITS.signals} signals`,
    });
  }
  const parsed = rows.slice(0, EVIDENCE_LIMITS.signals).map(({ line, cells }): PastedRow<Signal, Column> => {
    const result = parse(cells);
    if ('signal' in result) return { line, cells, signal: result.signal };
    for (const { column, message } of result.issues) issues.push({ line, column, message });
    return { line, cells, signal: null };
  });
  return { rows: parsed, issues, notes };
}

/** First issue of each column. */
function issuesByColumn<Column extends string>(
  issues: ReadonlyArray<{ path: PropertyKey[]; message: string }>,
  columns: readonly Column[],
) {
  return columns.flatMap((column) => {
    const issue = issues.find(({ path }) => path[0] === column);
    return issue === undefined ? [] : [{ column, message: issue.message }];
  });
}

/** Carbon types by their usual names. `q` is missing: it stands for quaternary and for CH3 (quartet). */
const CARBON_TYPES: Readonly<Record<string, string>> = {
  c: '0',
  cq: '0',
  cquat: '0',
  quat: '0',
  s: '0',
  ch: '1',
  d: '1',
  ch2: '2',
  t: '2',
  ch3: '3',
};

function readHydrogens(cell: string): string {
  const plain = cell
    .toLowerCase()
    .replace(/[₀-₉]/g, (digit) => String(digit.charCodeAt(0) - 0x2080))
    .replace(/[\s=]/g, '');
  return CARBON_TYPES[plain] ?? cell;
}
const ATOM_COUNT = /^\(?(\d+)\s*[×x]?\s*[CH]\)?$/;
const readCount = (cell: string): string => ATOM_COUNT.exec(cell)?.[1] ?? cell;

/**
 * Reads 13C signals pasted from a spreadsheet: shift, attached hydrogens (0–3 or CH3 …), count, in this order unless
 * a heading says otherwise.
 */
export function parseCarbonTable(text: string): PastedTable<CarbonSignal, keyof CarbonCells> {
  const notes: string[] = [];
  const byContent = (cells: readonly string[]): Partial<CarbonCells> => {
    const row: Partial<CarbonCells> = {};
    const [shift, ...others] = cells;
    if (shift !== undefined) row.shift = shift;
    let place = 0;
    for (const cell of others) {
      if (ATOM_COUNT.test(cell)) row.count = cell;
      else if (place++ === 0) row.hydrogens = cell;
      else row.count ??= cell;
    }
    return row;
  };
  const headings: ReadonlyArray<readonly [keyof CarbonCells, RegExp]> = [
    ['shift', /δ|delta|shift|ppm/i],
    ['hydrogens', /hydrogen|type|dept|ch[nx]|^n?h$|att/i],
    ['count', /count|number|^n?c$|^n$|#|int/i],
  ];
  const rows = assignColumns(splitLines(text), headings, byContent, notes).map(({ line, cells }) => ({
    line,
    cells: {
      shift: readShift(cells.shift ?? '', line, notes),
      hydrogens: readHydrogens(cells.hydrogens ?? ''),
      count: readCount(cells.count ?? ''),
    },
  }));
  return collect(
    rows,
    (cells) => {
      if (cells.hydrogens.toLowerCase() === 'q') {
        return { issues: [{ column: 'hydrogens', message: '"q" may mean quaternary or CH3; expected 0, 1, 2, 3 or C, CH, CH2, CH3' }] };
      }
      const parsed = carbonSignal.safeParse({
        shift: numberOrText(cells.shift),
        ...(cells.hydrogens === '' ? {} : { hydrogens: numberOrText(cells.hydrogens) }),
        ...(cells.count === '' ? {} : { count: numberOrText(cells.count) }),
      });
      return parsed.success
        ? { signal: parsed.data }
        : { issues: issuesByColumn(parsed.error.issues, ['shift', 'hydrogens', 'count'] as const) };
    },
    notes,
  );
}

/** Names of multiplicities that are written in more than one way. */
const MULTIPLICITY_NAMES: Readonly<Record<string, string>> = {
  singlet: 's',
  doublet: 'd',
  triplet: 't',
  quartet: 'q',
  quintet: 'quint',
  quin: 'quint',
  qn: 'quint',
  pent: 'quint',
  p: 'quint',
  sextet: 'sext',
  sxt: 'sext',
  hex: 'sext',
  septet: 'sept',
  spt: 'sept',
  hept: 'sept',
  octet: 'oct',
  nonet: 'non',
  multiplet: 'm',
  broad: 'br',
  bs: 'br s',
  brs: 'br s',
};
const MULTIPLICITY_LIKE = /^((br|app)\.?\s*)?[a-z]{1,9}$/i;

function readMultiplicity(cell: string): string {
  const plain = cell
    .toLowerCase()
    .replace(/\bapp\.?\s*|~/g, '')
    .replace(/\bbr\.\s*/g, 'br ')
    .replace(/\s+/g, ' ')
    .trim();
  return MULTIPLICITY_NAMES[plain] ?? plain;
}

const isMultiplicity = (cell: string): boolean => MULTIPLICITY_PATTERN.test(readMultiplicity(cell));

/** Couplings of a cell as "8.1, 2.0". */
function readCouplings(cell: string): string {
  const bare = cell
    .replace(/^[0-9]*J[^=]*=\s*|^J\s*/i, '')
    .replace(/\s*Hz\.?$/i, '')
    .trim();
  return bare
    .split(/\s*(?:[,;/]|\band\b|\s)\s*/)
    .filter((part) => part !== '')
    .join(', ');
}

/**
 * Reads 1H signals pasted from a spreadsheet: shift, count, multiplicity, couplings in Hz. Without a heading the
 * multiplicity is recognised by its letters; a number before it is the count, numbers after it are couplings.
 */
export function parseProtonTable(text: string): PastedTable<ProtonSignal, keyof ProtonCells> {
  const notes: string[] = [];
  const byContent = ([shift = '', ...others]: readonly string[]): Partial<ProtonCells> => {
    const row: Partial<ProtonCells> = { shift };
    // "br s" arrives in two cells when blanks separate the columns.
    const cells = others.flatMap((cell, i) => {
      if (/^br\.?$/i.test(others[i - 1] ?? '') && isMultiplicity(`br ${cell}`)) return [];
      const next = others[i + 1];
      return /^br\.?$/i.test(cell) && next !== undefined && isMultiplicity(`br ${next}`) ? [`br ${next}`] : [cell];
    });
    const proper = cells.findIndex(isMultiplicity);
    const place = proper >= 0 ? proper : cells.findIndex((cell) => MULTIPLICITY_LIKE.test(cell) && !/^J/.test(cell));
    const couplings: string[] = [];
    cells.forEach((cell, i) => {
      if (cell === '') return;
      if (i === place) row.multiplicity = cell;
      else if (ATOM_COUNT.test(cell) || (row.count === undefined && i === 0)) row.count = cell;
      else couplings.push(cell);
    });
    row.couplings = couplings.join(' ');
    return row;
  };
  const headings: ReadonlyArray<readonly [keyof ProtonCells, RegExp]> = [
    ['shift', /δ|delta|shift|ppm/i],
    ['multiplicity', /mult|pattern|split/i],
    ['couplings', /^j\b|coupl|hz/i],
    ['count', /count|number|^n?h$|^n$|#|int/i],
  ];
  const rows = assignColumns(splitLines(text), headings, byContent, notes).map(({ line, cells }) => ({
    line,
    cells: {
      shift: readShift(cells.shift ?? '', line, notes),
      count: readCount(cells.count ?? ''),
      multiplicity: readMultiplicity(cells.multiplicity ?? ''),
      couplings: readCouplings(cells.couplings ?? ''),
    },
  }));
  return collect(
    rows,
    (cells) => {
      const parsed = protonSignal.safeParse({
        shift: numberOrText(cells.shift),
        ...(cells.count === '' ? {} : { count: numberOrText(cells.count) }),
        ...(cells.multiplicity === '' ? {} : { multiplicity: cells.multiplicity }),
        ...(cells.couplings === '' ? {} : { couplings: cells.couplings.split(', ').map(numberOrText) }),
      });
      return parsed.success
        ? { signal: parsed.data }
        : { issues: issuesByColumn(parsed.error.issues, ['shift', 'count', 'multiplicity', 'couplings'] as const) };
    },
    notes,
  );
}
