import { UnrecoverableError, WaitingError, Worker } from 'bullmq';
import { ComputeBusy, type JobOptions, WorkerCrash } from '../compute-service.js';
import { crashedTooOften, describeFailure, isCancellation, MAX_CRASHES } from '../run-failure.js';
import type { RunFailure } from '../run-stop.js';
import type { JobUnderWay } from './jobs-under-way.js';
import type { RunJob } from './run-jobs.js';
import { onDatabase, type RunJobsContext } from './run-jobs-context.js';

const BUSY_PAUSE_MS = 250;

export const withSignal = (signal: AbortSignal | undefined): JobOptions => (signal === undefined ? {} : { signal });

export interface Attempt<T> {
  readonly job: RunJob;
  readonly token: string | undefined;
  /** For messages: `shard 7`. */
  readonly what: string;
  readonly limit?: { readonly epochMs: number; readonly seconds: number } | null;
  /** null: nothing came of it. */
  readonly work: (underWay: JobUnderWay) => Promise<T | null>;
  /** Writes down why the run fails, before the job does. */
  readonly giveUp: (failure: RunFailure) => Promise<void>;
}

/**
 * Makes one attempt at a job: watched while it works, tried again later when its thread ended, handed back when this
 * process is about to end.
 * @returns null when the run was stopped first
 */
export async function attempt<T>(context: RunJobsContext, { job, token, what, limit, work, giveUp }: Attempt<T>): Promise<T | null> {
  const { underWay, logger, queue, store } = context;
  const { runId } = job.data;
  const entry = underWay.add(job, limit ?? null);
  const started = performance.now();
  try {
    const result = await work(entry);
    if (result === null && entry.state === 'abandoned') return await handBack(job, token);
    return result;
  } catch (error) {
    if (error instanceof WaitingError) throw error;
    if (entry.state === 'abandoned' || context.isClosing()) return await handBack(job, token);
    await onDatabase(context, () => store.addCpuSeconds(runId, (performance.now() - started) / 1000));
    const isThreadsEnd = error instanceof WorkerCrash || isCancellation(error);
    if (entry.state === 'stopped' && isThreadsEnd) return null;
    if (error instanceof ComputeBusy) {
      await queue.rateLimit(BUSY_PAUSE_MS);
      throw Worker.RateLimitError();
    }
    if (isThreadsEnd && job.attemptsMade + 1 < MAX_CRASHES) {
      logger.warn({ runId, what, attempt: job.attemptsMade + 1, err: error }, 'a compute thread ended under its job');
      throw error;
    }
    const failure = describeFailure(isThreadsEnd ? crashedTooOften(what, error.message) : error, runId, logger);
    await giveUp(failure);
    throw new UnrecoverableError(failure.message);
  } finally {
    underWay.remove(entry);
  }
}

/** To the place in the queue that the job had; if it has gone to another worker already, there is nothing to hand back. */
async function handBack(job: RunJob, token: string | undefined): Promise<never> {
  await job.moveToWait(token).catch(() => undefined);
  throw new WaitingError();
}
