import { queryOptions, useMutation, useQueryClient } from '@tanstack/react-query';
import { callEndpoint } from '../../../lib/api-client';
import { meQuery } from '../../../lib/session';

export const invitationQuery = (token: string) =>
  queryOptions({
    queryKey: ['invitation', token] as const,
    queryFn: ({ signal }) => callEndpoint('readInvitation', { params: { token }, signal }),
    staleTime: Number.POSITIVE_INFINITY,
  });

export function useAcceptInvitation(token: string) {
  const queryClient = useQueryClient();
  return useMutation({
    meta: { showsOwnErrors: true },
    mutationFn: (body: { name: string; password: string }) => callEndpoint('acceptInvitation', { params: { token }, body }),
    onSuccess: (me) => queryClient.setQueryData(meQuery.queryKey, me),
  });
}
