import { queryOptions, useMutation, useQuery, useQueryClient } from '@tanstack/react-query';
import { callEndpoint, type EndpointResponse } from '../api-client';
import { showToast } from '../toasts';
import { unknownKeys } from '../unknown-queries';

export type Shortlist = EndpointResponse<'readShortlist'>;
export type ShortlistItem = Shortlist['items'][number];

export const shortlistKeys = {
  all: ['shortlists'] as const,
  ofUnknown: (unknownId: string) => [...shortlistKeys.all, unknownId] as const,
};

export const shortlistQuery = (unknownId: string) =>
  queryOptions({
    queryKey: shortlistKeys.ofUnknown(unknownId),
    queryFn: ({ signal }) => callEndpoint('readShortlist', { params: { unknownId }, signal }),
  });

/** Shortlist items by constitution: a candidate counts as kept whichever run it was kept from. */
export function useKeptByIdcode(unknownId: string | undefined): ReadonlyMap<string, ShortlistItem> {
  const { data } = useQuery({
    ...shortlistQuery(unknownId ?? ''),
    enabled: unknownId !== undefined,
    select: mapByIdcode,
  });
  return data ?? NOTHING_KEPT;
}
const NOTHING_KEPT: ReadonlyMap<string, ShortlistItem> = new Map();
const mapByIdcode = (list: Shortlist): ReadonlyMap<string, ShortlistItem> => new Map(list.items.map((item) => [item.idcode, item]));

/** Adds a candidate to the shortlist of its unknown. */
export function useKeepCandidate(unknownId: string) {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: (candidate: { readonly id: string; readonly rank: number }) =>
      callEndpoint('addToShortlist', { params: { unknownId }, body: { candidateId: candidate.id } }),
    onSuccess: async (item, candidate) => {
      queryClient.setQueryData(shortlistQuery(unknownId).queryKey, (list) =>
        list === undefined ? list : { items: [...list.items.filter((other) => other.id !== item.id), item] },
      );
      showToast('done', `Rank ${candidate.rank} is on the shortlist.`);
      await Promise.all([
        queryClient.invalidateQueries({ queryKey: shortlistKeys.ofUnknown(unknownId) }),
        queryClient.invalidateQueries({ queryKey: unknownKeys.all }),
      ]);
    },
  });
}
