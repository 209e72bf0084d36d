import type { Logger } from 'pino';
import { ComputeFailure, WorkerCrash } from './compute-service.js';
import type { RunFailure } from './run-stop.js';

/** Attempts of one job before its run fails. */
export const MAX_CRASHES = 3;

/** The thread under a job ended each time it was tried. */
export const crashedTooOften = (what: string, cause: string): WorkerCrash =>
  new WorkerCrash(`A compute thread ended ${MAX_CRASHES} times at the same place (${what}): ${cause}`);

/** Turns whatever went wrong into a reason that people can read; faults of ours go to the log with their details. */
export function describeFailure(error: unknown, runId: string, logger: Logger): RunFailure {
  if (error instanceof ComputeFailure && error.failure.code !== 'internal') {
    const issues = (error.failure.issues ?? []).map(({ path, message }) => `${path}: ${message}`);
    return { code: error.failure.code, message: issues.length === 0 ? error.message : `${error.message} (${issues.join('; ')})` };
  }
  if (error instanceof WorkerCrash) {
    return {
      code: 'workerCrashed',
      message: `${error.message}. Narrow the evidence, or ask whoever runs the server to look into its log.`,
    };
  }
  logger.error({ runId, err: error }, 'a run failed by a fault of the server');
  return { code: 'internal', message: 'The run failed by a fault of the server; its log has the details.' };
}

export const isCancellation = (error: unknown): error is ComputeFailure =>
  error instanceof ComputeFailure && error.failure.code === 'cancelled';
