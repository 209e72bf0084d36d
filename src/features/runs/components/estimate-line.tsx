import { useQuery } from '@tanstack/react-query';
import { Notice } from '../../../components/status-word';
import { ApiError, errorMessage } from '../../../lib/api-error';
import { formatSeconds } from '../../../lib/dates';
import { estimateQuery } from '../api/run-setup-queries';
import { formatEstimate } from './estimate-text';

/** How large the search is expected to be. Keeps its height while the probing goes on. */
export function EstimateLine({
  unknownId,
  revisionId,
  cpuSecondsLeft,
}: {
  unknownId: string;
  revisionId: string;
  cpuSecondsLeft: number | undefined;
}) {
  const { data, error, isPending } = useQuery(estimateQuery(unknownId, revisionId));
  if (isPending) {
    return (
      <p role="status" className="min-h-11 text-faded">
        Probing the size of the search …
      </p>
    );
  }
  if (error !== null) {
    const issues = error instanceof ApiError ? error.issues : [];
    return (
      <Notice tone={issues.length > 0 ? 'madder' : 'weld'} title="The size of the search could not be estimated">
        <p>{errorMessage(error)}</p>
        {issues.map((issue) => (
          <p key={`${issue.path}${issue.message}`}>
            <span className="font-mono text-small">{issue.path}</span>: {issue.message}
          </p>
        ))}
      </Notice>
    );
  }
  const isTooLong = cpuSecondsLeft !== undefined && data.cpuSeconds > cpuSecondsLeft;
  return (
    <div className="tabular min-h-11">
      <p>
        About <strong className="font-semibold">{formatEstimate(data.estimate)}</strong> constitutions{' '}
        <span className="text-faded">
          ({formatEstimate(data.low)}–{formatEstimate(data.high)})
        </span>
        , woven in {data.cpuSeconds < 0.1 ? 'under 0.1\u2009s' : `about ${formatSeconds(data.cpuSeconds)}`} of CPU time
      </p>
      <p className={isTooLong ? 'text-weld' : 'text-small text-faded'}>
        {isTooLong
          ? `More than the ${formatSeconds(Math.max(0, cpuSecondsLeft))} left of your quota: the run would stop early and be incomplete.`
          : 'Estimated by random probing of the search tree; the run itself counts exactly. Prediction and scoring take time on top.'}
      </p>
    </div>
  );
}
