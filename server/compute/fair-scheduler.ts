import { type RunSize, runSize, shardSpacing } from './share.js';
import { TARGET_SHARDS } from './shard-limits.js';

/** Who asks for a slot. */
export interface Lane {
  readonly teamId: string;
  readonly runId: string;
}

const UNKNOWN_SIZE = runSize(null, TARGET_SHARDS);

interface WaitingTask {
  readonly start: () => Promise<void>;
  readonly skip: () => void;
}
/** A run with something waiting. */
interface RunInLine {
  readonly lane: Lane;
  readonly tasks: WaitingTask[];
  /** Where its next task stands. */
  position: number;
}

/**
 * Shares a fixed number of slots among runs as `share.ts` says: teams get the same time, and a small run does not
 * wait for a large one. No more tasks are started than there are slots, so a run that has just been queued waits for one shard
 * at most, however many shards the others still have.
 */
export class FairScheduler {
  readonly #slots: number;
  #busy = 0;
  /** Without empty ones. Of those at the same position the first is next; whoever was served goes to the back. */
  #line: RunInLine[] = [];
  readonly #sizes = new Map<string, RunSize>();
  /** Where the task stood that was started last: new runs begin there. */
  #front = 0;

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

  /** Says how large a run is; until then it counts as one of unknown size. */
  setSize(runId: string, size: RunSize): void {
    this.#sizes.set(runId, size);
  }

  /** Skips whatever a run still has waiting. */
  drop(runId: string): void {
    for (const { lane, tasks } of this.#line) if (lane.runId === runId) tasks.splice(0).forEach(({ skip }) => skip());
    this.#removeEmpty();
  }

  /** Forgets the size of a run that has ended. */
  forget(runId: string): void {
    this.#sizes.delete(runId);
  }

  #tasksOf(lane: Lane): WaitingTask[] {
    let run = this.#line.find((known) => known.lane.runId === lane.runId);
    // New ones go in front: whoever has had nothing yet is next.
    if (run === undefined) this.#line.unshift((run = { lane, tasks: [], position: this.#front }));
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
    const [first, ...others] = this.#line;
    if (first === undefined) return undefined;
    const next = others.reduce((best, run) => (run.position < best.position ? run : best), first);
    const task = next.tasks.shift();
    this.#front = next.position;
    const team = this.#line.filter(({ lane }) => lane.teamId === next.lane.teamId).map((run) => this.#sizeOf(run).weight);
    next.position += shardSpacing(this.#sizeOf(next), team);
    this.#line = [...this.#line.filter((run) => run !== next), next];
    this.#removeEmpty();
    return task;
  }

  #sizeOf({ lane }: RunInLine): RunSize {
    return this.#sizes.get(lane.runId) ?? UNKNOWN_SIZE;
  }

  #removeEmpty(): void {
    this.#line = this.#line.filter(({ tasks }) => tasks.length > 0);
  }
}
