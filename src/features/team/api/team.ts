import { queryOptions, useMutation, useQueryClient } from '@tanstack/react-query';
import type { TeamRole } from '../../../../shared/types/roles';
import { callEndpoint, type EndpointResponse } from '../../../lib/api-client';
import { meQuery } from '../../../lib/session';

export type Team = EndpointResponse<'readTeam'>;
export type MemberList = EndpointResponse<'listMembers'>;
export type Member = MemberList['members'][number];
export type Invitation = MemberList['invitations'][number];
export type Usage = EndpointResponse<'readUsage'>;
export type UsageRow = Usage['people'][number];
export type QuotaFigures = UsageRow['quota'];

const teamKeys = {
  all: ['teams'] as const,
  detail: (teamId: string) => [...teamKeys.all, 'detail', teamId] as const,
  members: (teamId: string) => [...teamKeys.all, 'members', teamId] as const,
  usage: (teamId: string) => [...teamKeys.all, 'usage', teamId] as const,
};

export const teamQuery = (teamId: string) =>
  queryOptions({ queryKey: teamKeys.detail(teamId), queryFn: ({ signal }) => callEndpoint('readTeam', { params: { teamId }, signal }) });
export const membersQuery = (teamId: string) =>
  queryOptions({
    queryKey: teamKeys.members(teamId),
    queryFn: ({ signal }) => callEndpoint('listMembers', { params: { teamId }, signal }),
  });
export const usageQuery = (teamId: string) =>
  queryOptions({ queryKey: teamKeys.usage(teamId), queryFn: ({ signal }) => callEndpoint('readUsage', { params: { teamId }, signal }) });

export function useRenameTeam(teamId: string) {
  const queryClient = useQueryClient();
  return useMutation({
    meta: { showsOwnErrors: true },
    mutationFn: (name: string) => callEndpoint('updateTeam', { params: { teamId }, body: { name } }),
    onSuccess: async (team) => {
      queryClient.setQueryData(teamKeys.detail(teamId), team);
      await queryClient.invalidateQueries({ queryKey: meQuery.queryKey });
    },
  });
}

export function useInvite(teamId: string) {
  const queryClient = useQueryClient();
  return useMutation({
    meta: { showsOwnErrors: true },
    mutationFn: (body: { email: string; role: TeamRole }) => callEndpoint('invite', { params: { teamId }, body }),
    onSuccess: () => queryClient.invalidateQueries({ queryKey: teamKeys.members(teamId) }),
  });
}

export function useRevokeInvitation(teamId: string) {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: (invitationId: string) => callEndpoint('revokeInvitation', { params: { teamId, invitationId } }),
    onSuccess: () => queryClient.invalidateQueries({ queryKey: teamKeys.members(teamId) }),
  });
}

export function useChangeRole(teamId: string) {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: ({ userId, role }: { userId: string; role: TeamRole }) =>
      callEndpoint('changeRole', { params: { teamId, userId }, body: { role } }),
    // Abilities of other rows hang on it too: a team keeps its last lead.
    onSettled: () =>
      Promise.all([
        queryClient.invalidateQueries({ queryKey: teamKeys.all }),
        queryClient.invalidateQueries({ queryKey: meQuery.queryKey }),
      ]),
  });
}

export function useRemoveMember(teamId: string) {
  const queryClient = useQueryClient();
  return useMutation({
    meta: { showsOwnErrors: true },
    mutationFn: (userId: string) => callEndpoint('removeMember', { params: { teamId, userId } }),
    onSuccess: () =>
      Promise.all([
        queryClient.invalidateQueries({ queryKey: teamKeys.all }),
        queryClient.invalidateQueries({ queryKey: meQuery.queryKey }),
      ]),
  });
}

export function useSetQuota(teamId: string) {
  const queryClient = useQueryClient();
  return useMutation({
    meta: { showsOwnErrors: true },
    mutationFn: ({ userId, quota }: { userId: string; quota: Partial<QuotaFigures> }) =>
      callEndpoint('setQuota', { params: { teamId, userId }, body: quota }),
    onSuccess: () => queryClient.invalidateQueries({ queryKey: teamKeys.usage(teamId) }),
  });
}
