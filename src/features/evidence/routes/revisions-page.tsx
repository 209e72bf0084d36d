import { useQuery, useSuspenseQuery } from '@tanstack/react-query';
import { RotateCcw } from 'lucide-react';
import { useState } from 'react';
import { useParams, useSearchParams, type LoaderFunctionArgs } from 'react-router-dom';
import { Button } from '../../../components/button';
import { Formula } from '../../../components/chemistry-text';
import { ConfirmDialog } from '../../../components/confirm-dialog';
import { Panel } from '../../../components/panel';
import { Badge } from '../../../components/status-word';
import { EmptyState, ErrorState, LoadingState } from '../../../components/states';
import { Time } from '../../../components/time';
import { queryClient } from '../../../lib/query-client';
import { showToast } from '../../../lib/toasts';
import { unknownQuery } from '../../../lib/unknown-queries';
import { revisionsQuery, useRestoreRevision, type RevisionList } from '../api/revisions';
import { RevisionComparison } from '../components/revision-comparison';

export function loader({ params }: LoaderFunctionArgs) {
  void queryClient.prefetchQuery(revisionsQuery(params['unknownId'] ?? ''));
  return null;
}

/** Every revision of the evidence: who, when, why; any two can be compared, any old one restored as a new revision. */
export function Component() {
  const { unknownId = '' } = useParams();
  const { data: unknown } = useSuspenseQuery(unknownQuery(unknownId));
  const list = useQuery(revisionsQuery(unknownId));
  if (list.isPending) return <LoadingState label="Loading the revisions" />;
  if (list.isError) return <ErrorState title="The revisions could not be loaded" error={list.error} onRetry={() => void list.refetch()} />;
  if (list.data.revisions.length === 0)
    return <EmptyState title="No revision yet">Every save of the evidence is kept here, with author and comment.</EmptyState>;
  return <Revisions unknownId={unknownId} revisions={list.data.revisions} canRestore={unknown.abilities.saveEvidence} />;
}

type RevisionRow = RevisionList['revisions'][number];

function Revisions({ unknownId, revisions, canRestore }: { unknownId: string; revisions: RevisionRow[]; canRestore: boolean }) {
  const [search, setSearch] = useSearchParams();
  const [restoring, setRestoring] = useState<RevisionRow | null>(null);
  const restore = useRestoreRevision(unknownId);
  const byNumber = (text: string | null) => revisions.find((revision) => String(revision.number) === text);
  const newer = byNumber(search.get('to')) ?? revisions[0]!;
  const older = byNumber(search.get('from')) ?? revisions.find((revision) => revision.number < newer.number);
  const choose = (which: 'from' | 'to', number: number) => {
    const next = new URLSearchParams({ from: String(older?.number ?? number), to: String(newer.number) });
    next.set(which, String(number));
    const [from, to] = [Number(next.get('from')), Number(next.get('to'))];
    setSearch({ from: String(Math.min(from, to)), to: String(Math.max(from, to)) }, { replace: true });
  };
  return (
    <div className="space-y-4">
      <Panel title="Revisions of the evidence" isFlush>
        <ul className="divide-y divide-seam">
          {revisions.map((revision) => (
            <li key={revision.id} className="flex flex-wrap items-center gap-x-4 gap-y-1 px-4 py-2.5">
              {revisions.length > 1 ? (
                <span className="flex gap-3 text-small">
                  {(['from', 'to'] as const).map((which) => (
                    <label key={which} className="inline-flex items-center gap-1">
                      <input
                        type="radio"
                        name={which}
                        className="size-4 accent-indigo"
                        checked={(which === 'from' ? older?.number : newer.number) === revision.number}
                        onChange={() => choose(which, revision.number)}
                      />
                      <span className="sr-only">Compare revision {revision.number} as the </span>
                      {which === 'from' ? 'older' : 'newer'}
                    </label>
                  ))}
                </span>
              ) : null}
              <span className="w-8 font-semibold tabular">{revision.number}</span>
              <Formula formula={revision.formula} />
              <span className="min-w-0 flex-1 basis-52">
                {revision.comment === '' ? <span className="text-faded">No comment</span> : revision.comment}
              </span>
              {revision.isCurrent ? <Badge tone="verdigris">current</Badge> : null}
              <span className="text-table text-faded">
                {revision.author.name}, <Time iso={revision.createdAt} />
              </span>
              {canRestore && !revision.isCurrent ? (
                <Button size="small" icon={<RotateCcw aria-hidden="true" className="size-3.5" />} onClick={() => setRestoring(revision)}>
                  Restore
                </Button>
              ) : null}
            </li>
          ))}
        </ul>
      </Panel>
      {older === undefined || older.id === newer.id ? null : <RevisionComparison olderId={older.id} newerId={newer.id} />}
      {restoring === null ? null : (
        <ConfirmDialog
          title={`Restore revision ${restoring.number}`}
          confirmLabel="Restore"
          isBusy={restore.isPending}
          onCancel={() => setRestoring(null)}
          onConfirm={() =>
            restore.mutate(restoring.id, {
              onSuccess: (created) => showToast('done', `Revision ${restoring.number} is current again, as revision ${created.number}.`),
              onSettled: () => setRestoring(null),
            })
          }
        >
          <p>Its evidence becomes a new revision on top; nothing is lost.</p>
        </ConfirmDialog>
      )}
    </div>
  );
}
