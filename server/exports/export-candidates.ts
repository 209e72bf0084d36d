import type { LaidOutStructure } from '../../shared/jobs/contract.js';
import type { Candidate } from '../models/candidate.js';
import { csvHeader, csvRow } from './csv.js';
import { sdfRecord } from './sdf.js';
import { smilesLine } from './smiles.js';

export type ExportFormat = 'smiles' | 'sdf' | 'csv';

/** What a file says about where its candidates come from. */
export interface ExportOrigin {
  /** Of the unknown, such as U-0042. */
  readonly code: string;
  readonly runNumber: number;
  /** False: a limit cut the search, better candidates may be missing. */
  readonly complete: boolean;
}
export interface ExportSource {
  readonly origin: ExportOrigin;
  /** Candidates by rank; fewer than asked for at the end, none beyond it. */
  readonly read: (start: number, count: number) => Promise<readonly Candidate[]>;
  readonly layOut: (smiles: readonly string[]) => Promise<readonly LaidOutStructure[]>;
}

export const EXPORT_TYPES: Readonly<Record<ExportFormat, { readonly extension: string; readonly contentType: string }>> = {
  smiles: { extension: 'smi', contentType: 'chemical/x-daylight-smiles; charset=utf-8' },
  sdf: { extension: 'sdf', contentType: 'chemical/x-mdl-sdfile; charset=utf-8' },
  csv: { extension: 'csv', contentType: 'text/csv; charset=utf-8' },
};
/** Rows read, and structures laid out, at once. */
const BATCH = 100;

/** U-0042-run-2-candidates.sdf; "incomplete" is in the name where a limit cut the search. */
export function exportFileName({ code, runNumber, complete }: ExportOrigin, format: ExportFormat): string {
  return `${code}-run-${runNumber}-candidates${complete ? '' : '-incomplete'}.${EXPORT_TYPES[format].extension}`;
}

/** Writes the candidates of a run piece by piece, best first; nothing holds the whole file in memory. */
export async function* exportCandidates(source: ExportSource, format: ExportFormat, limit: number): AsyncGenerator<string> {
  if (format === 'csv') yield csvHeader();
  for (let start = 0; start < limit; start += BATCH) {
    const candidates = await source.read(start, Math.min(BATCH, limit - start));
    if (candidates.length === 0) return;
    if (format === 'smiles') yield candidates.map((candidate) => smilesLine(candidate, source.origin)).join('');
    else if (format === 'csv') yield candidates.map((candidate) => csvRow(candidate, source.origin)).join('');
    else yield await layOutRecords(candidates, source);
  }
}

async function layOutRecords(candidates: readonly Candidate[], { origin, layOut }: ExportSource): Promise<string> {
  const structures = await layOut(candidates.map(({ smiles }) => smiles));
  return candidates
    .map((candidate, index) => {
      const structure = structures[index];
      if (structure === undefined) throw new Error(`No layout for candidate ${candidate.id}.`);
      return sdfRecord(candidate, structure, origin);
    })
    .join('');
}
