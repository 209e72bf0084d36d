import { queryOptions } from '@tanstack/react-query';
import { callEndpoint, type EndpointResponse } from '../../../lib/api-client';
import { explanationKeys } from './keys';

export type Explanation = EndpointResponse<'explainStructure'>;

/** A question about an ended run, asked by POST because a structure is long; the answer never changes. */
export const explanationQuery = (runId: string, smiles: string) =>
  queryOptions({
    queryKey: explanationKeys.detail(runId, smiles),
    queryFn: ({ signal }) => callEndpoint('explainStructure', { params: { runId }, body: { smiles }, signal }),
    staleTime: Infinity,
    retry: false,
  });
