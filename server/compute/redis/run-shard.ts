import { countSurvivors } from '../merge-shards.js';
import { type RunFailure, timeLimitStop } from '../run-stop.js';
import type { ShardResult } from '../../../shared/jobs/contract.js';
import { attempt, withSignal } from './attempt.js';
import { dropWaitingShards, onDatabase, type RunJobsContext } from './run-jobs-context.js';
import type { ShardFigures, ShardJob } from './run-jobs.js';

/**
 * Works on one shard and keeps its result, unless another worker was faster.
 * @returns null when the run is to stop, or has ended
 */
export async function runShard(
  context: RunJobsContext,
  job: ShardJob,
  token: string | undefined,
  signal: AbortSignal | undefined,
): Promise<ShardFigures | null> {
  const { compute, inputs, queue, store } = context;
  const { runId, index } = job.data;
  if ((await onDatabase(context, () => store.findStops([runId]))).has(runId)) return null;
  const stored = await onDatabase(context, () => store.readShard(runId, index));
  // Without its row the run has ended since.
  if (stored === null) return null;
  if (stored.result !== null) return figuresOf(stored.result);
  const { evidence, settings, startedAt } = await onDatabase(context, () => inputs.of(runId));
  const { maxSeconds } = settings;
  const limit =
    maxSeconds === null || startedAt === null ? null : { seconds: maxSeconds, epochMs: startedAt.getTime() + maxSeconds * 1000 };
  const stopRun = async (failure: RunFailure) => {
    await onDatabase(context, () => store.noteStop(runId, failure));
    await dropWaitingShards(queue, runId);
  };
  const isOver = () => limit !== null && Date.now() >= limit.epochMs;
  if (limit !== null && isOver()) {
    await stopRun(timeLimitStop(limit.seconds));
    return null;
  }
  return await attempt(context, {
    job,
    token,
    what: `shard ${index}`,
    limit,
    giveUp: stopRun,
    work: async (underWay) => {
      const { counters } = underWay;
      const deadlineEpochMs = limit?.epochMs ?? null;
      const result = await compute.runJob(
        'shard',
        { evidence, settings, shard: stored.spec, counters, deadlineEpochMs },
        withSignal(signal),
      );
      if (!result.complete && underWay.state === 'abandoned') return null;
      // A result that a limit cut short is kept as well: a run that was stopped is not gone on with.
      await onDatabase(context, () => store.saveShard(runId, result, new Date()));
      if (limit !== null && !result.complete && isOver()) await stopRun(timeLimitStop(limit.seconds));
      return figuresOf(result);
    },
  });
}

const figuresOf = ({ constitutionCount, funnel, cpuSeconds }: ShardResult): ShardFigures => ({
  constitutionCount,
  survivorCount: countSurvivors(funnel, constitutionCount),
  cpuSeconds,
});
