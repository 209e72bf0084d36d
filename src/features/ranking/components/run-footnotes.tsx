import { Time } from '../../../components/time';
import { formatSeconds } from '../../../lib/dates';
import { formatCount } from '../../../lib/numbers';
import type { Run } from '../../../lib/queries/run-queries';

/** How the numbers came about: settings, cost, who and when. */
export function RunFootnotes({ run }: { run: Run }) {
  const { multigraphCount, constitutionCount, settings } = run;
  return (
    <ul className="tabular text-small text-faded">
      {multigraphCount === null || multigraphCount === constitutionCount ? null : (
        <li>{formatCount(multigraphCount)} before merging resonance forms</li>
      )}
      <li>
        kept {formatCount(run.keptCount)} of at most {formatCount(settings.keep)}
      </li>
      <li>
        {formatSeconds(run.cpuSeconds)} of CPU time,{' '}
        {settings.maxSeconds === null ? 'no time limit' : `time limit ${formatSeconds(settings.maxSeconds)}`}
        {settings.maxConstitutions === null ? '' : `, at most ${formatCount(settings.maxConstitutions)} constitutions`}
      </li>
      <li>
        {run.startedBy.name}, <Time iso={run.finishedAt ?? run.createdAt} />
      </li>
    </ul>
  );
}
