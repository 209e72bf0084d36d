import type { Candidate } from '../models/candidate.js';
import type { ExportOrigin } from './export-candidates.js';

/** SMILES, a tab and a name, one structure a line. The name says where a limit cut the search. */
export function smilesLine({ smiles, rank }: Pick<Candidate, 'smiles' | 'rank'>, { code, runNumber, complete }: ExportOrigin): string {
  return `${smiles}\t${code}-run-${runNumber}-rank-${rank}${complete ? '' : '-incomplete'}\n`;
}
