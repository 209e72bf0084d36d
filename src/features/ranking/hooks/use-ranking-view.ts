import { useEffect, useState } from 'react';
import { useLocation, useSearchParams } from 'react-router-dom';
import type { CandidateOrder, CandidateSort } from '../../../lib/queries/candidate-queries';
import { addressWith, replaceAddress } from './address';

export type RankingLayout = 'cards' | 'table';
const SORTS: readonly CandidateSort[] = ['rank', 'carbonDeviation', 'protonDeviation', 'smiles'];
/** Moving through a list by keyboard must not write the address on every step: browsers limit how often it may change. */
const WRITE_AFTER_MS = 200;

export interface RankingView {
  readonly layout: RankingLayout;
  readonly order: CandidateOrder;
  /** Rank of the selected candidate, or null. */
  readonly selectedRank: number | null;
  readonly setLayout: (layout: RankingLayout) => void;
  readonly setOrder: (order: CandidateOrder) => void;
  readonly select: (rank: number) => void;
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

/**
 * Layout, order and selection of the ranking; all of them live in the address. The selection is written past the
 * router: it changes nothing that is loaded, and a navigation of its own could cancel one that leaves the page.
 */
export function useRankingView(): RankingView {
  const { pathname } = useLocation();
  const [search, setSearch] = useSearchParams();
  const fromAddress = readRankingView(search);
  const [selectedRank, setSelectedRank] = useState(fromAddress.selectedRank);
  const [seenInAddress, setSeenInAddress] = useState(fromAddress.selectedRank);
  // Back and forward bring another selection along.
  if (fromAddress.selectedRank !== seenInAddress) {
    setSeenInAddress(fromAddress.selectedRank);
    setSelectedRank(fromAddress.selectedRank);
  }
  useEffect(() => {
    if (selectedRank === null) return undefined;
    const timer = setTimeout(() => replaceAddress(pathname, { selected: String(selectedRank) }), WRITE_AFTER_MS);
    return () => clearTimeout(timer);
  }, [selectedRank, pathname]);

  const selected = selectedRank === null ? null : String(selectedRank);
  return {
    ...fromAddress,
    selectedRank,
    select: setSelectedRank,
    setLayout: (layout) => setSearch(addressWith({ view: layout === 'cards' ? null : layout, selected }), { preventScrollReset: true }),
    setOrder: ({ sort, direction }) =>
      setSearch(addressWith({ sort: sort === 'rank' ? null : sort, direction: direction === 'ascending' ? null : direction, selected }), {
        preventScrollReset: true,
      }),
    writeNow: (rank) => replaceAddress(pathname, { selected: String(rank) }),
  };
}
