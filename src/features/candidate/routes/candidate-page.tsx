import { useQuery, useQueryClient, useSuspenseQuery } from '@tanstack/react-query';
import { ChevronLeft, ChevronRight } from 'lucide-react';
import { useEffect, useMemo } from 'react';
import { Link, useNavigate, useParams, useSearchParams, type LoaderFunctionArgs } from 'react-router-dom';
import { paths } from '../../../app/paths';
import { ButtonLink } from '../../../components/button';
import { KeepButton } from '../../../components/candidate/keep-button';
import { RegulatedNotice } from '../../../components/candidate/regulated-notice';
import { Select } from '../../../components/field';
import { PageHeader } from '../../../components/panel';
import { ProbabilityThread } from '../../../components/plots/probability-thread';
import { Badge } from '../../../components/status-word';
import { usePageTitle } from '../../../components/use-page-title';
import { formatCount } from '../../../lib/numbers';
import { queryClient } from '../../../lib/query-client';
import { candidateQuery, type CandidateDetail } from '../../../lib/queries/candidate-queries';
import { runQuery } from '../../../lib/queries/run-queries';
import { shortlistQuery, useKeepCandidate, useKeptByIdcode } from '../../../lib/queries/shortlist-queries';
import { revisionQuery, unknownQuery } from '../../../lib/unknown-queries';
import { signalRows, type RowOrder } from '../components/signal-rows';
import { SpectrumPanel } from '../components/spectrum-panel';
import { StructurePanel } from '../components/structure-panel';
import { useHighlight } from '../components/use-highlight';

const CONFLICT_MISFIT = 3;
const ORDER_OPTIONS = [
  { value: 'misfit', label: 'Worst fit first' },
  { value: 'shift', label: 'By shift, high to low' },
];

export async function loader({ params }: LoaderFunctionArgs) {
  const candidate = await queryClient.ensureQueryData(candidateQuery(params['candidateId'] ?? ''));
  void queryClient.prefetchQuery(unknownQuery(candidate.unknownId));
  void queryClient.prefetchQuery(shortlistQuery(candidate.unknownId));
  const run = await queryClient.ensureQueryData(runQuery(candidate.runId));
  await queryClient.ensureQueryData(revisionQuery(run.revisionId));
  return null;
}

/** One candidate: predicted against observed, signal by signal, worst fit first. */
export function Component() {
  const candidateId = useParams()['candidateId'] ?? '';
  const { data: candidate } = useSuspenseQuery(candidateQuery(candidateId));
  return <CandidateView key={candidate.id} candidate={candidate} />;
}

/** Left and right keys go to the neighbours by rank, as long as nothing on the page has the focus. */
function useNeighbourKeys(candidate: CandidateDetail) {
  const navigate = useNavigate();
  const { previousId, nextId } = candidate;
  useEffect(() => {
    const onKeyDown = (event: KeyboardEvent) => {
      if (event.target !== document.body || event.ctrlKey || event.metaKey || event.altKey) return;
      const target = event.key === 'ArrowLeft' ? previousId : event.key === 'ArrowRight' ? nextId : null;
      if (target !== null) void navigate({ pathname: paths.candidate(target), search: window.location.search });
    };
    document.addEventListener('keydown', onKeyDown);
    return () => document.removeEventListener('keydown', onKeyDown);
  }, [navigate, previousId, nextId]);
  const client = useQueryClient();
  useEffect(() => {
    for (const neighbour of [previousId, nextId]) if (neighbour !== null) void client.prefetchQuery(candidateQuery(neighbour));
  }, [client, previousId, nextId]);
}

function CandidateView({ candidate }: { candidate: CandidateDetail }) {
  const { data: run } = useSuspenseQuery(runQuery(candidate.runId));
  const { data: revision } = useSuspenseQuery(revisionQuery(run.revisionId));
  const { data: unknownRow } = useQuery(unknownQuery(candidate.unknownId));
  const [search, setSearch] = useSearchParams();
  const order: RowOrder = search.get('order') === 'shift' ? 'shift' : 'misfit';
  const keep = useKeepCandidate(candidate.unknownId);
  const isKept = useKeptByIdcode(candidate.unknownId).has(candidate.idcode);
  usePageTitle(`${run.unknownCode}, rank ${candidate.rank}`);
  useNeighbourKeys(candidate);

  const { evidence } = revision;
  const carbonRows = useMemo(() => signalRows(candidate, evidence, '13C'), [candidate, evidence]);
  const protonRows = useMemo(() => signalRows(candidate, evidence, '1H'), [candidate, evidence]);
  const allRows = useMemo(() => [...carbonRows, ...protonRows], [carbonRows, protonRows]);
  const highlight = useHighlight(allRows);
  const hasConflict = allRows.some((row) => highlight.rowKeys.has(row.key) && (row.misfit ?? 0) >= CONFLICT_MISFIT);
  const neighbour = (id: string) => ({ pathname: paths.candidate(id), search: search.toString() });
  return (
    <>
      <nav aria-label="Where this belongs" className="mb-1 truncate text-table text-faded">
        <Link to={paths.unknownRuns(run.unknownId)} className="text-indigo no-underline hover:underline">
          <span className="font-mono text-small">{run.unknownCode}</span> {run.unknownTitle}
        </Link>{' '}
        ·{' '}
        <Link to={`${paths.run(run.id)}?selected=${candidate.rank}`} className="text-indigo no-underline hover:underline">
          Run {run.number}
        </Link>
      </nav>
      <PageHeader
        title={
          <span className="flex flex-wrap items-center gap-x-4">
            Rank {candidate.rank}
            <span className="text-lead font-normal">
              <ProbabilityThread probability={candidate.probability} label="Probability" />
            </span>
            {candidate.runComplete ? null : <Badge tone="weld">Incomplete run</Badge>}
          </span>
        }
        lead={`Of ${formatCount(run.survivorCount ?? run.keptCount)} under this model; not an identification.${candidate.runComplete ? '' : ' The run did not see every constitution: better ones may be missing.'}`}
        actions={
          <>
            <Select
              label="Order of the signals"
              isLabelHidden
              options={ORDER_OPTIONS}
              value={order}
              onChange={(event) =>
                setSearch(event.target.value === 'shift' ? { order: 'shift' } : {}, { replace: true, preventScrollReset: true })
              }
            />
            <NeighbourLink to={candidate.previousId === null ? null : neighbour(candidate.previousId)} label="Previous rank" icon="left" />
            <NeighbourLink to={candidate.nextId === null ? null : neighbour(candidate.nextId)} label="Next rank" icon="right" />
            {isKept || candidate.abilities.editShortlist ? (
              <KeepButton isKept={isKept} isBusy={keep.isPending} onKeep={() => keep.mutate(candidate)} variant="primary" size="regular" />
            ) : null}
          </>
        }
      />
      {unknownRow?.purpose === 'regulated' ? <RegulatedNotice className="mb-4" /> : null}
      <div className="grid grid-cols-[minmax(0,1fr)] items-start gap-4 desk:grid-cols-[minmax(300px,380px)_minmax(0,1fr)]">
        <StructurePanel candidate={candidate} highlight={highlight} haloTone={hasConflict ? 'madder' : 'indigo'} />
        <div className="order-2 min-w-0 space-y-4">
          <SpectrumPanel nucleus="13C" rows={carbonRows} order={order} meanDeviation={candidate.carbonDeviation} highlight={highlight} />
          <SpectrumPanel nucleus="1H" rows={protonRows} order={order} meanDeviation={candidate.protonDeviation} highlight={highlight} />
        </div>
      </div>
    </>
  );
}

function NeighbourLink({ to, label, icon }: { to: { pathname: string; search: string } | null; label: string; icon: 'left' | 'right' }) {
  const Icon = icon === 'left' ? ChevronLeft : ChevronRight;
  const content = <Icon aria-hidden="true" className="size-4" />;
  if (to === null) {
    return (
      <span aria-hidden="true" className="inline-flex min-h-9 items-center rounded-panel border border-seam px-2.5 text-seam">
        {content}
      </span>
    );
  }
  return (
    <ButtonLink to={to} aria-label={label} title={`${label} (${icon === 'left' ? '←' : '→'})`} className="px-2.5!">
      {content}
    </ButtonLink>
  );
}
