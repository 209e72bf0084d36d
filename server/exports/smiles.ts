import type { Candidate } from '../models/candidate.js';
import type { ExportOrigin } from './export-candidates.js';

/** SMILES, a tab and a name, one structure a line. */
export function smilesLine({ smiles, rank }: Pick<Candidate, 'smiles' | 'rank'>, { code, runNumber }: ExportOrigin): string {
  return `${smiles}\t${code}-run-${runNumber}-rank-${rank}\n`;
}
