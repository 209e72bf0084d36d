import { ComputeFailure, type ComputeService } from '../compute/compute-service.js';
import { BadInputError, InterruptedError } from './cli-error.js';
import type { CliContext } from './cli-context.js';

/** Opens the compute threads for a piece of work and closes them behind it, whatever happens. */
export async function withCompute<T>(
  context: CliContext,
  threads: number | undefined,
  work: (compute: ComputeService) => Promise<T>,
): Promise<T> {
  const compute = await context.openCompute(threads);
  try {
    return await work(compute);
  } catch (error) {
    throw asCliError(error);
  } finally {
    await compute.close();
  }
}

/** A job's own "bad input" or "cancelled" as the command line's; anything else stays what it is. */
export function asCliError(error: unknown): unknown {
  if (!(error instanceof ComputeFailure)) return error;
  const { code, message, issues } = error.failure;
  if (code === 'badInput') return new BadInputError(issues ?? [{ path: '', message }]);
  return code === 'cancelled' ? new InterruptedError() : error;
}
