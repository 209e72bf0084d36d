import { useCallback, useState } from 'react';
import { useNavigate } from 'react-router-dom';
import { paths } from '../../../app/paths';
import { Select, type SelectOption } from '../../../components/field';
import { EmptyState, ErrorState, LoadingState } from '../../../components/states';
import type { CandidateOrder, CandidateRow } from '../../../lib/queries/candidate-queries';
import type { Run } from '../../../lib/queries/run-queries';
import { useKeepCandidate, useKeptByIdcode } from '../../../lib/queries/shortlist-queries';
import { formatCount } from '../../../lib/numbers';
import { pagesOf, useCandidateRows, type ShownPages } from '../api/use-candidate-rows';
import { selectionIndex } from '../hooks/selection-index';
import { useRankingView } from '../hooks/use-ranking-view';
import { CandidateCards } from './candidate-cards';
import type { CandidateListProps } from './candidate-list-props';
import { CandidateTable } from './candidate-table';
import { LayoutSwitch } from './layout-switch';

const ORDER_OPTIONS: ReadonlyArray<SelectOption & { readonly order: CandidateOrder }> = [
  { value: 'rank', label: 'Best first', order: { sort: 'rank', direction: 'ascending' } },
  { value: 'rankDown', label: 'Worst first', order: { sort: 'rank', direction: 'descending' } },
  { value: 'carbon', label: '¹³C misfit, smallest first', order: { sort: 'carbonDeviation', direction: 'ascending' } },
  { value: 'carbonDown', label: '¹³C misfit, largest first', order: { sort: 'carbonDeviation', direction: 'descending' } },
  { value: 'proton', label: '¹H misfit, smallest first', order: { sort: 'protonDeviation', direction: 'ascending' } },
  { value: 'protonDown', label: '¹H misfit, largest first', order: { sort: 'protonDeviation', direction: 'descending' } },
  { value: 'smiles', label: 'SMILES, A to Z', order: { sort: 'smiles', direction: 'ascending' } },
  { value: 'smilesDown', label: 'SMILES, Z to A', order: { sort: 'smiles', direction: 'descending' } },
];

/** The kept candidates of an ended run, as cards or as a table. */
export function Candidates({ run }: { run: Run }) {
  const navigate = useNavigate();
  const view = useRankingView();
  const [shown, setShown] = useState<ShownPages>({ firstPage: 1, lastPage: 1 });
  const rows = useCandidateRows(run.id, view.order, shown);
  const keptByIdcode = useKeptByIdcode(run.unknownId);
  const keep = useKeepCandidate(run.unknownId);
  const onShown = useCallback((start: number, end: number) => {
    const next = pagesOf(start, end);
    setShown((current) => (current.firstPage === next.firstPage && current.lastPage === next.lastPage ? current : next));
  }, []);

  if (rows.total === null)
    return rows.error === null ? (
      <LoadingState label="Loading candidates" lines={8} />
    ) : (
      <ErrorState error={rows.error} onRetry={rows.retry} />
    );
  if (rows.total === 0) {
    return (
      <EmptyState title="No candidates">
        {run.survivorCount === 0
          ? 'Every constitution was cut. The funnel above says where and why; loosen what cuts too much and start another run.'
          : 'This run kept no candidates.'}
      </EmptyState>
    );
  }

  const { total } = rows;
  const selectedIndex = selectionIndex(view.selectedRank, view.order, total, rows.at);
  const onKeep = (candidate: CandidateRow) => {
    if (run.abilities.editShortlist && !keptByIdcode.has(candidate.idcode) && !keep.isPending) keep.mutate(candidate);
  };
  const listProps: CandidateListProps = {
    rows,
    total,
    selectedIndex,
    onShown,
    onKeep,
    order: view.order,
    onSelect: (index) => {
      const rank =
        rows.at(index)?.rank ?? (view.order.sort === 'rank' ? (view.order.direction === 'ascending' ? index + 1 : total - index) : null);
      if (rank !== null) view.select(rank);
    },
    onOpen: (candidate) => {
      view.writeNow(candidate.rank);
      void navigate(paths.candidate(candidate.id));
    },
    onLeave: (candidate) => view.writeNow(candidate.rank),
    onOrder: view.setOrder,
    isKept: (candidate) => keptByIdcode.has(candidate.idcode),
    keepingId: keep.isPending ? keep.variables.id : null,
    canKeep: run.abilities.editShortlist,
  };
  const currentOption = ORDER_OPTIONS.find(({ order }) => order.sort === view.order.sort && order.direction === view.order.direction);
  return (
    <section aria-label="Candidates">
      <div className="mb-3 flex flex-wrap items-center justify-between gap-x-4 gap-y-2">
        <h2 className="text-lead">
          {formatCount(total)} {total === 1 ? 'candidate' : 'candidates'}
        </h2>
        <div className="flex flex-wrap items-center gap-3">
          <p className="hidden text-small text-faded desk:block">
            <Key>Arrows</Key> move, <Key>Enter</Key> opens
            {run.abilities.editShortlist ? (
              <>
                , <Key>K</Key> keeps
              </>
            ) : null}
          </p>
          <Select
            label="Order"
            isLabelHidden
            controlClassName="min-h-7! py-0.5! text-table"
            options={ORDER_OPTIONS}
            value={currentOption?.value ?? 'rank'}
            onChange={(event) => {
              const chosen = ORDER_OPTIONS.find((option) => option.value === event.target.value);
              if (chosen !== undefined) view.setOrder(chosen.order);
            }}
          />
          <LayoutSwitch current={view.layout} onChange={view.setLayout} />
        </div>
      </div>
      {rows.error === null ? null : <ErrorState title="Some candidates could not be loaded" error={rows.error} onRetry={rows.retry} />}
      {view.layout === 'cards' ? <CandidateCards {...listProps} /> : <CandidateTable {...listProps} />}
    </section>
  );
}

function Key({ children }: { children: string }) {
  return <kbd className="rounded-small border border-seam bg-cloth px-1 font-sans text-small text-ink">{children}</kbd>;
}
