import { queryOptions } from '@tanstack/react-query';
import { callEndpoint } from '../api-client';

/** Reads of an unknown that several features need; they share the family of keys of the unknowns feature. */
export const unknownReadKeys = {
  all: ['unknowns'] as const,
  detail: (unknownId: string) => [...unknownReadKeys.all, 'detail', unknownId] as const,
};
export const unknownQuery = (unknownId: string) =>
  queryOptions({
    queryKey: unknownReadKeys.detail(unknownId),
    queryFn: ({ signal }) => callEndpoint('readUnknown', { params: { unknownId }, signal }),
  });

export const revisionReadKeys = {
  detail: (revisionId: string) => ['revisions', 'detail', revisionId] as const,
};
/** Revisions never change. */
export const revisionQuery = (revisionId: string) =>
  queryOptions({
    queryKey: revisionReadKeys.detail(revisionId),
    queryFn: ({ signal }) => callEndpoint('readRevision', { params: { revisionId }, signal }),
    staleTime: Infinity,
  });
