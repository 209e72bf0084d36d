import { queryOptions, useMutation, useQueryClient } from '@tanstack/react-query';
import type { EvidenceDocument } from '../../../../shared/schemas/evidence';
import { callEndpoint, type EndpointResponse } from '../../../lib/api-client';
import { revisionQuery, unknownKeys } from '../../../lib/unknown-queries';

export type RevisionList = EndpointResponse<'listRevisions'>;
export type Revision = EndpointResponse<'readRevision'>;

export const revisionKeys = {
  ofUnknown: (unknownId: string) => ['revisions', 'list', unknownId] as const,
};

export const revisionsQuery = (unknownId: string) =>
  queryOptions({
    queryKey: revisionKeys.ofUnknown(unknownId),
    queryFn: ({ signal }) => callEndpoint('listRevisions', { params: { unknownId }, signal }),
  });

/** A new revision changes the unknown (formula, counts) and every list it stands in. */
function useRevisionSaved(unknownId: string) {
  const queryClient = useQueryClient();
  return async (revision: Revision) => {
    queryClient.setQueryData(revisionQuery(revision.id).queryKey, revision);
    await Promise.all([
      queryClient.invalidateQueries({ queryKey: unknownKeys.all }),
      queryClient.invalidateQueries({ queryKey: revisionKeys.ofUnknown(unknownId) }),
    ]);
  };
}

export function useSaveRevision(unknownId: string) {
  const onSaved = useRevisionSaved(unknownId);
  return useMutation({
    meta: { showsOwnErrors: true },
    mutationFn: (body: { evidence: EvidenceDocument; comment: string; basedOn: number }) =>
      callEndpoint('createRevision', { params: { unknownId }, body }),
    onSuccess: onSaved,
  });
}

export function useRestoreRevision(unknownId: string) {
  const onSaved = useRevisionSaved(unknownId);
  return useMutation({
    mutationFn: (revisionId: string) => callEndpoint('restoreRevision', { params: { revisionId } }),
    onSuccess: onSaved,
  });
}
