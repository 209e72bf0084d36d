import { queryOptions } from '@tanstack/react-query';
import { callEndpoint } from '../../../lib/api-client';

export const installationQuery = queryOptions({
  queryKey: ['installation'] as const,
  queryFn: ({ signal }) => callEndpoint('readInstallation', { signal }),
  staleTime: Number.POSITIVE_INFINITY,
  retry: false,
});
