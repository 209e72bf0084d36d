import { Link } from 'react-router-dom';
import { paths } from '../../../app/paths';
import { KeepButton } from '../../../components/candidate/keep-button';
import { misfitText } from '../../../components/candidate/misfit-text';
import { RemarkLine } from '../../../components/candidate/remarks';
import { tellingRemarks } from '../../../components/candidate/telling-remarks';
import { ProbabilityThread } from '../../../components/plots/probability-thread';
import { classNames } from '../../../lib/class-names';
import type { CandidateRow } from '../../../lib/queries/candidate-queries';
import { DeferredDrawing } from './deferred-drawing';

export const CARD_HEIGHT = 300;

interface CandidateCardProps {
  candidate: CandidateRow;
  isSelected: boolean;
  isKept: boolean;
  isKeeping: boolean;
  canKeep: boolean;
  onKeep: () => void;
  onLeave: () => void;
}

/** A candidate on cloth: rank and probability above, the drawing, the two most telling remarks, actions on hover and focus. */
export function CandidateCard({ candidate, isSelected, isKept, isKeeping, canKeep, onKeep, onLeave }: CandidateCardProps) {
  const remarks = tellingRemarks(candidate.remarks, 2);
  const tabIndex = isSelected ? 0 : -1;
  return (
    <article
      aria-label={`Rank ${candidate.rank}`}
      className={classNames(
        'group/card flex h-full min-w-0 flex-col rounded-panel border bg-cloth px-3 pt-2 pb-2.5',
        isSelected
          ? 'border-indigo ring-1 ring-indigo group-focus-visible/grid:outline-2 group-focus-visible/grid:outline-offset-2 group-focus-visible/grid:outline-indigo'
          : 'border-seam hover:border-selvage',
      )}
      style={{ height: CARD_HEIGHT }}
    >
      <header className="flex items-center justify-between gap-2">
        <Link
          to={paths.candidate(candidate.id)}
          onClick={onLeave}
          tabIndex={tabIndex}
          className="rounded-small text-lead font-semibold text-ink no-underline hover:text-indigo hover:underline"
        >
          <span className="sr-only">Open rank </span>
          {candidate.rank}
        </Link>
        <ProbabilityThread probability={candidate.probability} label="Probability" />
      </header>
      <div className="flex min-h-0 flex-1 items-center justify-center py-1">
        <DeferredDrawing smiles={candidate.smiles} width={208} height={132} alt={`Structure of rank ${candidate.rank}`} />
      </div>
      <ul className="h-9 text-small">
        {remarks.map((remark) => (
          <li key={`${remark.kind}${remark.text}`}>
            <RemarkLine remark={remark} isClipped />
          </li>
        ))}
      </ul>
      <footer className="mt-1.5 flex h-7 items-center justify-between gap-2">
        <span className="tabular truncate text-small text-faded" title="Mean misfit of the matched signals">
          {misfitText(candidate)}
        </span>
        {isKept || canKeep ? (
          <span
            className={classNames(
              'shrink-0 transition-opacity',
              !isKept &&
                !isSelected &&
                'opacity-0 group-focus-within/card:opacity-100 group-hover/card:opacity-100 pointer-coarse:opacity-100',
            )}
          >
            <KeepButton isKept={isKept} isBusy={isKeeping} onKeep={onKeep} tabIndex={tabIndex} />
          </span>
        ) : null}
      </footer>
    </article>
  );
}
