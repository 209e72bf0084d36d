import type { JobContract, JobFailure, JobName } from '../../shared/jobs/contract.js';

export interface JobOptions {
  /** Hard stop: ends the thread and all it knew. Use the flag in the job's counters first. */
  readonly signal?: AbortSignal;
}

/** Whatever runs compute jobs: the piscina pool, or a substitute in tests. */
export interface ComputeService {
  /** How many shards can run side by side. */
  readonly threadCount: number;
  /**
   * Runs one job to its end.
   * @throws ComputeFailure when the job answers with a failure
   * @throws WorkerCrash when the thread ended before the job did (also after `signal`)
   * @throws ComputeBusy when too many jobs are waiting
   */
  runJob<K extends JobName>(name: K, input: JobContract[K]['input'], options?: JobOptions): Promise<JobContract[K]['output']>;
  close(): Promise<void>;
}

/** The job itself said no: bad input, cancelled, or a fault in the engine. */
export class ComputeFailure extends Error {
  override readonly name = 'ComputeFailure';
  constructor(readonly failure: JobFailure) {
    super(failure.message);
  }
}

/** The thread ended under the job: out of memory, a crash, or a hard stop. The job may be tried again. */
export class WorkerCrash extends Error {
  override readonly name = 'WorkerCrash';
}

/** Too many jobs are waiting; the caller may try again later. */
export class ComputeBusy extends Error {
  override readonly name = 'ComputeBusy';
}
