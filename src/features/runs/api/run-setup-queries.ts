import { queryOptions } from '@tanstack/react-query';
import { callEndpoint, type EndpointResponse } from '../../../lib/api-client';
import { runSetupKeys } from './keys';

export type OwnQuota = EndpointResponse<'readOwnQuota'>;

export type RunEstimate = EndpointResponse<'estimateRun'>;

/** Own quota and what is used of it; asked anew whenever the dialog opens. */
export const ownQuotaQuery = (teamId: string) =>
  queryOptions({
    queryKey: runSetupKeys.quota(teamId),
    queryFn: ({ signal }) => callEndpoint('readOwnQuota', { params: { teamId }, signal }),
    staleTime: 0,
  });

/** Size of the search over one revision. Costs some two seconds of probing, hence kept; a failure is not repeated by itself. */
export const estimateQuery = (unknownId: string, revisionId: string) =>
  queryOptions({
    queryKey: runSetupKeys.estimate(unknownId, revisionId),
    queryFn: ({ signal }) => callEndpoint('estimateRun', { params: { unknownId }, body: { revisionId }, signal }),
    staleTime: Infinity,
    retry: false,
  });
