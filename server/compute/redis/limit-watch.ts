import { readReservation } from '../../quotas/reservations.js';
import type { RunSettings } from '../../../shared/jobs/contract.js';
import { countLimitStop, QUOTA_STOP, type RunFailure, timeLimitStop } from '../run-stop.js';
import type { RunStore } from '../run-store.js';
import type { RunMonitor } from './run-monitor.js';

/** Watches time, count and quota of one run, and notes in its row when one of them is used up. */
export class LimitWatch {
  readonly #runId: string;
  readonly #limits: Pick<RunSettings, 'maxSeconds' | 'maxConstitutions'>;
  readonly #store: RunStore;
  #reservedSeconds: number | null = null;
  #isLooking = false;
  #isStopped = false;

  constructor(runId: string, limits: Pick<RunSettings, 'maxSeconds' | 'maxConstitutions'>, store: RunStore) {
    this.#runId = runId;
    this.#limits = limits;
    this.#store = store;
  }

  /** @returns true the one time that the run has reached a limit */
  async look(monitor: RunMonitor): Promise<boolean> {
    if (this.#isStopped || this.#isLooking || !monitor.isEnumerating) return false;
    this.#isLooking = true;
    try {
      const stop = this.#limitReached(monitor) ?? ((await this.#isQuotaUsedUp(monitor.usedSeconds())) ? QUOTA_STOP : null);
      if (stop === null) return false;
      await this.#store.noteStop(this.#runId, stop);
      this.#isStopped = true;
      return true;
    } finally {
      this.#isLooking = false;
    }
  }

  #limitReached(monitor: RunMonitor): RunFailure | null {
    const { maxSeconds, maxConstitutions = null } = this.#limits;
    if (maxSeconds !== null && monitor.elapsedSeconds() >= maxSeconds) return timeLimitStop(maxSeconds);
    // A run of exactly so many is complete: only what lies beyond shows that there is more.
    return maxConstitutions !== null && monitor.constitutionsSeen() > maxConstitutions ? countLimitStop(maxConstitutions) : null;
  }

  /** Reserves more CPU seconds as they are needed. */
  async #isQuotaUsedUp(usedSeconds: number): Promise<boolean> {
    this.#reservedSeconds ??= await readReservation(this.#runId);
    if (usedSeconds < this.#reservedSeconds) return false;
    this.#reservedSeconds = await this.#store.extendReservation(this.#runId, usedSeconds);
    return usedSeconds >= this.#reservedSeconds;
  }
}
