import type { Logger } from 'pino';
import { cancelRun, createCounters, readCounter } from '../../../shared/jobs/counters.js';
import { timeLimitStop } from '../run-stop.js';
import type { RunStore } from '../run-store.js';
import type { QueueTiming, RunJob, ShardJob } from './run-jobs.js';

/** A job that a thread of this process works on. */
export interface JobUnderWay {
  readonly job: RunJob;
  readonly counters: SharedArrayBuffer;
  /** `stopped`: the run is to stop, what was found counts. `abandoned`: the job goes, or went, to another worker. */
  state: 'working' | 'stopped' | 'abandoned';
}

export interface JobsUnderWayOptions {
  readonly store: RunStore;
  readonly logger: Logger;
  readonly timing: QueueTiming;
  readonly hardStopMs: number;
  /** Ends the thread of a job. */
  readonly endThread: (jobId: string) => void;
}

interface Entry extends JobUnderWay {
  readonly startedMs: number;
  readonly limit: { readonly epochMs: number; readonly seconds: number } | null;
}

/**
 * Watches over the jobs of this process: tells the queue what they have seen, and tells them when their run is to stop.
 * That stands in the row of the run, where every process can read it.
 */
export class JobsUnderWay {
  readonly #options: JobsUnderWayOptions;
  readonly #jobs = new Set<Entry>();
  #timers: readonly NodeJS.Timeout[] = [];
  #isLooking = false;
  #isClosing = false;

  constructor(options: JobsUnderWayOptions) {
    this.#options = options;
  }

  /** @param limit - when the run is over, and after how many seconds that is; null = no limit */
  add(job: RunJob, limit: Entry['limit'] = null): JobUnderWay {
    const entry: Entry = { job, counters: createCounters(), state: 'working', startedMs: performance.now(), limit };
    this.#jobs.add(entry);
    if (this.#timers.length === 0) {
      const { lookMs, progressMs } = this.#options.timing;
      this.#timers = [setInterval(() => void this.#look(), lookMs), setInterval(() => this.#report(), progressMs)];
    }
    // BullMQ may have fetched it just before the worker was told to close.
    if (this.#isClosing) this.#bringToRest(entry, 'abandoned');
    return entry;
  }

  remove(job: JobUnderWay): void {
    this.#jobs.delete(job as Entry);
    if (this.#jobs.size > 0) return;
    for (const timer of this.#timers) clearInterval(timer);
    this.#timers = [];
  }

  /** Somebody else will do these jobs. */
  abandon(jobIds: readonly string[]): void {
    for (const entry of this.#jobs) if (jobIds.includes(entry.job.id ?? '')) this.#bringToRest(entry, 'abandoned');
  }

  /** Gives up all jobs, and those that still come. */
  close(): void {
    this.#isClosing = true;
    for (const entry of this.#jobs) this.#bringToRest(entry, 'abandoned');
  }

  async #look(): Promise<void> {
    if (this.#isLooking) return;
    this.#isLooking = true;
    const { store, logger } = this.#options;
    try {
      for (const { job, limit } of this.#jobs) {
        if (limit !== null && Date.now() > limit.epochMs) await store.noteStop(job.data.runId, timeLimitStop(limit.seconds));
      }
      const stops = await store.findStops([...new Set([...this.#jobs].map(({ job }) => job.data.runId))]);
      for (const entry of this.#jobs) {
        const stop = stops.get(entry.job.data.runId);
        if (stop === undefined) continue;
        // At the time limit shards stop by themselves, and then still tell what they have found.
        const stopsByItself = stop !== 'ended' && stop.kind === 'limit' && stop.code === 'timeLimit';
        this.#bringToRest(entry, 'stopped', stopsByItself);
      }
    } catch (error) {
      logger.warn({ err: error }, 'the database did not say which runs are to stop; it is asked again');
    } finally {
      this.#isLooking = false;
    }
  }

  #bringToRest(entry: Entry, state: 'stopped' | 'abandoned', stopsByItself = false): void {
    if (entry.state !== 'working') return;
    entry.state = state;
    if (!stopsByItself) cancelRun(entry.counters);
    const { hardStopMs, endThread } = this.#options;
    setTimeout(() => this.#jobs.has(entry) && endThread(entry.job.id ?? ''), hardStopMs).unref();
  }

  #report(): void {
    for (const { job, counters, startedMs, state } of this.#jobs) {
      if (job.name !== 'shard' || state === 'abandoned') continue;
      const progress = {
        constitutionsSeen: readCounter(counters, 'constitutionsSeen'),
        survivors: readCounter(counters, 'survivors'),
        seconds: (performance.now() - startedMs) / 1000,
      };
      // A figure that does not arrive is followed by the next one.
      (job as ShardJob).updateProgress(progress).catch((error: unknown) => {
        this.#options.logger.debug({ err: error, jobId: job.id }, 'progress was not reported');
      });
    }
  }
}
