import type { Logger } from 'pino';
import type { Sequelize } from 'sequelize';
import type { RunProgress } from '../../shared/jobs/contract.js';
import { evidenceDocument } from '../../shared/schemas/evidence.js';
import { Run } from '../models/run.js';
import { readReservation } from '../quotas/reservations.js';
import type { ComputeService } from './compute-service.js';
import { FairScheduler } from './fair-scheduler.js';
import type { RunEvent, RunListener, RunQueue } from './queue.js';
import { RunDriver, type RunTask } from './run-driver.js';
import { type RunEnd, RunStore } from './run-store.js';

export interface EmbeddedQueueOptions {
  readonly compute: ComputeService;
  readonly sequelize: Sequelize;
  readonly logger: Logger;
  /** Shards a run is cut into, at most about so many; independent of the number of threads, so that results are too. */
  readonly targetShards?: number;
  /** How long a job may ignore that it is to stop before its thread is ended. */
  readonly hardStopMs?: number;
}

const TARGET_SHARDS = 192;
const HARD_STOP_MS = 5_000;
/** A run that was under way every time the server was killed is not tried for ever. */
const MAX_INTERRUPTIONS = 3;

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
  readonly #listeners = new Map<string, Set<RunListener>>();
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
    const listeners = this.#listeners.get(runId) ?? new Set();
    this.#listeners.set(runId, listeners.add(listener));
    return () => {
      listeners.delete(listener);
      if (listeners.size === 0 && this.#listeners.get(runId) === listeners) this.#listeners.delete(runId);
    };
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
    const task = await this.#describeTask(run);
    if (task === null) return;
    const driver = new RunDriver(task, {
      compute: this.#options.compute,
      scheduler: this.#scheduler,
      store: this.#store,
      logger: this.#options.logger,
      targetShards: this.#options.targetShards ?? TARGET_SHARDS,
      hardStopMs: this.#options.hardStopMs ?? HARD_STOP_MS,
      emit: (event) => this.#emit(runId, event),
    });
    const settled = driver.run().finally(() => this.#runs.delete(runId));
    this.#runs.set(runId, { driver, settled });
    if (run.cancelRequestedAt !== null) driver.cancel();
    if (this.#isClosed) driver.close();
  }

  /** @returns null when the run cannot be gone on with; its row then says why */
  async #describeTask(run: Run): Promise<RunTask | null> {
    const evidence = evidenceDocument.safeParse(run.evidence);
    if (!evidence.success)
      return this.#interrupt(
        run,
        'evidenceUnreadable',
        'The server was updated while this run was under way, and its evidence cannot be read any more. Save the evidence again and start a new run.',
      );
    const wasKilled = run.status === 'running';
    if (wasKilled) await this.#store.countInterruption(run.id);
    const shards = await this.#store.loadShards(run.id);
    if (shards === null)
      return this.#interrupt(
        run,
        'planOutdated',
        'The server was updated while this run was under way, and its search plan no longer holds. Start the run again.',
      );
    if (shards.some(({ interruptions, result }) => result === null && interruptions >= MAX_INTERRUPTIONS)) {
      return this.#interrupt(
        run,
        'interruptedTooOften',
        `The server was killed ${MAX_INTERRUPTIONS} times while this run was under way; it was not taken up again.`,
      );
    }
    const lastDone = shards.reduce((latest, { finishedAt }) => Math.max(latest, finishedAt?.getTime() ?? 0), 0);
    return {
      id: run.id,
      teamId: run.teamId,
      evidence: evidence.data,
      settings: { ...run.settings, mode: 'rank' },
      shards: run.shardCount === 0 && shards.length === 0 ? null : shards.map(({ spec }) => spec),
      results: shards.flatMap(({ result }) => (result === null ? [] : [result])),
      elapsedSeconds: run.startedAt === null ? 0 : Math.max(0, (lastDone - run.startedAt.getTime()) / 1000),
      reservedCpuSeconds: await readReservation(run.id),
    };
  }

  async #interrupt(run: Run, code: string, message: string): Promise<null> {
    const end: RunEnd = {
      status: 'interrupted',
      complete: false,
      constitutionCount: null,
      multigraphCount: null,
      survivorCount: null,
      funnel: null,
      logSumExp: null,
      noneOfTheseProbability: null,
      candidates: [],
      failure: { code, message },
      cpuSeconds: await this.#store.sumCpuSeconds(run.id),
    };
    await this.#store.end(run, end, new Date());
    this.#emit(run.id, { kind: 'changed' });
    return null;
  }

  #emit(runId: string, event: RunEvent): void {
    for (const listener of [...(this.#listeners.get(runId) ?? [])]) listener(event);
  }
}
