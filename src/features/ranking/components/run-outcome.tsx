import { ButtonLink } from '../../../components/button';
import { Notice } from '../../../components/status-word';
import { paths } from '../../../app/paths';
import type { Run } from '../../../lib/queries/run-queries';

const INCOMPLETE_TEXT: Readonly<Partial<Record<Run['status'], string>>> = {
  stopped: 'The run was stopped by a limit',
  cancelled: 'The run was cancelled',
  interrupted: 'The server stopped while this run was going on',
  finished: 'Not every part of the search was done',
};

/** What people must know before they read the list: that the run failed, or did not see everything. */
export function RunOutcome({ run }: { run: Run }) {
  if (run.status === 'failed') {
    return (
      <Notice tone="madder" title="This run failed">
        <p>{run.failure?.message ?? 'The server gave no reason.'}</p>
        <ButtonLink size="small" className="mt-2" to={paths.unknownRuns(run.unknownId)}>
          Back to the runs of {run.unknownCode}
        </ButtonLink>
      </Notice>
    );
  }
  if (run.complete) return null;
  return (
    <Notice
      tone="weld"
      title={`Incomplete: ${(INCOMPLETE_TEXT[run.status] ?? 'the search was not finished').replace(/^./, (letter) => letter.toLowerCase())}`}
    >
      <p>
        Constitutions that were not reached are missing from this list and could rank above those in it.
        {run.failure === null ? '' : ` ${run.failure.message}`}
      </p>
    </Notice>
  );
}
