import type { CandidateOrder } from '../../../lib/queries/candidate-queries';

/**
 * Position of the selected candidate in the current order, or null when it is not in the list or its page is not loaded.
 *
 * @param at - candidate at a position, undefined while not loaded.
 */
export function selectionIndex(
  rank: number | null,
  order: CandidateOrder,
  total: number,
  at: (index: number) => { readonly rank: number } | undefined,
): number | null {
  if (rank === null) return null;
  if (order.sort === 'rank') {
    if (rank > total) return null;
    return order.direction === 'ascending' ? rank - 1 : total - rank;
  }
  for (let index = 0; index < total; index++) {
    if (at(index)?.rank === rank) return index;
  }
  return null;
}
