import type { Logger } from 'pino';
import type { Sequelize } from 'sequelize';
import type { RunProgress } from '../../shared/jobs/contract.js';
import { Run } from '../models/run.js';
import { readReservation } from '../quotas/reservations.js';
import type { ComputeService } from './compute-service.js';
import { FairScheduler } from './fair-scheduler.js';
import type { RunListener, RunQueue } from './queue.js';
import { RunDriver } from './run-driver.js';
import { endWithoutResult } from './run-end.js';
import { RunListeners } from './run-listeners.js';
import { RunStore } from './run-store.js';
import { CannotResume, readRunTask } from './run-task.js';
import { HARD_STOP_MS, TARGET_SHARDS } from './shard-limits.js';

export interface EmbeddedQueueOptions {
  readonly compute: ComputeService;
  readonly sequelize: Sequelize;
  readonly logger: Logger;
  /** Shards a run is cut into, at most about so many; independent of the number of threads, so that results are too. */
  readonly targetShards?: number;
  /** How long a job may ignore that it is to stop before its thread is ended. */
  readonly hardStopMs?: number;
}

/** The queue inside the server process: no other service is needed, and a restart goes on where it was. */
export function createEmbeddedQueue(options: EmbeddedQueueOptions): RunQueue {
  return new EmbeddedQueue(options);
}

interface RunUnderWay {
  readonly driver: RunDriver;
  readonly settled: Promise<void>;
}

class EmbeddedQueue implements RunQueue {
  readonly #options: EmbeddedQueueOptions;
  readonly #scheduler: FairScheduler;
  readonly #store: RunStore;
  readonly #runs = new Map<string, RunUnderWay>();
  readonly #listeners = new RunListeners();
  /** Runs on their way from the database into a driver. */
  readonly #loading = new Map<string, Promise<void>>();
  #isClosed = false;

  constructor(options: EmbeddedQueueOptions) {
    this.#options = options;
    this.#scheduler = new FairScheduler(options.compute.threadCount);
    this.#store = new RunStore(options.sequelize);
  }

  async start(): Promise<void> {
    const left = await Run.findAll({ where: { status: ['queued', 'running'] }, attributes: ['id'], order: [['createdAt', 'ASC']] });
    // One after the other: the shard results of several large runs need not be in memory at once on their way in.
    for (const { id } of left) await this.#load(id);
  }

  submit(runId: string): void {
    void this.#load(runId);
  }

  async cancel(runId: string): Promise<void> {
    await this.#loading.get(runId);
    const run = this.#runs.get(runId);
    run?.driver.cancel();
    await run?.settled;
  }

  progress(runId: string): RunProgress | null {
    return this.#runs.get(runId)?.driver.progress() ?? null;
  }

  subscribe(runId: string, listener: RunListener): () => void {
    return this.#listeners.subscribe(runId, listener);
  }

  async settled(runId: string): Promise<void> {
    await this.#loading.get(runId);
    await this.#runs.get(runId)?.settled;
  }

  async close(): Promise<void> {
    this.#isClosed = true;
    await Promise.all(this.#loading.values());
    const runs = [...this.#runs.values()];
    for (const { driver } of runs) driver.close();
    await Promise.all(runs.map(({ settled }) => settled));
  }

  #load(runId: string): Promise<void> {
    const loading = this.#takeOver(runId)
      .catch((error: unknown) => {
        this.#options.logger.error({ runId, err: error }, 'a run could not be taken over; the next start tries again');
      })
      .finally(() => this.#loading.delete(runId));
    this.#loading.set(runId, loading);
    return loading;
  }

  async #takeOver(runId: string): Promise<void> {
    const run = await Run.findByPk(runId);
    if (run === null || this.#isClosed || this.#runs.has(runId) || (run.status !== 'queued' && run.status !== 'running')) return;
    if (run.status === 'running') await this.#store.countInterruption(run.id);
    const task = await readRunTask(run, this.#store).catch((error: unknown) => {
      if (error instanceof CannotResume) return error;
      throw error;
    });
    if (task instanceof CannotResume) {
      await this.#store.end(run, endWithoutResult('interrupted', task.failure, await this.#store.sumCpuSeconds(run.id)), new Date());
      this.#listeners.emit(runId, { kind: 'changed' });
      return;
    }
    const driver = new RunDriver(task, {
      compute: this.#options.compute,
      scheduler: this.#scheduler,
      store: this.#store,
      logger: this.#options.logger,
      targetShards: this.#options.targetShards ?? TARGET_SHARDS,
      hardStopMs: this.#options.hardStopMs ?? HARD_STOP_MS,
      reservedCpuSeconds: await readReservation(runId),
      emit: (event) => this.#listeners.emit(runId, event),
    });
    const settled = driver.run().finally(() => this.#runs.delete(runId));
    this.#runs.set(runId, { driver, settled });
    if (run.cancelRequestedAt !== null) driver.cancel();
    if (this.#isClosed) driver.close();
  }
}
