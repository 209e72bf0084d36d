import { keepPreviousData, queryOptions, useMutation, useQueryClient } from '@tanstack/react-query';
import { callEndpoint, type EndpointResponse } from '../../../lib/api-client';
import { meQuery } from '../../../lib/session';

export type Person = EndpointResponse<'listUsers'>['users'][number];
export type AuditRow = EndpointResponse<'listAudit'>['rows'][number];

const adminKeys = {
  all: ['admin'] as const,
  people: () => [...adminKeys.all, 'people'] as const,
  teams: () => [...adminKeys.all, 'teams'] as const,
  audit: (page: number) => [...adminKeys.all, 'audit', page] as const,
};

export const peopleQuery = queryOptions({ queryKey: adminKeys.people(), queryFn: ({ signal }) => callEndpoint('listUsers', { signal }) });
export const teamsQuery = queryOptions({ queryKey: adminKeys.teams(), queryFn: ({ signal }) => callEndpoint('listTeams', { signal }) });
export const auditQuery = (page: number) =>
  queryOptions({
    queryKey: adminKeys.audit(page),
    queryFn: ({ signal }) => callEndpoint('listAudit', { query: { page, pageSize: 50 }, signal }),
    placeholderData: keepPreviousData,
  });

export function useUpdatePerson() {
  const queryClient = useQueryClient();
  return useMutation({
    meta: { showsOwnErrors: true },
    mutationFn: ({ userId, ...body }: { userId: string; isAdmin?: boolean; isDisabled?: boolean }) =>
      callEndpoint('updateUser', { params: { userId }, body }),
    onSuccess: () => queryClient.invalidateQueries({ queryKey: adminKeys.people() }),
  });
}

export function useCreateTeam() {
  const queryClient = useQueryClient();
  return useMutation({
    meta: { showsOwnErrors: true },
    mutationFn: (name: string) => callEndpoint('createTeam', { body: { name } }),
    onSuccess: () =>
      Promise.all([
        queryClient.invalidateQueries({ queryKey: adminKeys.all }),
        queryClient.invalidateQueries({ queryKey: meQuery.queryKey }),
      ]),
  });
}
