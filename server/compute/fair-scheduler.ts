/** Who asks for a slot. */
export interface Lane {
  readonly teamId: string;
  readonly runId: string;
}

interface WaitingTask {
  readonly start: () => Promise<void>;
  readonly skip: () => void;
}
interface RunQueueOfTasks {
  readonly runId: string;
  readonly tasks: WaitingTask[];
}

/**
 * Shares a fixed number of slots among runs: teams take turns, and inside a team its runs take turns. No more
 * tasks are started than there are slots, so a run that has just been queued waits for one shard at most, however
 * many shards the others still have.
 */
export class FairScheduler {
  readonly #slots: number;
  #busy = 0;
  /** In turn order, without empty queues; whoever was served goes to the back. */
  #teams: { readonly teamId: string; runs: RunQueueOfTasks[] }[] = [];

  constructor(slots: number) {
    this.#slots = slots;
  }

  /** Runs the task when it is its turn. Resolves with null when `drop` came first; the task was then never started. */
  schedule<T>(lane: Lane, task: () => Promise<T>): Promise<T | null> {
    return new Promise<T | null>((resolve, reject) => {
      this.#tasksOf(lane).push({
        start: () => task().then(resolve, reject),
        skip: () => resolve(null),
      });
      this.#fillSlots();
    });
  }

  /** Skips whatever a run still has waiting. */
  drop(runId: string): void {
    for (const team of this.#teams) {
      for (const run of team.runs) if (run.runId === runId) run.tasks.splice(0).forEach(({ skip }) => skip());
    }
    this.#removeEmpty();
  }

  #tasksOf({ teamId, runId }: Lane): WaitingTask[] {
    // New ones go in front: whoever has had nothing yet is next.
    let team = this.#teams.find((known) => known.teamId === teamId);
    if (team === undefined) this.#teams.unshift((team = { teamId, runs: [] }));
    let run = team.runs.find((known) => known.runId === runId);
    if (run === undefined) team.runs.unshift((run = { runId, tasks: [] }));
    return run.tasks;
  }

  #fillSlots(): void {
    while (this.#busy < this.#slots) {
      const task = this.#takeNext();
      if (task === undefined) return;
      this.#busy += 1;
      void task.start().finally(() => {
        this.#busy -= 1;
        this.#fillSlots();
      });
    }
  }

  #takeNext(): WaitingTask | undefined {
    const team = this.#teams.shift();
    const run = team?.runs.shift();
    const task = run?.tasks.shift();
    if (team === undefined || run === undefined) return undefined;
    team.runs.push(run);
    this.#teams.push(team);
    this.#removeEmpty();
    return task;
  }

  #removeEmpty(): void {
    for (const team of this.#teams) team.runs = team.runs.filter(({ tasks }) => tasks.length > 0);
    this.#teams = this.#teams.filter(({ runs }) => runs.length > 0);
  }
}
