import { callEndpoint } from '../../../lib/api-client';
import { queryClient } from '../../../lib/query-client';
import { unknownKeys } from './keys';

/** Which part of an unknown to open first: what follows from it, or, before any run, what is known. */
export async function unknownStart(unknownId: string): Promise<'runs' | 'evidence'> {
  const unknownRow = await queryClient.ensureQueryData({
    queryKey: unknownKeys.detail(unknownId),
    queryFn: ({ signal }) => callEndpoint('readUnknown', { params: { unknownId }, signal }),
  });
  return unknownRow.lastRun === null ? 'evidence' : 'runs';
}
