import { useSuspenseQuery } from '@tanstack/react-query';
import { Suspense, useEffect } from 'react';
import { Outlet, useParams, type LoaderFunctionArgs } from 'react-router-dom';
import { paths } from '../../../app/paths';
import { LoadingState } from '../../../components/states';
import { TabLinks } from '../../../components/tabs';
import { usePageTitle } from '../../../components/use-page-title';
import { queryClient } from '../../../lib/query-client';
import { rememberTeam } from '../../../lib/session';
import { revisionQuery, unknownQuery } from '../../../lib/unknown-queries';
import { UnknownRecord } from '../components/unknown-record';

export async function loader({ params }: LoaderFunctionArgs) {
  const detail = await queryClient.ensureQueryData(unknownQuery(params['unknownId'] ?? ''));
  if (detail.currentRevisionId !== null) void queryClient.prefetchQuery(revisionQuery(detail.currentRevisionId));
  return null;
}

/** One unknown: the record at the left, the work that follows from it at the right. */
export function Component() {
  const { unknownId = '' } = useParams();
  const { data: unknown } = useSuspenseQuery(unknownQuery(unknownId));
  usePageTitle(`${unknown.code} ${unknown.title}`);
  useEffect(() => rememberTeam(unknown.teamId), [unknown.teamId]);
  return (
    <div className="grid gap-6 desk:grid-cols-[minmax(260px,300px)_minmax(0,1fr)] desk:gap-8">
      <UnknownRecord unknown={unknown} />
      <div className="min-w-0">
        <TabLinks
          label={`Parts of ${unknown.code}`}
          links={[
            { to: paths.unknownEvidence(unknownId), label: 'Evidence' },
            { to: paths.unknownRuns(unknownId), label: 'Runs' },
            { to: paths.unknownShortlist(unknownId), label: 'Shortlist', count: unknown.shortlistCount },
            { to: paths.unknownRevisions(unknownId), label: 'History', count: unknown.revisionCount },
            { to: paths.unknownComments(unknownId), label: 'Comments' },
          ]}
        />
        <div className="pt-5">
          <Suspense fallback={<LoadingState />}>
            <Outlet />
          </Suspense>
        </div>
      </div>
    </div>
  );
}
