import { queryClient } from '../../../lib/query-client';
import { unknownQuery } from '../../../lib/unknown-queries';

/** Which part of an unknown to open first: what follows from it, or, before any run, what is known. */
export async function unknownStart(unknownId: string): Promise<'runs' | 'evidence'> {
  const detail = await queryClient.ensureQueryData(unknownQuery(unknownId));
  return detail.lastRun === null ? 'evidence' : 'runs';
}
