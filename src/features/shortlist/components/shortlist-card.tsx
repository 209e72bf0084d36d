import { Trash2 } from 'lucide-react';
import { useState } from 'react';
import { Link } from 'react-router-dom';
import { paths } from '../../../app/paths';
import { Button } from '../../../components/button';
import { misfitText } from '../../../components/candidate/misfit-text';
import { ConfirmDialog } from '../../../components/confirm-dialog';
import { InlineError } from '../../../components/field';
import { ProbabilityThread } from '../../../components/plots/probability-thread';
import { StructureDrawing } from '../../../components/structure/structure-drawing';
import { Badge } from '../../../components/status-word';
import { Time } from '../../../components/time';
import { errorMessage } from '../../../lib/api-error';
import { classNames } from '../../../lib/class-names';
import type { ShortlistItem } from '../../../lib/queries/shortlist-queries';
import { useStrikeOut, useUpdateItem } from '../api/use-shortlist-changes';
import { NoteField } from './note-field';
import { VerdictChoice } from './verdict-choice';

/** One kept structure: what it was in its run, what people think of it. */
export function ShortlistCard({ unknownId, item }: { unknownId: string; item: ShortlistItem }) {
  const update = useUpdateItem(unknownId, item.id);
  const strikeOut = useStrikeOut(unknownId, item.id);
  const [isAsking, setIsAsking] = useState(false);
  const { snapshot } = item;
  // The choice shows at once; a refusal puts the old verdict back and says why.
  const verdict = update.isPending ? (update.variables.verdict ?? item.verdict) : item.verdict;
  const origin = `Rank ${snapshot.rank} of run ${snapshot.runNumber}`;
  return (
    <article
      aria-label={origin}
      className="grid gap-x-6 gap-y-4 rounded-panel border border-seam bg-cloth p-5 tablet:grid-cols-[260px_minmax(0,1fr)]"
    >
      <div className={classNames('flex flex-col items-center', verdict === 'refuted' && 'opacity-60')}>
        <StructureDrawing
          smiles={item.smiles}
          width={260}
          height={180}
          alt={`Structure kept as rank ${snapshot.rank} of run ${snapshot.runNumber}`}
          isExpandable
        />
      </div>
      <div className="min-w-0 space-y-4">
        <div className="flex flex-wrap items-start justify-between gap-x-4 gap-y-2">
          <div className="min-w-0">
            <h3 className="text-lead">
              {snapshot.candidateId === null ? (
                origin
              ) : (
                <Link to={paths.candidate(snapshot.candidateId)} className="text-ink no-underline hover:text-indigo hover:underline">
                  {origin}
                </Link>
              )}
            </h3>
            <p className="tabular flex flex-wrap items-center gap-x-4 text-table text-faded">
              <ProbabilityThread probability={snapshot.probability} label="Probability when it was kept" />
              {snapshot.runComplete === false ? <Badge tone="weld">Incomplete run</Badge> : null}
              {misfitText(snapshot) === '' ? null : <span>misfit {misfitText(snapshot)}</span>}
              {snapshot.candidateId === null ? <span>its run is gone; these are the figures of the day it was kept</span> : null}
            </p>
          </div>
          <VerdictChoice verdict={verdict} onChoose={item.abilities.update ? (chosen) => update.mutate({ verdict: chosen }) : null} />
        </div>
        <InlineError message={update.isError ? `The verdict was not saved. ${errorMessage(update.error)}` : undefined} />
        {item.abilities.update ? (
          <NoteField unknownId={unknownId} item={item} />
        ) : item.note === '' ? (
          <p className="text-faded">No note.</p>
        ) : (
          <p className="whitespace-pre-wrap">{item.note}</p>
        )}
        <footer className="flex flex-wrap items-center justify-between gap-3 text-small text-faded">
          <p>
            Kept by {item.addedBy.name}, <Time iso={item.addedAt} />
          </p>
          {item.abilities.remove ? (
            <Button
              variant="quiet"
              size="small"
              className="text-madder!"
              icon={<Trash2 aria-hidden="true" className="size-4" />}
              onClick={() => setIsAsking(true)}
            >
              Strike out
            </Button>
          ) : null}
        </footer>
      </div>
      {isAsking ? (
        <ConfirmDialog
          title="Strike this structure out?"
          confirmLabel="Strike out"
          isDestructive
          isBusy={strikeOut.isPending}
          error={strikeOut.isError ? errorMessage(strikeOut.error) : undefined}
          onCancel={() => setIsAsking(false)}
          onConfirm={() => strikeOut.mutate()}
        >
          <p>
            {origin} leaves the shortlist{item.note === '' && item.verdict === 'open' ? '' : ' together with its note and verdict'}. To
            remember that it was considered, set its verdict to refuted instead.
          </p>
        </ConfirmDialog>
      ) : null}
    </article>
  );
}
