import type { LaidOutStructure } from '../../shared/jobs/contract.js';
import type { Candidate } from '../models/candidate.js';
import type { ExportOrigin } from './export-candidates.js';
import { molfile } from './molfile.js';

type SdfCandidate = Pick<Candidate, 'rank' | 'smiles' | 'probability' | 'score' | 'carbonDeviation' | 'protonDeviation' | 'remarks'>;

/** One record: connection table, data items, `$$$$`. */
export function sdfRecord(candidate: SdfCandidate, structure: LaidOutStructure, { code, runNumber, complete }: ExportOrigin): string {
  const items: ReadonlyArray<readonly [string, string | number | null]> = [
    ['UNKNOWN', code],
    ['RUN', runNumber],
    ['RUN_COMPLETE', complete ? 'yes' : 'no'],
    ['RANK', candidate.rank],
    ['PROBABILITY', candidate.probability],
    ['SCORE', candidate.score],
    ['CARBON13_MEAN_ABSOLUTE_DEVIATION_PPM', candidate.carbonDeviation],
    ['PROTON1_MEAN_ABSOLUTE_DEVIATION_PPM', candidate.protonDeviation],
    ['SMILES', candidate.smiles],
    ['REMARKS', candidate.remarks.map(({ text }) => text).join('; ')],
  ];
  const data = items.flatMap(([tag, value]) => (value === null || value === '' ? [] : [`> <${tag}>\n${oneLine(String(value))}\n\n`]));
  return `${molfile(structure, `${code}-run-${runNumber}-rank-${candidate.rank}`)}${data.join('')}$$$$\n`;
}

/** A blank line ends a data item, so a value must not hold one. */
const oneLine = (text: string): string => text.replace(/\s*[\r\n]+\s*/g, ' ');
