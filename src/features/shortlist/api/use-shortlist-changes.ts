import { useMutation, useQueryClient } from '@tanstack/react-query';
import type { Verdict } from '../../../../shared/types/states';
import { callEndpoint } from '../../../lib/api-client';
import { shortlistQuery } from '../../../lib/queries/shortlist-queries';
import { unknownKeys } from '../../../lib/unknown-queries';

export interface ItemChange {
  readonly verdict?: Verdict;
  readonly note?: string;
}

/** Changes verdict or note of one item; the caller shows what went wrong beside the field. */
export function useUpdateItem(unknownId: string, itemId: string) {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: (change: ItemChange) => callEndpoint('updateShortlistItem', { params: { itemId }, body: change }),
    meta: { showsOwnErrors: true },
    // Changes of one item reach the server in the order in which they were made.
    scope: { id: `shortlist-item-${itemId}` },
    onSuccess: (item) => {
      queryClient.setQueryData(shortlistQuery(unknownId).queryKey, (list) =>
        list === undefined ? list : { items: list.items.map((other) => (other.id === item.id ? item : other)) },
      );
    },
  });
}

export function useStrikeOut(unknownId: string, itemId: string) {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: () => callEndpoint('removeShortlistItem', { params: { itemId } }),
    meta: { showsOwnErrors: true },
    onSuccess: async () => {
      queryClient.setQueryData(shortlistQuery(unknownId).queryKey, (list) =>
        list === undefined ? list : { items: list.items.filter((other) => other.id !== itemId) },
      );
      await queryClient.invalidateQueries({ queryKey: unknownKeys.all });
    },
  });
}
