import { useCallback, useEffect, useRef, useState } from 'react';
import { useNavigation, useSearchParams } from 'react-router-dom';
import type { CandidateOrder, CandidateSort } from '../../../lib/queries/candidate-queries';

export type RankingLayout = 'cards' | 'table';
const SORTS: readonly CandidateSort[] = ['rank', 'carbonDeviation', 'protonDeviation', 'smiles'];
/** Moving through a list by keyboard must not write the address on every step. */
const WRITE_AFTER_MS = 200;

export interface RankingView {
  readonly layout: RankingLayout;
  readonly order: CandidateOrder;
  /** Rank of the selected candidate, or null. */
  readonly selectedRank: number | null;
  readonly setLayout: (layout: RankingLayout) => void;
  readonly setOrder: (order: CandidateOrder) => void;
  readonly select: (rank: number | null) => void;
  /** Puts a selection into the address at once, before the page is left: back then returns to it. */
  readonly writeNow: (rank: number) => void;
}

export function readRankingView(search: URLSearchParams): { layout: RankingLayout; order: CandidateOrder; selectedRank: number | null } {
  const rank = Number(search.get('selected') ?? Number.NaN);
  return {
    layout: search.get('view') === 'table' ? 'table' : 'cards',
    order: {
      sort: SORTS.find((known) => known === search.get('sort')) ?? 'rank',
      direction: search.get('direction') === 'descending' ? 'descending' : 'ascending',
    },
    selectedRank: Number.isInteger(rank) && rank >= 1 ? rank : null,
  };
}

function withParam(search: URLSearchParams, name: string, value: string | null): URLSearchParams {
  const next = new URLSearchParams(search);
  if (value === null) next.delete(name);
  else next.set(name, value);
  return next;
}

/** Layout, order and selection of the ranking; all of them live in the address. */
export function useRankingView(): RankingView {
  const [search, setSearch] = useSearchParams();
  const fromAddress = readRankingView(search);
  const [selectedRank, setSelectedRank] = useState(fromAddress.selectedRank);
  const [seenInAddress, setSeenInAddress] = useState(fromAddress.selectedRank);
  // Back and forward bring another selection along.
  if (fromAddress.selectedRank !== seenInAddress) {
    setSeenInAddress(fromAddress.selectedRank);
    setSelectedRank(fromAddress.selectedRank);
  }
  const setSearchRef = useRef(setSearch);
  useEffect(() => {
    setSearchRef.current = setSearch;
  });
  const isLeaving = useNavigation().state !== 'idle';
  useEffect(() => {
    // Writing the address now would cancel the navigation that is under way.
    if (selectedRank === seenInAddress || isLeaving) return undefined;
    const timer = setTimeout(() => {
      setSearchRef.current((current) => withParam(current, 'selected', selectedRank === null ? null : String(selectedRank)), { replace: true, preventScrollReset: true });
    }, WRITE_AFTER_MS);
    return () => clearTimeout(timer);
  }, [selectedRank, seenInAddress, isLeaving]);

  const setLayout = useCallback((layout: RankingLayout) => setSearchRef.current((current) => withParam(current, 'view', layout === 'cards' ? null : layout), { preventScrollReset: true }), []);
  const setOrder = useCallback(
    (order: CandidateOrder) => setSearchRef.current((current) => withParam(withParam(current, 'sort', order.sort === 'rank' ? null : order.sort), 'direction', order.direction === 'ascending' ? null : order.direction), { preventScrollReset: true }),
    [],
  );
  const writeNow = (rank: number) => {
    // Not through the router: a second navigation would cancel the one that leaves the page.
    const next = withParam(search, 'selected', String(rank));
    window.history.replaceState(window.history.state, '', `${window.location.pathname}?${next.toString()}`);
  };
  return { writeNow, layout: fromAddress.layout, order: fromAddress.order, selectedRank, setLayout, setOrder, select: setSelectedRank };
}
