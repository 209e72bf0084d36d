import { useQuery, useSuspenseQuery } from '@tanstack/react-query';
import { useParams, type LoaderFunctionArgs } from 'react-router-dom';
import { ErrorState, LoadingState } from '../../../components/states';
import { queryClient } from '../../../lib/query-client';
import { revisionQuery, unknownQuery, type UnknownDetail } from '../../../lib/unknown-queries';
import { EvidenceEditor } from '../components/evidence-editor';

export async function loader({ params }: LoaderFunctionArgs) {
  const { currentRevisionId } = await queryClient.ensureQueryData(unknownQuery(params['unknownId'] ?? ''));
  if (currentRevisionId !== null) void queryClient.prefetchQuery(revisionQuery(currentRevisionId));
  return null;
}

/** What was observed, to read and to edit. */
export function Component() {
  const { unknownId = '' } = useParams();
  const { data: unknown } = useSuspenseQuery(unknownQuery(unknownId));
  if (unknown.currentRevisionId === null) return <EvidenceEditor key={unknownId} unknown={unknown} revision={null} />;
  return <SavedEvidence unknown={unknown} revisionId={unknown.currentRevisionId} />;
}

function SavedEvidence({ unknown, revisionId }: { unknown: UnknownDetail; revisionId: string }) {
  const revision = useQuery(revisionQuery(revisionId));
  if (revision.isPending) return <LoadingState label="Loading the evidence" lines={8} />;
  if (revision.isError)
    return <ErrorState title="The evidence could not be loaded" error={revision.error} onRetry={() => void revision.refetch()} />;
  return <EvidenceEditor key={revisionId} unknown={unknown} revision={revision.data} />;
}
