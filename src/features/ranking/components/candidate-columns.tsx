import type { ReactNode } from 'react';
import { Link } from 'react-router-dom';
import { paths } from '../../../app/paths';
import { KeepButton } from '../../../components/candidate/keep-button';
import { RemarkLine } from '../../../components/candidate/remarks';
import { SCORE_TERM_NAMES, type ScoreTermName } from '../../../components/candidate/score-terms';
import { tellingRemarks } from '../../../components/candidate/telling-remarks';
import { ProbabilityThread } from '../../../components/plots/probability-thread';
import { formatSigned } from '../../../lib/numbers';
import type { CandidateRow, CandidateSort } from '../../../lib/queries/candidate-queries';
import { DeferredDrawing } from './deferred-drawing';

const SHORT_TERM_NAMES: Readonly<Record<ScoreTermName, string>> = {
  carbon13: '¹³C',
  proton1: '¹H',
  multiplicity: 'Mult.',
  integral: 'Integr.',
  plausibility: 'Plaus.',
};

export const ROW_HEIGHT = 68;

export interface CellState {
  readonly isSelected: boolean;
  readonly isKept: boolean;
  readonly isKeeping: boolean;
  readonly canKeep: boolean;
  readonly onKeep: () => void;
  readonly onLeave: () => void;
}
export interface CandidateColumn {
  readonly key: string;
  readonly head: ReactNode;
  readonly hint?: string;
  /** A CSS grid track. */
  readonly width: string;
  readonly sort?: CandidateSort;
  readonly align?: 'right';
  /** Stays in view at the right edge where the screen is wide enough. */
  readonly isSticky?: boolean;
  readonly cell: (candidate: CandidateRow, state: CellState) => ReactNode;
}

/** A deviation in ppm, or a dash without such evidence. */
const deviation = (value: number | null, digits: number) => (value === null ? '–' : value.toFixed(digits));

/**
 * Columns of the candidate table. Terms that the evidence did not give have no column.
 *
 * @param terms - terms present in this run.
 */
export function candidateColumns(terms: readonly ScoreTermName[]): CandidateColumn[] {
  return [
    {
      key: 'rank',
      head: 'Rank',
      width: '72px',
      sort: 'rank',
      cell: (candidate, { isSelected, onLeave }) => (
        <Link
          to={paths.candidate(candidate.id)}
          onClick={onLeave}
          tabIndex={isSelected ? 0 : -1}
          className="rounded-small text-lead font-semibold text-ink no-underline hover:text-indigo hover:underline"
        >
          <span className="sr-only">Open rank </span>
          {candidate.rank}
        </Link>
      ),
    },
    {
      key: 'drawing',
      head: 'Structure',
      width: '120px',
      cell: (candidate) => (
        <DeferredDrawing smiles={candidate.smiles} width={112} height={60} alt={`Structure of rank ${candidate.rank}`} />
      ),
    },
    {
      key: 'probability',
      head: 'Probability',
      width: '104px',
      cell: (candidate) => <ProbabilityThread probability={candidate.probability} length={28} />,
    },
    {
      key: 'carbon',
      head: '¹³C misfit',
      hint: 'Mean absolute deviation of the matched ¹³C signals, ppm',
      width: '102px',
      sort: 'carbonDeviation',
      align: 'right',
      cell: (candidate) => deviation(candidate.carbonDeviation, 2),
    },
    {
      key: 'proton',
      head: '¹H misfit',
      hint: 'Mean absolute deviation of the matched ¹H signals, ppm',
      width: '96px',
      sort: 'protonDeviation',
      align: 'right',
      cell: (candidate) => deviation(candidate.protonDeviation, 3),
    },
    {
      key: 'score',
      head: 'Score',
      hint: 'Sum of the terms: log-likelihood, higher is better',
      width: '70px',
      align: 'right',
      cell: (candidate) => <span className="font-semibold">{formatSigned(candidate.score, 1)}</span>,
    },
    ...terms.map((term): CandidateColumn => ({
      key: term,
      head: SHORT_TERM_NAMES[term],
      hint: `${SCORE_TERM_NAMES[term]}: part of the score`,
      width: '70px',
      align: 'right',
      cell: (candidate) => {
        const value = candidate.terms[term];
        return value === undefined ? '–' : formatSigned(value, 1);
      },
    })),
    {
      key: 'remarks',
      head: 'Remarks',
      width: 'minmax(220px, 1fr)',
      cell: (candidate) => (
        <ul className="text-small">
          {tellingRemarks(candidate.remarks, 2).map((remark) => (
            <li key={`${remark.kind}${remark.text}`}>
              <RemarkLine remark={remark} isClipped />
            </li>
          ))}
        </ul>
      ),
    },
    {
      key: 'smiles',
      head: 'SMILES',
      width: '160px',
      sort: 'smiles',
      cell: (candidate) => (
        <span className="block truncate font-mono text-small text-faded" title={candidate.smiles}>
          {candidate.smiles}
        </span>
      ),
    },
    {
      key: 'keep',
      head: <span className="sr-only">Shortlist</span>,
      width: '104px',
      align: 'right',
      isSticky: true,
      cell: (_candidate, { isSelected, isKept, isKeeping, canKeep, onKeep }) =>
        isKept || canKeep ? <KeepButton isKept={isKept} isBusy={isKeeping} onKeep={onKeep} tabIndex={isSelected ? 0 : -1} /> : null,
    },
  ];
}
