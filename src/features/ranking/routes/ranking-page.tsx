import { useQuery, useSuspenseQuery } from '@tanstack/react-query';
import { CircleHelp } from 'lucide-react';
import { Link, useParams, useSearchParams, type LoaderFunctionArgs } from 'react-router-dom';
import { paths } from '../../../app/paths';
import { Button } from '../../../components/button';
import { Formula } from '../../../components/chemistry-text';
import { BuildingCuts } from '../../../components/funnel/building-cuts';
import { FunnelPicture } from '../../../components/funnel/funnel-picture';
import { bandFromFunnel } from '../../../components/funnel/funnel-stages';
import { PageHeader, Panel } from '../../../components/panel';
import { RunStatusWord } from '../../../components/status-word';
import { usePageTitle } from '../../../components/use-page-title';
import { queryClient } from '../../../lib/query-client';
import { candidatePageQuery } from '../../../lib/queries/candidate-queries';
import { isEnded, runQuery, type Run } from '../../../lib/queries/run-queries';
import { shortlistQuery } from '../../../lib/queries/shortlist-queries';
import { unknownQuery } from '../../../lib/unknown-queries';
import { useRunEvents } from '../api/use-run-events';
import { Candidates } from '../components/candidates';
import { ExplainDialog } from '../components/explain-dialog';
import { ExportMenu } from '../components/export-menu';
import { ReadingNotes } from '../components/reading-notes';
import { RunFootnotes } from '../components/run-footnotes';
import { RunLive } from '../components/run-live';
import { RunOutcome } from '../components/run-outcome';
import { RunSummary } from '../components/run-summary';
import { addressWith } from '../hooks/address';

const BEST_FIRST = { sort: 'rank', direction: 'ascending' } as const;

export async function loader({ params }: LoaderFunctionArgs) {
  const runId = params['runId'] ?? '';
  const run = await queryClient.ensureQueryData(runQuery(runId));
  void queryClient.prefetchQuery(unknownQuery(run.unknownId));
  void queryClient.prefetchQuery(shortlistQuery(run.unknownId));
  if (isEnded(run)) void queryClient.prefetchQuery(candidatePageQuery(runId, BEST_FIRST, 1));
  return null;
}

/** One run: live while it goes on, afterwards its funnel and ranking. */
export function Component() {
  const runId = useParams()['runId'] ?? '';
  const { data: run } = useSuspenseQuery(runQuery(runId));
  usePageTitle(`${run.unknownCode}, run ${run.number}`);
  const isLive = !isEnded(run);
  const stream = useRunEvents(runId, isLive);
  const [search, setSearch] = useSearchParams();
  const asked = search.get('ask');
  const setAsked = (smiles: string | null) => setSearch(addressWith({ ask: smiles }), { preventScrollReset: true });
  return (
    <>
      <nav aria-label="Where this belongs" className="mb-1 truncate text-table text-faded">
        <Link to={paths.unknownRuns(run.unknownId)} className="text-indigo no-underline hover:underline">
          <span className="font-mono text-small">{run.unknownCode}</span> {run.unknownTitle}
        </Link>
      </nav>
      <PageHeader
        title={
          <span className="flex flex-wrap items-baseline gap-x-4">
            Run {run.number}
            <span className="text-lead font-normal">
              <Formula formula={run.formula} />
            </span>
            <span className="text-body font-normal">
              <RunStatusWord status={run.status} />
            </span>
          </span>
        }
        actions={
          isLive || run.status === 'failed' ? undefined : (
            <>
              <Button icon={<CircleHelp aria-hidden="true" className="size-4" />} onClick={() => setAsked('')}>
                Why is X not here?
              </Button>
              {run.abilities.export && run.keptCount > 0 ? <ExportMenu runId={runId} /> : null}
            </>
          )
        }
      />
      {isLive ? <RunLive run={run} stream={stream} /> : <EndedRun run={run} />}
      {asked === null || isLive ? null : <ExplainDialog runId={runId} asked={asked} onAsk={setAsked} onClose={() => setAsked(null)} />}
    </>
  );
}

function EndedRun({ run }: { run: Run }) {
  const { data: unknownRow } = useQuery(unknownQuery(run.unknownId));
  const { data: firstPage } = useQuery({ ...candidatePageQuery(run.id, BEST_FIRST, 1), enabled: run.keptCount > 0 });
  if (run.status === 'failed') return <RunOutcome run={run} />;
  return (
    <div className="space-y-5">
      <RunOutcome run={run} />
      <Panel>
        <div className="grid grid-cols-[minmax(0,1fr)] gap-x-8 gap-y-6 desk:grid-cols-[minmax(0,264px)_minmax(0,1fr)]">
          <div className="flex flex-col justify-between gap-6">
            <RunSummary run={run} best={firstPage?.rows[0]} />
            <RunFootnotes run={run} />
          </div>
          <div className="min-w-0">
            {run.funnel === null ? (
              <p className="text-faded">This run ended before anything was counted.</p>
            ) : (
              <>
                <FunnelPicture band={bandFromFunnel(run.funnel, run.keptCount)} isIncomplete={!run.complete} />
                <BuildingCuts cuts={run.cuts} />
              </>
            )}
          </div>
        </div>
      </Panel>
      <ReadingNotes isComplete={run.complete} isRegulated={unknownRow?.purpose === 'regulated'} />
      {run.keptCount > 0 || run.survivorCount === 0 ? <Candidates run={run} /> : null}
    </div>
  );
}
