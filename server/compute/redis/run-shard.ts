import { countSurvivors } from '../merge-shards.js';
import { countLimitStop, type RunFailure, timeLimitStop } from '../run-stop.js';
import type { RunSettings, ShardResult } from '../../../shared/jobs/contract.js';
import { attempt, withSignal } from './attempt.js';
import { dropWaitingShards, onDatabase, type RunJobsContext } from './run-jobs-context.js';
import { type FinishData, finishId, type ShardFigures, type ShardJob } from './run-jobs.js';

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
      const maxConstitutions = await constitutionsLeft(context, runId, settings);
      const input = { evidence, settings, shard: stored.spec, counters, deadlineEpochMs, maxConstitutions };
      const result = await compute.runJob('shard', input, withSignal(signal));
      if (!result.complete && underWay.state === 'abandoned') return null;
      // A result that a limit cut short is kept as well: a run that was stopped is not gone on with.
      await onDatabase(context, () => store.saveShard(runId, result, new Date()));
      if (limit !== null && !result.complete && isOver()) await stopRun(timeLimitStop(limit.seconds));
      // The shards still to come would only find out that there is something left.
      if (result.stoppedBy === 'count') await stopRun(countLimitStop(settings.maxConstitutions ?? 0));
      return figuresOf(result);
    },
  });
}

/** What a shard that starts now may still build, by what the others have reported; null = no limit. */
async function constitutionsLeft(
  { queue }: RunJobsContext,
  runId: string,
  { maxConstitutions = null }: RunSettings,
): Promise<number | null> {
  if (maxConstitutions === null) return null;
  const finish = await queue.getJob(finishId(runId));
  if (finish === undefined) return maxConstitutions;
  const done = Object.values(await finish.getChildrenValues<ShardFigures | null>());
  const { constitutionCount } = (finish.data as FinishData).doneBefore;
  return Math.max(0, maxConstitutions - done.reduce((sum, shard) => sum + (shard?.constitutionCount ?? 0), constitutionCount));
}

const figuresOf = ({ constitutionCount, funnel, cpuSeconds }: ShardResult): ShardFigures => ({
  constitutionCount,
  survivorCount: countSurvivors(funnel, constitutionCount),
  cpuSeconds,
});
