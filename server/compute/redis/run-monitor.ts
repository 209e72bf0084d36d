import type { RunProgress } from '../../../shared/jobs/contract.js';
import { RunClock, type RunFigures } from '../run-clock.js';
import type { FinishData, ShardFigures, ShardProgress } from './run-jobs.js';

const NOTHING_YET: ShardProgress = { constitutionsSeen: 0, survivors: 0, seconds: 0 };

/** What is known of a run that workers somewhere have under way: the sum of what its jobs have reported. */
export class RunMonitor {
  readonly settled: Promise<void>;
  #announceEnd!: () => void;
  readonly #clock: RunClock;
  #stage: RunProgress['stage'] = 'planning';
  #doneBefore: FinishData['doneBefore'] = { shardCount: 0, constitutionCount: 0, survivorCount: 0, cpuSeconds: 0 };
  /** A shard counts once, however often it is told that it is done. */
  readonly #done = new Map<number, ShardFigures>();
  readonly #underWay = new Map<number, ShardProgress>();

  /** @param startedAt - of a run that is under way already. @param maxSeconds - its time limit */
  constructor(startedAt: Date | null, maxSeconds: number | null) {
    this.settled = new Promise((resolve) => (this.#announceEnd = resolve));
    this.#clock = new RunClock(startedAt === null ? 0 : Math.max(0, (Date.now() - startedAt.getTime()) / 1000), maxSeconds);
    if (startedAt !== null) this.#clock.start();
  }

  get shardsUnderWay(): number {
    return this.#underWay.size;
  }
  get isEnumerating(): boolean {
    return this.#stage === 'enumerating';
  }
  elapsedSeconds(): number {
    return this.#clock.elapsedSeconds();
  }
  /** Constitutions that the shards have built, those under way included. */
  constitutionsSeen(): number {
    return this.#figures().constitutionsSeen;
  }
  /** CPU seconds of the shards, those under way included. */
  usedSeconds(): number {
    const done = [...this.#done.values()].reduce((sum, { cpuSeconds }) => sum + cpuSeconds, this.#doneBefore.cpuSeconds);
    return [...this.#underWay.values()].reduce((sum, { seconds }) => sum + seconds, done);
  }

  /** The plan is being made. */
  begin(): void {
    this.#clock.start();
  }

  /** @param done - shards of this flow that are done by now, by their index */
  enumerate({ shardCount, doneBefore }: FinishData, done: ReadonlyMap<number, ShardFigures> = new Map()): void {
    if (this.#stage !== 'planning') return;
    this.#clock.start();
    this.#doneBefore = doneBefore;
    for (const [index, figures] of done) this.#done.set(index, figures);
    this.#stage = 'enumerating';
    this.#clock.startEnumerating(shardCount, this.#figures());
  }

  shardActive(index: number): void {
    if (!this.#underWay.has(index)) this.#underWay.set(index, NOTHING_YET);
  }
  shardSeen(index: number, progress: ShardProgress): void {
    if (!this.#done.has(index)) this.#underWay.set(index, progress);
  }
  /** Back in the queue, out of it, or failed. */
  shardLeft(index: number): void {
    this.#underWay.delete(index);
  }
  /** @param figures - null: it was left out, because the run is to stop */
  shardDone(index: number, figures: ShardFigures | null): void {
    this.#underWay.delete(index);
    if (figures !== null) this.#done.set(index, figures);
  }

  rank(): void {
    this.#stage = 'ranking';
  }

  end(): void {
    this.#stage = 'done';
    this.#announceEnd();
  }

  progress(): RunProgress {
    return this.#clock.progress(this.#stage, this.#figures());
  }

  #figures(): RunFigures {
    let { shardCount: shardsDone, constitutionCount: constitutionsSeen, survivorCount: survivors } = this.#doneBefore;
    for (const done of this.#done.values()) {
      shardsDone += 1;
      constitutionsSeen += done.constitutionCount;
      survivors += done.survivorCount;
    }
    for (const seen of this.#underWay.values()) {
      constitutionsSeen += seen.constitutionsSeen;
      survivors += seen.survivors;
    }
    return { shardsDone, constitutionsSeen, survivors };
  }
}
