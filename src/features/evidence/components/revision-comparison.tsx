import { useQuery } from '@tanstack/react-query';
import { Minus, Plus } from 'lucide-react';
import { Panel } from '../../../components/panel';
import { EmptyState, ErrorState, LoadingState } from '../../../components/states';
import { revisionQuery } from '../../../lib/unknown-queries';
import { compareEvidence, type EvidenceChange } from '../lib/compare-evidence';

/** What two revisions say differently, older against newer. */
export function RevisionComparison({ olderId, newerId }: { olderId: string; newerId: string }) {
  const older = useQuery(revisionQuery(olderId));
  const newer = useQuery(revisionQuery(newerId));
  if (older.isError || newer.isError)
    return <ErrorState error={older.error ?? newer.error} onRetry={() => void Promise.all([older.refetch(), newer.refetch()])} />;
  if (older.data === undefined || newer.data === undefined) return <LoadingState label="Loading the revisions" />;
  const changes = compareEvidence(older.data.evidence, newer.data.evidence);
  return (
    <Panel title={`Revision ${older.data.number} against revision ${newer.data.number}`} isFlush>
      {changes.length === 0 ? (
        <EmptyState title="No difference">Both revisions hold the same evidence.</EmptyState>
      ) : (
        <table className="w-full text-table">
          <thead className="sr-only">
            <tr>
              <th scope="col">Part</th>
              <th scope="col">Change</th>
            </tr>
          </thead>
          <tbody>
            {groupByPart(changes).map(([part, list]) => (
              <tr key={part} className="border-b border-seam align-top last:border-0">
                <th scope="row" className="w-44 px-4 py-2 text-left font-normal text-faded">
                  {part}
                </th>
                <td className="px-4 py-2">
                  {list.map((change, index) => (
                    <ChangeLine key={index} change={change} />
                  ))}
                </td>
              </tr>
            ))}
          </tbody>
        </table>
      )}
    </Panel>
  );
}

function ChangeLine({ change: { before, after } }: { change: EvidenceChange }) {
  return (
    <>
      {before === null ? null : (
        <p className="flex items-start gap-2 text-madder">
          <Minus aria-label="removed" className="mt-0.5 size-4 shrink-0" />
          <span className="break-all line-through decoration-1">{before}</span>
        </p>
      )}
      {after === null ? null : (
        <p className="flex items-start gap-2 text-verdigris">
          <Plus aria-label="added" className="mt-0.5 size-4 shrink-0" />
          <span className="break-all">{after}</span>
        </p>
      )}
    </>
  );
}

function groupByPart(changes: readonly EvidenceChange[]): Array<[string, EvidenceChange[]]> {
  const groups = new Map<string, EvidenceChange[]>();
  for (const change of changes) groups.set(change.part, [...(groups.get(change.part) ?? []), change]);
  return [...groups];
}
