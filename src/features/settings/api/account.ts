import { queryOptions, useMutation, useQueryClient } from '@tanstack/react-query';
import { callEndpoint } from '../../../lib/api-client';

const accountKeys = {
  sessions: () => ['account', 'sessions'] as const,
  quota: (teamId: string) => ['account', 'quota', teamId] as const,
};

export const sessionsQuery = queryOptions({
  queryKey: accountKeys.sessions(),
  queryFn: ({ signal }) => callEndpoint('listSessions', { signal }),
});
export const ownQuotaQuery = (teamId: string) =>
  queryOptions({
    queryKey: accountKeys.quota(teamId),
    queryFn: ({ signal }) => callEndpoint('readOwnQuota', { params: { teamId }, signal }),
  });

export function useEndSession() {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: (sessionId: string) => callEndpoint('endSession', { params: { sessionId } }),
    onSuccess: () => queryClient.invalidateQueries({ queryKey: accountKeys.sessions() }),
  });
}

/** A new password is set through a mailed link, also by people who are signed in. */
export function useMailResetLink() {
  return useMutation({ mutationFn: (email: string) => callEndpoint('requestPasswordReset', { body: { email } }) });
}
