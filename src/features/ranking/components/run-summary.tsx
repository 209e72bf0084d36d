import type { ReactNode } from 'react';
import { Link } from 'react-router-dom';
import { paths } from '../../../app/paths';
import { ProbabilityThread } from '../../../components/plots/probability-thread';
import { Notice } from '../../../components/status-word';
import { formatCount } from '../../../lib/numbers';
import type { CandidateRow } from '../../../lib/queries/candidate-queries';
import type { Run } from '../../../lib/queries/run-queries';
import { misfitText } from '../../../components/candidate/misfit-text';
import { fitCautions } from './fit-caution';

function Fact({ label, children }: { label: string; children: ReactNode }) {
  return (
    <div className="flex items-baseline justify-between gap-4 border-t border-seam py-1.5">
      <dt className="text-faded">{label}</dt>
      <dd className="tabular min-w-0 text-right">{children}</dd>
    </div>
  );
}

/** What the ranking claims and how far: survivors, "none of these", absolute fit of the best, settings. */
export function RunSummary({ run, best }: { run: Run; best: CandidateRow | undefined }) {
  const survivors = run.survivorCount ?? 0;
  const none = run.noneOfTheseProbability;
  const cautions =
    best === undefined
      ? []
      : fitCautions({
          isComplete: run.complete,
          noneOfTheseProbability: none,
          carbonDeviation: best.carbonDeviation,
          protonDeviation: best.protonDeviation,
        });
  const misfit = best === undefined ? '' : misfitText(best);
  const hasSignals = best === undefined || best.terms.carbon13 !== undefined || best.terms.proton1 !== undefined;
  return (
    <div>
      <p className="tabular text-lead font-semibold">
        {survivors === 0
          ? 'No constitution survived'
          : survivors === 1
            ? 'The only one left under this model'
            : `Best of ${formatCount(survivors)} under this model`}
      </p>
      <p className="text-table text-faded">
        {survivors === 0
          ? 'Something in the evidence rules everything out: look at the reasons in the funnel.'
          : 'An order by fit to this evidence, not an identification.'}
      </p>
      <dl className="mt-3 text-table">
        {none === null ? null : (
          <Fact label="None of these">
            <ProbabilityThread probability={none} tone="weld" />
          </Fact>
        )}
        {misfit === '' ? null : <Fact label="Mean misfit of rank 1">{misfit}</Fact>}
        <Fact label="Evidence">
          <Link className="text-indigo" to={paths.unknownRevisions(run.unknownId)}>
            revision {run.revisionNumber}
          </Link>
        </Fact>
      </dl>
      {cautions.length === 0 ? null : (
        <Notice tone="weld" className="mt-3 text-table" title="Doubtful fit">
          {cautions.map((caution) => (
            <p key={caution}>{caution}</p>
          ))}
        </Notice>
      )}
      {hasSignals ? null : (
        <Notice className="mt-3 text-table" title="No signals to compare with">
          <p>This evidence revision has no ¹³C or ¹H shifts: the order rests on plausibility alone.</p>
        </Notice>
      )}
    </div>
  );
}
