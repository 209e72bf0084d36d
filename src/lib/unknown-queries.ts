import { queryOptions } from '@tanstack/react-query';
import { callEndpoint, type EndpointResponse } from './api-client';

export type UnknownPage = EndpointResponse<'listUnknowns'>;
export type UnknownRow = UnknownPage['rows'][number];
export type UnknownDetail = EndpointResponse<'readUnknown'>;

/**
 * Keys of unknowns and of what hangs on one of them. Several features change an unknown (a new revision, a run, a
 * shortlist entry), so the keys live where all of them may reach.
 */
export const unknownKeys = {
  all: ['unknowns'] as const,
  lists: () => [...unknownKeys.all, 'list'] as const,
  list: (teamId: string, filter: object) => [...unknownKeys.lists(), teamId, filter] as const,
  detail: (unknownId: string) => [...unknownKeys.all, 'detail', unknownId] as const,
  comments: (unknownId: string) => [...unknownKeys.all, 'comments', unknownId] as const,
  /** Revisions are immutable; the family is keyed by revision, not by unknown. */
  revision: (revisionId: string) => ['revisions', 'detail', revisionId] as const,
};

export const unknownQuery = (unknownId: string) =>
  queryOptions({
    queryKey: unknownKeys.detail(unknownId),
    queryFn: ({ signal }) => callEndpoint('readUnknown', { params: { unknownId }, signal }),
  });

export const revisionQuery = (revisionId: string) =>
  queryOptions({
    queryKey: unknownKeys.revision(revisionId),
    queryFn: ({ signal }) => callEndpoint('readRevision', { params: { revisionId }, signal }),
  });
