/** A run as the scheduler sees it: a source of tasks that belongs to a team. */
export interface Lane {
  readonly runId: string;
  readonly teamId: string;
  /** Takes the next task, or null when nothing can be started at present. A task never rejects. */
  take(): (() => Promise<void>) | null;
}

/**
 * Shares a fixed number of slots among runs: teams take turns, and inside a team its runs take turns. No more
 * tasks are started than there are slots, so a run that has just been queued waits for one shard at most, however
 * many shards the others still have.
 */
export class FairScheduler {
  readonly #slots: number;
  #busy = 0;
  /** Teams in turn order, each with its runs in turn order; whoever was served goes to the back. */
  #teams: { readonly teamId: string; lanes: Lane[] }[] = [];

  constructor(slots: number) {
    this.#slots = slots;
  }

  add(lane: Lane): void {
    const team = this.#teams.find(({ teamId }) => teamId === lane.teamId);
    // In front: whoever has had nothing yet is next.
    if (team) team.lanes.unshift(lane);
    else this.#teams.unshift({ teamId: lane.teamId, lanes: [lane] });
    this.wake();
  }

  remove(runId: string): void {
    for (const team of this.#teams) team.lanes = team.lanes.filter((lane) => lane.runId !== runId);
    this.#teams = this.#teams.filter(({ lanes }) => lanes.length > 0);
  }

  /** Fills free slots. To be called whenever a lane may have a new task. */
  wake(): void {
    while (this.#busy < this.#slots) {
      const task = this.#takeNext();
      if (task === null) return;
      this.#busy += 1;
      void task().finally(() => {
        this.#busy -= 1;
        this.wake();
      });
    }
  }

  #takeNext(): (() => Promise<void>) | null {
    for (const team of this.#teams) {
      for (const lane of team.lanes) {
        const task = lane.take();
        if (task === null) continue;
        team.lanes = [...team.lanes.filter((other) => other !== lane), lane];
        this.#teams = [...this.#teams.filter((other) => other !== team), team];
        return task;
      }
    }
    return null;
  }
}
