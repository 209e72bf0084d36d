import type { Logger } from 'pino';
import type { RunProgress, ShardSpec } from '../../shared/jobs/contract.js';
import { cancelRun, createCounters, readCounter } from '../../shared/jobs/counters.js';
import { ComputeBusy, type ComputeService, WorkerCrash } from './compute-service.js';
import { untilDatabaseAnswers } from './database-retry.js';
import type { FairScheduler } from './fair-scheduler.js';
import { ShardMerger } from './merge-shards.js';
import type { RunEvent } from './queue.js';
import { RunClock, type RunFigures } from './run-clock.js';
import { describeEnd } from './run-end.js';
import { crashedTooOften, describeFailure, isCancellation, MAX_CRASHES } from './run-failure.js';
import { guessSeconds } from './run-size.js';
import { runSize } from './share.js';
import { countLimitStop, QUOTA_STOP, type Stop, stopOfShards, timeLimitStop } from './run-stop.js';
import type { RunEnd, RunStore } from './run-store.js';
import type { RunTask } from './run-task.js';

export interface DriverOptions {
  readonly compute: ComputeService;
  readonly scheduler: FairScheduler;
  readonly store: RunStore;
  readonly logger: Logger;
  readonly targetShards: number;
  /** CPU seconds set aside for the run. */
  readonly reservedCpuSeconds: number;
  /** How long a job may ignore that it is to stop before its thread is ended. */
  readonly hardStopMs: number;
  readonly emit: (event: RunEvent) => void;
}

const TICK_MS = 500;
const BUSY_PAUSE_MS = 250;
/** Results on their way to the database; with more of them a shard keeps its slot until one is written. */
const MAX_PENDING_WRITES = 8;

/** Takes one run through planning, shards and finishing to its end. */
export class RunDriver {
  readonly #task: RunTask;
  readonly #options: DriverOptions;
  readonly #merger: ShardMerger;
  readonly #clock: RunClock;
  /** Shards whose job is under way: when it began, and the memory it shares with us. */
  readonly #underWay = new Map<SharedArrayBuffer, number>();
  readonly #aborts = new Set<AbortController>();
  readonly #writes = new Set<Promise<void>>();
  #shardsAtRest: Promise<unknown> = Promise.resolve();
  #stage: RunProgress['stage'] = 'planning';
  #stop: Stop | null = null;
  /** The process is about to end: the run is given back, and the database is not waited for any more. */
  #isClosing = false;
  #announceHalt!: () => void;
  readonly #halt = new Promise<null>((resolve) => (this.#announceHalt = () => resolve(null)));
  /** CPU seconds beside the merged shards: planning, finishing, attempts that came to nothing. */
  #otherCpuSeconds = 0;
  #reservedCpuSeconds: number;
  #isExtending = false;

  constructor(task: RunTask, options: DriverOptions) {
    this.#task = task;
    this.#options = options;
    this.#reservedCpuSeconds = options.reservedCpuSeconds;
    this.#merger = new ShardMerger(task.settings.keep);
    for (const result of task.results) this.#merger.add(result);
    this.#clock = new RunClock(task.elapsedSeconds, task.settings.maxSeconds);
  }

  /** Takes the run to its end, or gives it back when the queue closes. Never rejects. */
  async run(): Promise<void> {
    const ticker = setInterval(() => void this.#tick().catch((error: unknown) => this.#stopWith(this.#asStop(error))), TICK_MS);
    const work = this.#work().catch((error: unknown) => {
      this.#stopWith(this.#asStop(error));
      return null;
    });
    const end = await Promise.race([work, this.#halt]);
    if (this.#isHalted) await this.#comeToRest();
    this.#stage = 'done';
    this.#options.scheduler.forget(this.#task.id);
    clearInterval(ticker);
    this.#emitProgress();
    if (this.#isClosing) await this.#giveBack();
    else await this.#writeEnd(this.#isHalted || end === null ? this.#describeEnd([], null) : end);
    this.#options.emit({ kind: 'changed' });
  }

  cancel(): void {
    this.#stopWith({ kind: 'cancelled' });
  }

  close(): void {
    this.#isClosing = true;
    this.#bringToRest();
    this.#announceHalt();
  }

  progress(): RunProgress {
    return this.#clock.progress(this.#stage, this.#figures());
  }

  /** Each attempt at a shard has its own counters, so one that crashed leaves no trace in the figures. */
  #figures(): RunFigures {
    const counters = [...this.#underWay.keys()];
    const sum = (slot: 'constitutionsSeen' | 'survivors') => counters.reduce((total, buffer) => total + readCounter(buffer, slot), 0);
    return {
      shardsDone: this.#merger.shardCount,
      constitutionsSeen: this.#merger.constitutionCount + sum('constitutionsSeen'),
      survivors: this.#merger.survivorCount + sum('survivors'),
    };
  }

  async #work(): Promise<RunEnd | null> {
    const shards = this.#task.shards ?? (await this.#plan());
    if (shards === null) return null;
    void this.#guessSize(shards.length).catch((error: unknown) => this.#stopWith(this.#asStop(error)));
    this.#clock.startEnumerating(shards.length, this.#figures());
    this.#stage = 'enumerating';
    this.#emitProgress();
    const open = shards.filter(({ index }) => !this.#merger.has(index)).map((shard) => this.#runShard(shard));
    this.#shardsAtRest = Promise.allSettled(open);
    await Promise.all(open);
    if (this.#isHalted) return null;
    this.#stage = 'ranking';
    this.#emitProgress();
    return this.#finish();
  }

  async #plan(): Promise<readonly ShardSpec[] | null> {
    const { compute, store, targetShards } = this.#options;
    const { evidence, settings } = this.#task;
    const planned = await this.#perform('planning', async (signal) => {
      await this.#begin();
      return this.#timed(() => compute.runJob('plan', { evidence, settings, targetShards }, { signal }));
    });
    if (planned === null || this.#isHalted) return null;
    await this.#onDatabase(() => store.savePlan(this.#task, planned.shards));
    return planned.shards;
  }

  /** Nothing waits for it. */
  async #guessSize(shardCount: number): Promise<void> {
    const { compute, scheduler } = this.#options;
    const expectedSeconds = await guessSeconds(compute, this.#task);
    if (this.#stage !== 'done') scheduler.setSize(this.#task.id, runSize(expectedSeconds, shardCount));
  }

  async #runShard(shard: ShardSpec): Promise<void> {
    const { compute, store } = this.#options;
    const { evidence, settings } = this.#task;
    const result = await this.#perform(`shard ${shard.index}`, async (signal) => {
      this.#watchTime();
      this.#watchCount();
      if (this.#stop !== null) return null;
      await this.#begin();
      const counters = createCounters();
      const started = performance.now();
      this.#underWay.set(counters, started);
      try {
        const answer = await compute.runJob(
          'shard',
          {
            evidence,
            settings,
            shard,
            counters,
            deadlineEpochMs: this.#clock.deadlineEpochMs(),
            maxConstitutions: this.#constitutionsLeft(),
          },
          { signal },
        );
        while (this.#writes.size >= MAX_PENDING_WRITES) await Promise.race(this.#writes);
        return answer;
      } catch (error) {
        this.#otherCpuSeconds += (performance.now() - started) / 1000;
        throw error;
      } finally {
        this.#underWay.delete(counters);
      }
    });
    if (result === null) return;
    if (!result.complete) {
      // What a limit cut short counts for this run but is not stored: after a restart the shard is done again.
      this.#merger.add(result);
      // The shards still to come would only find out that there is something left.
      if (result.stoppedBy === 'count') this.#stopWith(countLimitStop(this.#task.settings.maxConstitutions ?? 0));
      return;
    }
    const stored = { ...result, kept: this.#merger.contenders(result.kept) };
    this.#merger.add(result);
    const write = this.#onDatabase(() => store.saveShard(this.#task.id, stored, new Date()));
    const settled = write.catch(() => undefined).finally(() => this.#writes.delete(settled));
    this.#writes.add(settled);
    await write;
  }

  async #finish(): Promise<RunEnd | null> {
    const { evidence, settings } = this.#task;
    const { kept, logSumExp, funnel } = this.#merger.merged();
    const finished = await this.#perform('ranking', async (signal) => {
      await this.#begin();
      return this.#timed(() => this.#options.compute.runJob('finish', { evidence, settings, kept, logSumExp, funnel }, { signal }));
    });
    return finished === null ? null : this.#describeEnd(finished.candidates, finished.noneOfTheseProbability);
  }

  /**
   * Runs a job when it is its turn, again if its thread ended under it.
   * @returns null when the run was stopped first
   */
  async #perform<T>(what: string, job: (signal: AbortSignal) => Promise<T | null>): Promise<T | null> {
    const lane = { teamId: this.#task.teamId, runId: this.#task.id };
    for (let crashes = 0; !this.#isHalted;) {
      const abort = new AbortController();
      try {
        return await this.#options.scheduler.schedule(lane, async () => {
          if (this.#isHalted) return null;
          this.#aborts.add(abort);
          return job(abort.signal);
        });
      } catch (error) {
        if (this.#isHalted || (this.#stop !== null && isCancellation(error))) return null;
        if (error instanceof ComputeBusy) {
          await new Promise((resolve) => setTimeout(resolve, BUSY_PAUSE_MS));
          continue;
        }
        if (!(error instanceof WorkerCrash) && !isCancellation(error)) throw error;
        // A shard that overran the time limit until its thread was ended is simply missing.
        if (abort.signal.aborted) return null;
        crashes += 1;
        this.#options.logger.warn({ runId: this.#task.id, what, crashes, err: error }, 'a compute thread ended under its job');
        if (crashes >= MAX_CRASHES) throw crashedTooOften(what, error.message);
      } finally {
        this.#aborts.delete(abort);
      }
    }
    return null;
  }

  /** First sign of life: the run is no longer waiting for its turn. */
  async #begin(): Promise<void> {
    if (!this.#clock.start()) return;
    await this.#onDatabase(() => this.#options.store.claim(this.#task.id, new Date()));
    this.#options.emit({ kind: 'changed' });
    this.#emitProgress();
  }

  async #timed<T>(job: () => Promise<T>): Promise<T> {
    const started = performance.now();
    try {
      return await job();
    } finally {
      this.#otherCpuSeconds += (performance.now() - started) / 1000;
    }
  }

  /** Cancelled, failed or about to be given back: nothing more of this run is started or waited for. */
  get #isHalted(): boolean {
    return this.#isClosing || (this.#stop !== null && this.#stop.kind !== 'limit');
  }

  #stopWith(stop: Stop): void {
    // The first reason stays, except that a limit does not stand in the way of a cancellation.
    if (this.#isHalted || this.#stage === 'done' || (this.#stop !== null && stop.kind === 'limit')) return;
    this.#stop = stop;
    this.#bringToRest();
    if (stop.kind !== 'limit') this.#announceHalt();
  }

  /** Starts nothing more, asks what is under way to stop, and ends the threads that do not listen. */
  #bringToRest(): void {
    this.#options.scheduler.drop(this.#task.id);
    // At the time limit shards stop by themselves, and then still tell what they have found.
    const isTimeLimit = !this.#isHalted && this.#stop?.kind === 'limit' && this.#stop.code === 'timeLimit';
    if (!isTimeLimit) for (const counters of this.#underWay.keys()) cancelRun(counters);
    const aborts = [...this.#aborts];
    setTimeout(() => aborts.filter((abort) => this.#aborts.has(abort)).forEach((abort) => abort.abort()), this.#options.hardStopMs).unref();
  }

  /** Waits until no shard of this run is under way and nothing is left to be written. */
  async #comeToRest(): Promise<void> {
    await this.#shardsAtRest;
    await Promise.all(this.#writes);
  }

  async #writeEnd(end: RunEnd): Promise<void> {
    const { store } = this.#options;
    try {
      await this.#onDatabase(() => store.end(this.#task, end, new Date()));
    } catch (error) {
      if (this.#isClosing) return;
      const failed: RunEnd = {
        ...end,
        status: 'failed',
        complete: false,
        candidates: [],
        noneOfTheseProbability: null,
        failure: describeFailure(error, this.#task.id, this.#options.logger),
      };
      await this.#onDatabase(() => store.end(this.#task, failed, new Date())).catch((again: unknown) => this.#asStop(again));
    }
  }

  /** The next process goes on from the shards that are done. */
  async #giveBack(): Promise<void> {
    await this.#options.store.release(this.#task.id).catch((error: unknown) => {
      this.#options.logger.warn({ runId: this.#task.id, err: error }, 'a run could not be given back; the next start takes it up as it is');
    });
  }

  #describeEnd(candidates: RunEnd['candidates'], noneOfTheseProbability: number | null): RunEnd {
    const merged = this.#merger.merged();
    return describeEnd({
      merged,
      isPlanned: this.#clock.shardCount !== null,
      stop: this.#stop ?? stopOfShards(merged.stoppedBy, this.#task.settings),
      candidates,
      noneOfTheseProbability,
      otherCpuSeconds: this.#otherCpuSeconds,
    });
  }

  async #tick(): Promise<void> {
    this.#emitProgress();
    if (this.#stage !== 'enumerating') return;
    this.#watchTime();
    this.#watchCount();
    if (this.#stop === null) await this.#watchQuota();
  }

  #watchTime(): void {
    const { maxSeconds } = this.#task.settings;
    if (maxSeconds !== null && this.#clock.isOver()) this.#stopWith(timeLimitStop(maxSeconds));
  }

  /** What a shard that starts now may still build; null = no limit. */
  #constitutionsLeft(): number | null {
    const { maxConstitutions = null } = this.#task.settings;
    return maxConstitutions === null ? null : Math.max(0, maxConstitutions - this.#figures().constitutionsSeen);
  }

  /** A run of exactly so many is complete: only what lies beyond shows that there is more. */
  #watchCount(): void {
    const { maxConstitutions = null } = this.#task.settings;
    if (maxConstitutions !== null && this.#figures().constitutionsSeen > maxConstitutions) this.#stopWith(countLimitStop(maxConstitutions));
  }

  /** Reserves more CPU seconds as they are needed; stops the run when the month has no more. */
  async #watchQuota(): Promise<void> {
    const now = performance.now();
    const underWaySeconds = [...this.#underWay.values()].reduce((sum, started) => sum + (now - started) / 1000, 0);
    const usedSeconds = this.#merger.cpuSeconds + this.#otherCpuSeconds + underWaySeconds;
    if (usedSeconds < this.#reservedCpuSeconds || this.#isExtending) return;
    this.#isExtending = true;
    try {
      this.#reservedCpuSeconds = await this.#onDatabase(() => this.#options.store.extendReservation(this.#task.id, usedSeconds));
    } finally {
      this.#isExtending = false;
    }
    if (usedSeconds >= this.#reservedCpuSeconds) this.#stopWith(QUOTA_STOP);
  }

  #emitProgress(): void {
    this.#options.emit({ kind: 'progress', progress: this.progress() });
  }

  #onDatabase<T>(action: () => Promise<T>): Promise<T> {
    return untilDatabaseAnswers(action, () => this.#isClosing);
  }

  #asStop(error: unknown): Stop {
    return { kind: 'failed', ...describeFailure(error, this.#task.id, this.#options.logger) };
  }
}
