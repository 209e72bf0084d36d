import { useQuery } from '@tanstack/react-query';
import { Button } from '../../../components/button';
import { ErrorState, LoadingState } from '../../../components/states';
import { Badge } from '../../../components/status-word';
import { Time } from '../../../components/time';
import { sessionsQuery, useEndSession } from '../api/account';
import { describeBrowser } from './describe-browser';

/** Where the person is signed in; every session but the current one can be ended here. */
export function SessionList() {
  const sessions = useQuery(sessionsQuery);
  const end = useEndSession();
  if (sessions.isPending) return <LoadingState label="Loading sessions" lines={3} />;
  if (sessions.isError)
    return <ErrorState title="The sessions could not be loaded" error={sessions.error} onRetry={() => void sessions.refetch()} />;
  return (
    <ul className="divide-y divide-seam">
      {sessions.data.sessions.map((session) => (
        <li key={session.id} className="flex flex-wrap items-center justify-between gap-x-4 gap-y-2 px-4 py-2.5">
          <div className="min-w-0">
            <p className="flex flex-wrap items-center gap-2">
              <span title={session.userAgent}>{describeBrowser(session.userAgent)}</span>
              {session.isCurrent ? <Badge tone="verdigris">this one</Badge> : null}
            </p>
            <p className="text-table text-faded">
              Last used <Time iso={session.lastUsedAt} />, signed in <Time iso={session.createdAt} />
            </p>
          </div>
          {session.isCurrent ? null : (
            <Button size="small" isBusy={end.isPending && end.variables === session.id} onClick={() => end.mutate(session.id)}>
              End session
            </Button>
          )}
        </li>
      ))}
    </ul>
  );
}
