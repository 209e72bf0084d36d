import { Queue, QueueEvents } from 'bullmq';
import type { Redis } from 'ioredis';
import type { Logger } from 'pino';
import type { Sequelize } from 'sequelize';
import type { RunProgress } from '../../../shared/jobs/contract.js';
import { Run } from '../../models/run.js';
import { untilDatabaseAnswers } from '../database-retry.js';
import type { RunListener, RunQueue } from '../queue.js';
import { describeEnd, endWithoutResult } from '../run-end.js';
import { RunListeners } from '../run-listeners.js';
import type { RunFailure, Stop } from '../run-stop.js';
import { RunStore } from '../run-store.js';
import { gatherShards } from './finish-run.js';
import { LimitWatch } from './limit-watch.js';
import {
  DEFAULT_TIMING,
  type FinishData,
  finishId,
  jobOptions,
  KEY_PREFIX,
  planId,
  type QueueTiming,
  readJobId,
  RUN_QUEUE,
  type ShardFigures,
  type ShardProgress,
} from './run-jobs.js';
import { dropWaitingShards } from './run-jobs-context.js';
import { RunMonitor } from './run-monitor.js';

export interface BullmqQueueOptions {
  /** Its connection is shared; closing the queue leaves it open. */
  readonly redis: Redis;
  readonly sequelize: Sequelize;
  readonly logger: Logger;
  readonly timing?: Partial<QueueTiming>;
}

const TICK_MS = 500;
/** Shards that have been told to stop get so long to say what they have found; who cancels a run does not wait longer. */
const LAST_WORDS_MS = 700;

/** The queue on Redis: workers, in this process and in others, take the jobs; here runs are handed over, watched and cancelled. */
export function createBullmqQueue(options: BullmqQueueOptions): RunQueue {
  return new BullmqQueue(options);
}

class BullmqQueue implements RunQueue {
  readonly #options: BullmqQueueOptions;
  readonly #timing: QueueTiming;
  readonly #store: RunStore;
  readonly #queue: Queue;
  readonly #events: QueueEvents;
  readonly #listeners = new RunListeners();
  readonly #monitors = new Map<string, RunMonitor>();
  readonly #limits = new Map<string, LimitWatch>();
  /** Runs on their way into a monitor. */
  readonly #loading = new Map<string, Promise<void>>();
  readonly #timers: NodeJS.Timeout[] = [];
  #upkeep: Promise<void> = Promise.resolve();
  #isClosed = false;

  constructor(options: BullmqQueueOptions) {
    this.#options = options;
    this.#timing = { ...DEFAULT_TIMING, ...options.timing };
    this.#store = new RunStore(options.sequelize);
    const base = { connection: options.redis, prefix: KEY_PREFIX };
    this.#queue = new Queue(RUN_QUEUE, { ...base, defaultJobOptions: jobOptions(this.#timing) });
    this.#events = new QueueEvents(RUN_QUEUE, base);
    const onError = (error: Error) => options.logger.warn({ err: error }, 'the queue on Redis has a fault');
    this.#queue.on('error', onError);
    this.#events.on('error', onError);
    this.#listen();
  }

  async start(): Promise<void> {
    await this.#events.waitUntilReady();
    await this.#lookAfterRuns();
    this.#timers.push(
      setInterval(() => this.#tick(), TICK_MS),
      setInterval(() => {
        this.#upkeep = this.#upkeep
          .then(() => this.#lookAfterRuns())
          .catch((error: unknown) => this.#options.logger.warn({ err: error }, 'the upkeep of the queue failed; it is tried again'));
      }, this.#timing.upkeepMs),
    );
  }

  submit(runId: string): void {
    void this.#watch(runId);
  }

  async cancel(runId: string): Promise<void> {
    await this.#onDatabase(() => this.#store.requestCancel(runId, new Date()));
    await this.#watch(runId);
    const deadline = performance.now() + LAST_WORDS_MS;
    // Whatever becomes of the jobs, the row says that the run is cancelled, and they look at it.
    const jobsDropped = this.#dropJobs(runId);
    await Promise.race([jobsDropped, pause(LAST_WORDS_MS)]);
    while ((this.#monitors.get(runId)?.shardsUnderWay ?? 0) > 0 && performance.now() < deadline) await pause(20);
    await this.#endRun(runId, { kind: 'cancelled' });
  }

  progress(runId: string): RunProgress | null {
    return this.#monitors.get(runId)?.progress() ?? null;
  }

  subscribe(runId: string, listener: RunListener): () => void {
    return this.#listeners.subscribe(runId, listener);
  }

  async settled(runId: string): Promise<void> {
    await this.#loading.get(runId);
    await this.#monitors.get(runId)?.settled;
  }

  async close(): Promise<void> {
    this.#isClosed = true;
    for (const timer of this.#timers) clearInterval(timer);
    await Promise.all([this.#upkeep, ...this.#loading.values()]);
    await Promise.all([this.#events.close(), this.#queue.close()]);
    for (const monitor of this.#monitors.values()) monitor.end();
    this.#monitors.clear();
  }

  /** Makes sure that a run that has not ended is watched here and that a job carries it. Never rejects. */
  #watch(runId: string): Promise<void> {
    // One after the other: what is read of a run must not be older than what was read before.
    const loading = (this.#loading.get(runId) ?? Promise.resolve())
      .then(() => this.#takeOver(runId))
      .catch((error: unknown) => {
        this.#options.logger.error({ runId, err: error }, 'a run could not be handed over; it is tried again');
      })
      .finally(() => {
        if (this.#loading.get(runId) === loading) this.#loading.delete(runId);
      });
    this.#loading.set(runId, loading);
    return loading;
  }

  async #takeOver(runId: string): Promise<void> {
    const run = await Run.findByPk(runId);
    if (run === null || this.#isClosed) return;
    if (run.status !== 'queued' && run.status !== 'running') return this.#settle(runId);
    let monitor = this.#monitors.get(runId);
    const isNew = monitor === undefined;
    monitor ??= new RunMonitor(run.startedAt, run.settings.maxSeconds);
    // Events from here on find the monitor; what happened before is read below.
    this.#monitors.set(runId, monitor);
    if (isNew) this.#limits.set(runId, new LimitWatch(runId, run.settings, this.#store));
    // The plan is asked for first: it adds the flow before it ends, so that a run that goes on is found as one or the other.
    const isPlanning = (await this.#queue.getJob(planId(runId))) !== undefined;
    const finish = await this.#queue.getJob(finishId(runId));
    if (finish !== undefined && isNew) {
      const done = Object.entries(await finish.getChildrenValues<ShardFigures | null>());
      const figures = done.flatMap(([key, value]): [number, ShardFigures][] => {
        const shard = readJobId(key.slice(key.lastIndexOf(':') + 1));
        return shard === null || value === null ? [] : [[shard.index, value]];
      });
      monitor.enumerate(finish.data as FinishData, new Map(figures));
      for (const { id } of await this.#queue.getActive()) {
        const active = readJobId(id ?? '');
        if (active?.runId === runId && active.name === 'shard') monitor.shardActive(active.index);
      }
    }
    if (finish === undefined && !isPlanning) {
      await this.#queue.add('plan', { runId }, { jobId: planId(runId) });
    }
  }

  /** Finds the runs that nobody watches or carries: after a restart, after Redis has lost its jobs, of another server. */
  async #lookAfterRuns(): Promise<void> {
    const open = await Run.findAll({ where: { status: ['queued', 'running'] }, attributes: ['id'], order: [['createdAt', 'ASC']] });
    for (const runId of new Set([...open.map(({ id }) => id), ...this.#monitors.keys()])) await this.#watch(runId);
    if (open.length > 0 && (await this.#queue.getWorkersCount()) === 0)
      this.#options.logger.warn({ runs: open.length }, 'runs are waiting and no worker is there: start one with npm run worker');
  }

  #listen(): void {
    const onJob = (jobId: string, tell: (monitor: RunMonitor, job: NonNullable<ReturnType<typeof readJobId>>) => void) => {
      const job = readJobId(jobId);
      if (job === null || this.#isClosed) return;
      const monitor = this.#monitors.get(job.runId);
      if (monitor !== undefined) tell(monitor, job);
      else if (job.name !== 'shard') void this.#watch(job.runId);
    };
    const onLeft = ({ jobId }: { jobId: string }) => onJob(jobId, (monitor, { index }) => monitor.shardLeft(index));
    this.#events.on('active', ({ jobId }) =>
      onJob(jobId, (monitor, { name, runId, index }) => {
        if (name === 'shard') monitor.shardActive(index);
        if (name !== 'finish') return;
        monitor.rank();
        this.#emitProgress(runId, monitor);
      }),
    );
    this.#events.on('progress', ({ jobId, data }) =>
      onJob(jobId, (monitor, { name, runId, index }) => {
        if (name === 'shard') monitor.shardSeen(index, data as unknown as ShardProgress);
        if (name !== 'plan') return;
        monitor.begin();
        this.#listeners.emit(runId, { kind: 'changed' });
      }),
    );
    this.#events.on('completed', ({ jobId, returnvalue }) =>
      onJob(jobId, (monitor, { name, runId, index }) => {
        if (name === 'shard') monitor.shardDone(index, returnvalue as ShardFigures | null);
        else if (name === 'plan' && returnvalue !== null) monitor.enumerate(returnvalue as FinishData);
        // Nothing left to plan, or finished: its row says how it ended.
        else void this.#watch(runId);
      }),
    );
    this.#events.on('failed', ({ jobId, failedReason }) =>
      onJob(jobId, (monitor, { name, runId, index }) => {
        if (name === 'shard') monitor.shardLeft(index);
        else void this.#endFailed(runId, failedReason);
      }),
    );
    this.#events.on('waiting', onLeft);
    this.#events.on('delayed', onLeft);
    this.#events.on('stalled', onLeft);
    this.#events.on('removed', onLeft);
  }

  /** A job that ends a run has failed. Mostly the row says so already; when its workers were killed, nobody has written that. */
  async #endFailed(runId: string, reason: string): Promise<void> {
    const failure: RunFailure = {
      code: 'workerCrashed',
      message: `The workers ended under this run again and again (${reason}). Narrow the evidence, or ask whoever runs the workers to look into their logs.`,
    };
    try {
      const run = await this.#onDatabase(() => Run.findByPk(runId));
      if (run === null) return;
      const cpuSeconds = run.cpuSeconds + (await this.#store.sumCpuSeconds(runId));
      await this.#onDatabase(() => this.#store.end(run, endWithoutResult('failed', failure, cpuSeconds), new Date()));
      this.#settle(runId);
    } catch (error) {
      this.#options.logger.error({ runId, err: error }, 'the end of a run could not be written; it is tried again');
    }
  }

  async #endRun(runId: string, stop: Stop): Promise<void> {
    const run = await this.#onDatabase(() => Run.findByPk(runId));
    if (run !== null && (run.status === 'queued' || run.status === 'running')) {
      const { merged } = await this.#onDatabase(() => gatherShards(run, this.#store));
      const end = describeEnd({
        merged,
        isPlanned: run.shardCount > 0,
        stop,
        candidates: [],
        noneOfTheseProbability: null,
        otherCpuSeconds: run.cpuSeconds,
      });
      await this.#onDatabase(() => this.#store.end(run, end, new Date()));
    }
    this.#settle(runId);
  }

  #settle(runId: string): void {
    const monitor = this.#monitors.get(runId);
    if (monitor === undefined) return;
    monitor.end();
    this.#emitProgress(runId, monitor);
    this.#monitors.delete(runId);
    this.#limits.delete(runId);
    this.#listeners.emit(runId, { kind: 'changed' });
  }

  /** Takes out of the queue what nobody has begun. */
  async #dropJobs(runId: string): Promise<void> {
    try {
      await this.#queue.remove(planId(runId));
      await dropWaitingShards(this.#queue, runId);
    } catch (error) {
      this.#options.logger.warn({ runId, err: error }, 'the jobs of a run that is to stop are still in the queue; workers skip them');
    }
  }

  #tick(): void {
    for (const [runId, monitor] of this.#monitors) {
      this.#emitProgress(runId, monitor);
      this.#watchLimits(runId, monitor).catch((error: unknown) => {
        this.#options.logger.warn({ runId, err: error }, 'the limits of a run could not be looked at; they are looked at again');
      });
    }
  }

  async #watchLimits(runId: string, monitor: RunMonitor): Promise<void> {
    if (await this.#limits.get(runId)?.look(monitor)) await this.#dropJobs(runId);
  }

  #emitProgress(runId: string, monitor: RunMonitor): void {
    this.#listeners.emit(runId, { kind: 'progress', progress: monitor.progress() });
  }

  #onDatabase<T>(action: () => Promise<T>): Promise<T> {
    return untilDatabaseAnswers(action, () => this.#isClosed);
  }
}

const pause = (milliseconds: number) => new Promise<void>((resolve) => setTimeout(resolve, milliseconds));
