import type { RunProgress } from '../../shared/jobs/contract.js';

/** What a run has done so far. */
export interface RunFigures {
  readonly shardsDone: number;
  readonly constitutionsSeen: number;
  readonly survivors: number;
}

/** Time of a run: how long it has been under way, when it must stop, how long it may still take. */
export class RunClock {
  readonly #elapsedBefore: number;
  readonly #maxSeconds: number | null;
  #startedAt: number | null = null;
  /** Where this process began to enumerate: rates and the time left count from there. */
  #enumerating: { readonly at: number; readonly shards: number; readonly seen: number } | null = null;
  #shardCount: number | null = null;

  /**
   * @param elapsedBefore - seconds the run was under way in an earlier process; the time between does not count
   * @param maxSeconds - limit of the whole run; null = none
   */
  constructor(elapsedBefore: number, maxSeconds: number | null) {
    this.#elapsedBefore = elapsedBefore;
    this.#maxSeconds = maxSeconds;
  }

  /** Number of shards, once planned. */
  get shardCount(): number | null {
    return this.#shardCount;
  }

  /** @returns false when it was running already */
  start(): boolean {
    if (this.#startedAt !== null) return false;
    this.#startedAt = performance.now();
    return true;
  }

  /** @param done - in an earlier process */
  startEnumerating(shardCount: number, done: RunFigures): void {
    this.#shardCount = shardCount;
    this.#enumerating = { at: performance.now(), shards: done.shardsDone, seen: done.constitutionsSeen };
  }

  elapsedSeconds(): number {
    return this.#elapsedBefore + (this.#startedAt === null ? 0 : (performance.now() - this.#startedAt) / 1000);
  }

  isOver(): boolean {
    return this.#maxSeconds !== null && this.elapsedSeconds() >= this.#maxSeconds;
  }

  deadlineEpochMs(): number | null {
    return this.#maxSeconds === null ? null : Date.now() + (this.#maxSeconds - this.elapsedSeconds()) * 1000;
  }

  progress(stage: RunProgress['stage'], figures: RunFigures): RunProgress {
    const { shardsDone, constitutionsSeen, survivors } = figures;
    const since = stage === 'enumerating' ? this.#enumerating : null;
    const seconds = since === null ? 0 : (performance.now() - since.at) / 1000;
    return {
      stage,
      shardsDone,
      shardCount: this.#shardCount ?? 0,
      constitutionsSeen,
      survivors,
      ratePerSecond: since === null || seconds === 0 ? 0 : (constitutionsSeen - since.seen) / seconds,
      elapsedSeconds: this.elapsedSeconds(),
      secondsLeft: since === null ? null : this.#secondsLeft(shardsDone - since.shards, shardsDone, seconds),
    };
  }

  /** By the pace of the shards done in this process, within the time limit; null before the first one. */
  #secondsLeft(doneHere: number, done: number, seconds: number): number | null {
    const byPace = doneHere === 0 ? null : (seconds * ((this.#shardCount ?? 0) - done)) / doneHere;
    const byLimit = this.#maxSeconds === null ? null : Math.max(0, this.#maxSeconds - this.elapsedSeconds());
    if (byPace === null || byLimit === null) return byPace;
    return Math.min(byPace, byLimit);
  }
}
