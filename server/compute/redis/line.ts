import type { Job, Queue } from 'bullmq';
import { shardSpacing } from '../share.js';
import type { FinishData, ShardData } from './run-jobs.js';

/** Of BullMQ: 1 is first, and jobs without a priority come before all others. */
const LAST_PRIORITY = 2 ** 21 - 1;
/** Of the line to one priority: it is a day long. */
const SECONDS_PER_PRIORITY = 0.05;

/**
 * Places shards on the line (share.ts), which here are the priorities of their jobs.
 * @param first - place of the first one. @param spacing - seconds from one to the next
 * @returns as many priorities as there are shards; beyond the end of the line, first come, first served
 */
export function shardPriorities(first: number, spacing: number, count: number): number[] {
  return Array.from({ length: count }, (_, position) =>
    Math.min(LAST_PRIORITY, Math.round(first + (position * spacing) / SECONDS_PER_PRIORITY)),
  );
}

/** Where a new run begins: beside the shard that is next. In a queue that never empties everybody moves up in time. */
export async function frontOfLine(queue: Queue): Promise<number> {
  const [next] = await queue.getPrioritized(0, 0);
  const front = next?.priority ?? 1;
  if (front < LAST_PRIORITY / 2) return front;
  await moveTo(await queue.getPrioritized(0, -1), ({ priority }) => priority - front + 1);
  return 1;
}

/** Moves the waiting shards of a team's runs closer together or further apart, now that one has been added or has ended. */
export async function respaceTeam(queue: Queue, teamId: string): Promise<void> {
  const runs = (await queue.getWaitingChildren()).map(({ data }) => data as FinishData).filter((run) => run.teamId === teamId);
  if (runs.length === 0) return;
  const weights = runs.map(({ size }) => size.weight);
  const waiting = (await queue.getPrioritized(0, -1)) as Job<ShardData>[];
  for (const { runId, size } of runs) {
    const shards = waiting.filter(({ data }) => data.runId === runId);
    const priorities = shardPriorities(shards[0]?.priority ?? 1, shardSpacing(size, weights), shards.length);
    await moveTo(shards, ({ priority }, position) => priorities[position] ?? priority);
  }
}

async function moveTo(jobs: readonly Job[], place: (job: Job, position: number) => number): Promise<void> {
  await Promise.all(
    jobs.map(async (job, position) => {
      const priority = place(job, position);
      // A shard that a worker has taken meanwhile has no place any more.
      if (priority !== job.priority) await job.changePriority({ priority }).catch(() => undefined);
    }),
  );
}
