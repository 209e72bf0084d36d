import { keepPreviousData, queryOptions, useMutation, useQueryClient } from '@tanstack/react-query';
import type { z } from 'zod';
import type { unknownListQuery } from '../../../../shared/schemas/unknowns';
import { callEndpoint } from '../../../lib/api-client';
import { unknownKeys, unknownQuery, type UnknownDetail } from '../../../lib/unknown-queries';

export type UnknownFilter = z.output<typeof unknownListQuery>;
export interface UnknownFields {
  title: string;
  description: string;
  purpose: 'research' | 'regulated';
}

/** A page of the list; the rows before stay on screen while the next ones load. */
export const unknownListOptions = (teamId: string, filter: UnknownFilter) =>
  queryOptions({
    queryKey: unknownKeys.list(teamId, filter),
    queryFn: ({ signal }) => callEndpoint('listUnknowns', { params: { teamId }, query: filter, signal }),
    placeholderData: keepPreviousData,
  });

export function useCreateUnknown(teamId: string) {
  const queryClient = useQueryClient();
  return useMutation({
    meta: { showsOwnErrors: true },
    mutationFn: (body: UnknownFields) => callEndpoint('createUnknown', { params: { teamId }, body }),
    onSuccess: async (created) => {
      queryClient.setQueryData(unknownQuery(created.id).queryKey, created);
      await queryClient.invalidateQueries({ queryKey: unknownKeys.lists() });
    },
  });
}

export function useUpdateUnknown(unknownId: string, options: { showsOwnErrors?: boolean } = {}) {
  const queryClient = useQueryClient();
  return useMutation({
    meta: options,
    mutationFn: (body: Partial<UnknownFields> & { status?: UnknownDetail['status'] }) =>
      callEndpoint('updateUnknown', { params: { unknownId }, body }),
    onSuccess: async (updated) => {
      queryClient.setQueryData(unknownQuery(updated.id).queryKey, updated);
      await queryClient.invalidateQueries({ queryKey: unknownKeys.lists() });
    },
  });
}
