import type { Job, Queue } from 'bullmq';
import { shardSpacing } from '../share.js';
import type { FinishData, ShardData } from './run-jobs.js';

/** Of BullMQ: 1 is first, and jobs without a priority come before all others. */
const LAST_PRIORITY = 2 ** 21 - 1;
/** Priorities to one spacing, so that fractions of it can be told apart. */
const STEPS = 8;

/**
 * Places shards on the line (share.ts), which here are the priorities of their jobs.
 * @param first - place of the first one
 * @returns as many priorities as there are shards. A line that never empties ends at the last one: first come, first served.
 */
export function shardPriorities(first: number, spacing: number, count: number): number[] {
  return Array.from({ length: count }, (_, position) => Math.min(LAST_PRIORITY, Math.round(first + position * spacing * STEPS)));
}

/** Where a new run begins: beside the shard that is next. */
export async function frontOfLine(queue: Queue): Promise<number> {
  const [next] = await queue.getPrioritized(0, 0);
  return next?.priority ?? 1;
}

/** Moves the waiting shards of a team's runs closer together or further apart, now that one has been added or has ended. */
export async function respaceTeam(queue: Queue, teamId: string): Promise<void> {
  const runs = (await queue.getWaitingChildren()).map(({ data }) => data as FinishData).filter((run) => run.teamId === teamId);
  if (runs.length === 0) return;
  const weights = runs.map(({ weight }) => weight);
  const waiting = (await queue.getPrioritized(0, -1)) as Job<ShardData>[];
  for (const { runId, weight } of runs) {
    const shards = waiting.filter(({ data }) => data.runId === runId);
    const priorities = shardPriorities(shards[0]?.priority ?? 1, shardSpacing(weight, weights), shards.length);
    await Promise.all(
      shards.map(async (shard, position) => {
        const priority = priorities[position] ?? shard.priority;
        // A shard that a worker has taken meanwhile has no place any more.
        if (priority !== shard.priority) await shard.changePriority({ priority }).catch(() => undefined);
      }),
    );
  }
}
