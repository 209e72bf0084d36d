import { useQuery, useSuspenseQuery } from '@tanstack/react-query';
import { Play } from 'lucide-react';
import { useState, type ReactNode } from 'react';
import { useParams, type LoaderFunctionArgs } from 'react-router-dom';
import { paths } from '../../../app/paths';
import { Button, ButtonLink } from '../../../components/button';
import { Panel } from '../../../components/panel';
import { EmptyState, ErrorState, LoadingState } from '../../../components/states';
import { queryClient } from '../../../lib/query-client';
import { unknownRunsQuery } from '../../../lib/queries/run-queries';
import { unknownQuery } from '../../../lib/unknown-queries';
import { RunsTable } from '../components/runs-table';
import { StartRunDialog } from '../components/start-run-dialog';

export async function loader({ params }: LoaderFunctionArgs) {
  const unknownId = params['unknownId'] ?? '';
  void queryClient.prefetchQuery(unknownRunsQuery(unknownId));
  await queryClient.ensureQueryData(unknownQuery(unknownId));
  return null;
}

/** The runs of one unknown, and the way to start one. */
export function Component() {
  const unknownId = useParams()['unknownId'] ?? '';
  const { data: unknownRow } = useSuspenseQuery(unknownQuery(unknownId));
  const runs = useQuery(unknownRunsQuery(unknownId));
  const [isStarting, setIsStarting] = useState(false);
  const { currentRevisionId, abilities } = unknownRow;
  const canStart = abilities.startRun && currentRevisionId !== null;
  const startButton = canStart ? (
    <Button variant="primary" icon={<Play aria-hidden="true" className="size-4" />} onClick={() => setIsStarting(true)}>
      Start run
    </Button>
  ) : null;
  const isEmpty = runs.data?.runs.length === 0;
  return (
    <Panel title="Runs" actions={isEmpty ? undefined : startButton} isFlush>
      {runs.data === undefined ? (
        runs.error === null ? (
          <LoadingState label="Loading runs" />
        ) : (
          <ErrorState error={runs.error} onRetry={() => void runs.refetch()} />
        )
      ) : isEmpty ? (
        <NoRuns
          unknownId={unknownId}
          hasEvidence={currentRevisionId !== null}
          startButton={startButton}
          canSaveEvidence={abilities.saveEvidence}
        />
      ) : (
        <RunsTable runs={runs.data.runs} caption="Runs of this unknown" />
      )}
      {isStarting && currentRevisionId !== null ? (
        <StartRunDialog
          unknownId={unknownId}
          teamId={unknownRow.teamId}
          revisionId={currentRevisionId}
          onClose={() => setIsStarting(false)}
        />
      ) : null}
    </Panel>
  );
}

function NoRuns({
  unknownId,
  hasEvidence,
  startButton,
  canSaveEvidence,
}: {
  unknownId: string;
  hasEvidence: boolean;
  startButton: ReactNode;
  canSaveEvidence: boolean;
}) {
  if (!hasEvidence) {
    return (
      <EmptyState
        title="A run needs a formula"
        action={
          canSaveEvidence ? (
            <ButtonLink variant="primary" to={paths.unknownEvidence(unknownId)}>
              Enter evidence
            </ButtonLink>
          ) : undefined
        }
      >
        Once a molecular formula is saved, a run weaves every constitution it allows and ranks them against the signals.
      </EmptyState>
    );
  }
  return (
    <EmptyState title="No runs yet" action={startButton ?? undefined}>
      A run weaves every constitution that formula and fragments allow, says why each rejected one fails, and ranks the rest.
    </EmptyState>
  );
}
