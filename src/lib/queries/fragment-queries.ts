import { queryOptions, useMutation, useQueryClient } from '@tanstack/react-query';
import { callEndpoint, type EndpointResponse } from '../api-client';

export type TeamFragmentList = EndpointResponse<'listTeamFragments'>;
export type TeamFragment = TeamFragmentList['fragments'][number];

export const fragmentKeys = {
  all: ['fragments'] as const,
  ofTeam: (teamId: string) => [...fragmentKeys.all, 'team', teamId] as const,
};

export const teamFragmentsQuery = (teamId: string) =>
  queryOptions({
    queryKey: fragmentKeys.ofTeam(teamId),
    queryFn: ({ signal }) => callEndpoint('listTeamFragments', { params: { teamId }, signal }),
  });

export function useCreateTeamFragment(teamId: string) {
  const queryClient = useQueryClient();
  return useMutation({
    meta: { showsOwnErrors: true },
    mutationFn: (body: { name: string; group: string; smiles: string }) => callEndpoint('createTeamFragment', { params: { teamId }, body }),
    onSuccess: (created) => {
      queryClient.setQueryData(teamFragmentsQuery(teamId).queryKey, (list) =>
        list === undefined ? list : { fragments: [...list.fragments, created] },
      );
    },
  });
}

export function useRemoveTeamFragment(teamId: string) {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: (fragmentId: string) => callEndpoint('removeTeamFragment', { params: { fragmentId } }),
    onSuccess: (_, fragmentId) => {
      queryClient.setQueryData(teamFragmentsQuery(teamId).queryKey, (list) =>
        list === undefined ? list : { fragments: list.fragments.filter(({ id }) => id !== fragmentId) },
      );
    },
  });
}
