import type { FlowProducer, Queue } from 'bullmq';
import type { Logger } from 'pino';
import { Run } from '../../models/run.js';
import type { ComputeService } from '../compute-service.js';
import { untilDatabaseAnswers } from '../database-retry.js';
import { type RunInput, readRunInput } from '../run-task.js';
import type { RunStore } from '../run-store.js';
import type { JobsUnderWay } from './jobs-under-way.js';
import { finishId, type QueueTiming } from './run-jobs.js';

/** What the jobs of a worker process work with. */
export interface RunJobsContext {
  readonly compute: ComputeService;
  readonly store: RunStore;
  readonly logger: Logger;
  readonly queue: Queue;
  readonly flows: FlowProducer;
  readonly underWay: JobsUnderWay;
  readonly inputs: RunInputs;
  readonly timing: QueueTiming;
  readonly targetShards: number;
  readonly isClosing: () => boolean;
}

export const onDatabase = <T>({ isClosing }: RunJobsContext, action: () => Promise<T>): Promise<T> =>
  untilDatabaseAnswers(action, isClosing);

/** Takes the shards of a run that nobody has begun out of the queue; `finish` then starts once the others are done. */
export async function dropWaitingShards(queue: Queue, runId: string): Promise<void> {
  const finish = await queue.getJob(finishId(runId));
  await finish?.removeUnprocessedChildren();
}

/** What a run's shards all need, read once: neither evidence nor settings of a run ever change. */
export interface SharedInput extends RunInput {
  readonly startedAt: Date | null;
}

const RUNS_REMEMBERED = 16;

export class RunInputs {
  readonly #inputs = new Map<string, SharedInput>();

  /** @throws CannotResume when the evidence cannot be read */
  async of(runId: string): Promise<SharedInput> {
    const known = this.#inputs.get(runId);
    if (known !== undefined) return known;
    const run = await Run.findByPk(runId, { rejectOnEmpty: true });
    const input = { ...readRunInput(run), startedAt: run.startedAt };
    this.#inputs.set(runId, input);
    if (this.#inputs.size > RUNS_REMEMBERED) this.#inputs.delete([...this.#inputs.keys()][0] ?? '');
    return input;
  }
}
