import { useMutation, useQueryClient } from '@tanstack/react-query';
import { callEndpoint } from '../../../lib/api-client';
import { meQuery } from '../../../lib/session';

export function useSignIn() {
  const queryClient = useQueryClient();
  return useMutation({
    meta: { showsOwnErrors: true },
    mutationFn: (body: { email: string; password: string }) => callEndpoint('signIn', { body }),
    onSuccess: (me) => queryClient.setQueryData(meQuery.queryKey, me),
  });
}
