import type { EndpointResponse } from '../../../lib/api-client';

export type UnknownPage = EndpointResponse<'listUnknowns'>;
export type UnknownRow = UnknownPage['rows'][number];
export type UnknownDetail = EndpointResponse<'readUnknown'>;

export const unknownKeys = {
  all: ['unknowns'] as const,
  lists: () => [...unknownKeys.all, 'list'] as const,
  list: (teamId: string, filter: object) => [...unknownKeys.lists(), teamId, filter] as const,
  detail: (unknownId: string) => [...unknownKeys.all, 'detail', unknownId] as const,
  comments: (unknownId: string) => [...unknownKeys.detail(unknownId), 'comments'] as const,
};
