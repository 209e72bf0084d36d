import type { JobContract, JobName } from '../../shared/jobs/contract.js';
import type { AppContext } from '../app-context.js';
import { InvalidInputError, UnavailableError } from '../errors.js';
import { ComputeBusy, ComputeFailure, WorkerCrash } from './compute-service.js';

/** Jobs that somebody waits for. */
export type QuestionName = Extract<JobName, 'explain' | 'predict' | 'estimate' | 'layout'>;

/** Nobody waits longer; the thread is then ended, so that the next question is not held up. */
const PATIENCE_MS = 30_000;

/**
 * Puts a question to the engine and answers in the terms of the API.
 * @throws InvalidInputError when the engine refuses the input; `pathPrefix` goes before its paths
 * @throws UnavailableError when the engine is busy, crashed or took too long
 */
export async function ask<K extends QuestionName>(
  context: AppContext,
  name: K,
  input: JobContract[K]['input'],
  pathPrefix = '',
): Promise<JobContract[K]['output']> {
  if (context.compute === undefined) throw new UnavailableError('noCompute', 'The server runs without its compute threads.');
  const signal = AbortSignal.timeout(PATIENCE_MS);
  try {
    return await context.compute.runJob(name, input, { signal });
  } catch (error) {
    if (error instanceof ComputeBusy) throw new UnavailableError();
    if (error instanceof WorkerCrash) {
      if (signal.aborted)
        throw new UnavailableError(
          'tookTooLong',
          `This took longer than ${PATIENCE_MS / 1000} s and was stopped. Narrow the evidence, or try again later.`,
        );
      context.logger.error({ err: error, job: name }, 'a compute thread ended under a question');
      throw new UnavailableError(
        'computeFailed',
        'A compute thread failed at this. Please try again; if it fails again, the log of the server has the details.',
      );
    }
    if (error instanceof ComputeFailure && error.failure.code === 'badInput') {
      const issues = error.failure.issues ?? [{ path: '', message: error.failure.message }];
      throw new InvalidInputError(issues.map(({ path, message }) => ({ path: `${pathPrefix}${path}`, message })));
    }
    throw error;
  }
}
