import { useQueries } from '@tanstack/react-query';
import { CANDIDATE_PAGE_SIZE, candidatePageQuery, type CandidateOrder, type CandidateRow } from '../../../lib/queries/candidate-queries';

export interface CandidateRows {
  /** Number of kept candidates; null until the first page has come. */
  readonly total: number | null;
  /** The candidate at a position of the current order; undefined while its page is on the way. */
  readonly at: (index: number) => CandidateRow | undefined;
  readonly error: Error | null;
  readonly retry: () => void;
}

export interface ShownPages {
  readonly firstPage: number;
  readonly lastPage: number;
}

/** Pages of a half-open range of positions, so that scrolling within a page changes nothing. */
export function pagesOf(start: number, end: number): ShownPages {
  const pageOf = (index: number) => Math.floor(Math.max(0, index) / CANDIDATE_PAGE_SIZE) + 1;
  return { firstPage: pageOf(start), lastPage: pageOf(end - 1) };
}

/**
 * Candidates of a run in one order, loaded page by page where they are looked at.
 *
 * @param shown - pages with visible positions, both included; they and the first one are loaded.
 */
export function useCandidateRows(runId: string, order: CandidateOrder, { firstPage, lastPage }: ShownPages): CandidateRows {
  const pages = [1];
  for (let page = Math.max(2, firstPage); page <= lastPage; page++) pages.push(page);
  return useQueries({
    queries: pages.map((page) => candidatePageQuery(runId, order, page)),
    combine: (results) => {
      const byPage = new Map(results.flatMap((result) => (result.data === undefined ? [] : [[result.data.page, result.data] as const])));
      return {
        total: results[0]?.data?.total ?? null,
        at: (index: number) => byPage.get(Math.floor(index / CANDIDATE_PAGE_SIZE) + 1)?.rows[index % CANDIDATE_PAGE_SIZE],
        error: results.find((result) => result.error !== null)?.error ?? null,
        retry: () => {
          for (const result of results) if (result.error !== null) void result.refetch();
        },
      };
    },
  });
}
