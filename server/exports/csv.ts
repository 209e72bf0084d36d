import type { Candidate } from '../models/candidate.js';
import type { ExportOrigin } from './export-candidates.js';

type CsvCandidate = Pick<
  Candidate,
  'rank' | 'smiles' | 'idcode' | 'probability' | 'score' | 'terms' | 'carbonDeviation' | 'protonDeviation' | 'remarks'
>;

const COLUMNS: ReadonlyArray<readonly [name: string, value: (candidate: CsvCandidate) => string | number | null | undefined]> = [
  ['rank', ({ rank }) => rank],
  ['smiles', ({ smiles }) => smiles],
  ['probability', ({ probability }) => probability],
  ['score', ({ score }) => score],
  ['score_carbon13', ({ terms }) => terms.carbon13],
  ['score_proton1', ({ terms }) => terms.proton1],
  ['score_multiplicity', ({ terms }) => terms.multiplicity],
  ['score_integral', ({ terms }) => terms.integral],
  ['score_plausibility', ({ terms }) => terms.plausibility],
  ['carbon13_mean_absolute_deviation_ppm', ({ carbonDeviation }) => carbonDeviation],
  ['proton1_mean_absolute_deviation_ppm', ({ protonDeviation }) => protonDeviation],
  ['remarks', ({ remarks }) => remarks.map(({ text }) => text).join('; ')],
  ['idcode', ({ idcode }) => idcode],
];
/** The last column is that of the run: a row copied out of the file still says so. */
const RUN_COMPLETE = 'run_complete';

export const csvHeader = (): string => line([...COLUMNS.map(([name]) => name), RUN_COMPLETE]);

export const csvRow = (candidate: CsvCandidate, { complete }: Pick<ExportOrigin, 'complete'>): string =>
  line([...COLUMNS.map(([, value]) => value(candidate)), complete ? 'yes' : 'no']);

/** RFC 4180: fields with separators, quotes or line breaks are quoted, lines end with CRLF. */
function line(fields: readonly (string | number | null | undefined)[]): string {
  return `${fields.map((field) => quote(field ?? '')).join(',')}\r\n`;
}

function quote(field: string | number): string {
  if (typeof field === 'number') return String(field);
  // Spreadsheets take a text that begins like this for a formula.
  const text = /^[=+@\t\r-]/.test(field) ? `'${field}` : field;
  return /[",\r\n]/.test(text) ? `"${text.replaceAll('"', '""')}"` : text;
}
