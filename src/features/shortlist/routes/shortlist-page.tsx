import { useQuery, useSuspenseQuery } from '@tanstack/react-query';
import { useParams, type LoaderFunctionArgs } from 'react-router-dom';
import { paths } from '../../../app/paths';
import { ButtonLink } from '../../../components/button';
import { Panel } from '../../../components/panel';
import { EmptyState, ErrorState, LoadingState } from '../../../components/states';
import { queryClient } from '../../../lib/query-client';
import { shortlistQuery } from '../../../lib/queries/shortlist-queries';
import { unknownQuery } from '../../../lib/unknown-queries';
import { ShortlistCard } from '../components/shortlist-card';

export async function loader({ params }: LoaderFunctionArgs) {
  const unknownId = params['unknownId'] ?? '';
  void queryClient.prefetchQuery(shortlistQuery(unknownId));
  await queryClient.ensureQueryData(unknownQuery(unknownId));
  return null;
}

/** Candidates that people kept, with what they think of each. */
export function Component() {
  const unknownId = useParams()['unknownId'] ?? '';
  const { data: unknownRow } = useSuspenseQuery(unknownQuery(unknownId));
  const { data, error, refetch } = useQuery(shortlistQuery(unknownId));
  if (data === undefined) {
    return (
      <Panel>
        {error === null ? (
          <LoadingState label="Loading the shortlist" lines={8} className="p-0" />
        ) : (
          <ErrorState error={error} onRetry={() => void refetch()} />
        )}
      </Panel>
    );
  }
  if (data.items.length === 0) {
    const { lastRun } = unknownRow;
    return (
      <Panel isFlush>
        <EmptyState
          title="Nothing kept yet"
          action={
            <ButtonLink to={lastRun === null ? paths.unknownRuns(unknownId) : paths.run(lastRun.id)}>
              {lastRun === null ? 'Go to the runs' : `Open run ${lastRun.number}`}
            </ButtonLink>
          }
        >
          Candidates kept from a ranking gather here, with notes and a verdict each. They stay even when their run is removed.
        </EmptyState>
      </Panel>
    );
  }
  return (
    <section aria-label="Shortlist" className="space-y-4">
      {data.items.map((item) => (
        <ShortlistCard key={item.id} unknownId={unknownId} item={item} />
      ))}
    </section>
  );
}
