import { ComputeFailure, type ComputeService } from '../compute/compute-service.js';
import { BadInputError, InterruptedError } from './cli-error.js';
import type { CliContext } from './cli-context.js';
import { abortable } from './local-run.js';
import { evidenceOfFormula } from './read-input.js';

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

/** Any small plan: what is asked does not matter, only that every thread has loaded the engine. */
const WARM_UP = { evidence: evidenceOfFormula('CH4'), settings: { keep: 1, maxSeconds: null, mode: 'count' }, targetShards: 1 } as const;

/**
 * As `withCompute`, with all threads ready before the work begins, so that neither a time limit nor a measured time
 * contains their start.
 */
export async function withWarmCompute<T>(
  context: CliContext,
  threads: number | undefined,
  work: (compute: ComputeService) => Promise<T>,
): Promise<T> {
  return withCompute(context, threads, async (compute) => {
    await abortable(context.interrupt, (signal) =>
      Promise.all(Array.from({ length: compute.threadCount }, () => compute.runJob('plan', WARM_UP, { signal }))),
    );
    return work(compute);
  });
}

/** A job's own "bad input" or "cancelled" as the command line's; anything else stays what it is. */
export function asCliError(error: unknown): unknown {
  if (!(error instanceof ComputeFailure)) return error;
  const { code, message, issues } = error.failure;
  if (code === 'badInput') return new BadInputError(issues ?? [{ path: '', message }]);
  return code === 'cancelled' ? new InterruptedError() : error;
}
