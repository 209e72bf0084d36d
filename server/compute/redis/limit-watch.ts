import { readReservation } from '../../quotas/reservations.js';
import { QUOTA_STOP, timeLimitStop } from '../run-stop.js';
import type { RunStore } from '../run-store.js';
import type { RunMonitor } from './run-monitor.js';

/** Watches the time and the quota of one run, and notes in its row when one of them is used up. */
export class LimitWatch {
  readonly #runId: string;
  readonly #maxSeconds: number | null;
  readonly #store: RunStore;
  #reservedSeconds: number | null = null;
  #isLooking = false;
  #isStopped = false;

  constructor(runId: string, maxSeconds: number | null, store: RunStore) {
    this.#runId = runId;
    this.#maxSeconds = maxSeconds;
    this.#store = store;
  }

  /** @returns true the one time that the run has reached a limit */
  async look(monitor: RunMonitor): Promise<boolean> {
    if (this.#isStopped || this.#isLooking || !monitor.isEnumerating) return false;
    this.#isLooking = true;
    try {
      const isTimeOver = this.#maxSeconds !== null && monitor.elapsedSeconds() >= this.#maxSeconds;
      if (!isTimeOver && !(await this.#isQuotaUsedUp(monitor.usedSeconds()))) return false;
      await this.#store.noteStop(this.#runId, isTimeOver ? timeLimitStop(this.#maxSeconds) : QUOTA_STOP);
      this.#isStopped = true;
      return true;
    } finally {
      this.#isLooking = false;
    }
  }

  /** Reserves more CPU seconds as they are needed. */
  async #isQuotaUsedUp(usedSeconds: number): Promise<boolean> {
    this.#reservedSeconds ??= await readReservation(this.#runId);
    if (usedSeconds < this.#reservedSeconds) return false;
    this.#reservedSeconds = await this.#store.extendReservation(this.#runId, usedSeconds);
    return usedSeconds >= this.#reservedSeconds;
  }
}
