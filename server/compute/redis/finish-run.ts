import type { RunEnd } from '../run-store.js';
import { Run } from '../../models/run.js';
import { ShardMerger } from '../merge-shards.js';
import { describeEnd } from '../run-end.js';
import { MAX_CRASHES } from '../run-failure.js';
import { readStop, type Stop, stopOfShards, timeLimitStop } from '../run-stop.js';
import type { RunStore } from '../run-store.js';
import { readRunInput } from '../run-task.js';
import { attempt, withSignal } from './attempt.js';
import { respaceTeam } from './line.js';
import type { FinishJob } from './run-jobs.js';
import { onDatabase, type RunJobsContext } from './run-jobs-context.js';

/** Puts together what the shards of a run have found, ranks it and ends the run. */
export async function finishRun(
  context: RunJobsContext,
  job: FinishJob,
  token: string | undefined,
  signal: AbortSignal | undefined,
): Promise<null> {
  const { compute, queue, store } = context;
  const { runId } = job.data;
  const run = await onDatabase(context, () => Run.findByPk(runId));
  if (run === null || (run.status !== 'queued' && run.status !== 'running')) return null;
  const gathered = await onDatabase(context, () => gatherShards(run, store));
  const stop = readStop(run) ?? stopOfShards(gathered.merged.stoppedBy, run.settings) ?? (await findReason(job, run, gathered));
  const end = async (given: Stop | null, finished?: Pick<RunEnd, 'candidates' | 'noneOfTheseProbability'>, seconds = 0) => {
    const description = describeEnd({
      merged: gathered.merged,
      isPlanned: true,
      stop: given,
      candidates: finished?.candidates ?? [],
      noneOfTheseProbability: finished?.noneOfTheseProbability ?? null,
      otherCpuSeconds: run.cpuSeconds + seconds,
    });
    await onDatabase(context, () => store.end(run, description, new Date()));
    await respaceTeam(queue, run.teamId);
  };
  if (stop !== null && stop.kind !== 'limit') {
    await end(stop);
    return null;
  }
  return await attempt(context, {
    job,
    token,
    what: 'ranking',
    giveUp: (failure) => end({ kind: 'failed', ...failure }),
    work: async () => {
      const { kept, logSumExp, funnel } = gathered.merged;
      const started = performance.now();
      const finished = await compute.runJob('finish', { ...readRunInput(run), kept, logSumExp, funnel }, withSignal(signal));
      await end(stop, finished, (performance.now() - started) / 1000);
      return null;
    },
  });
}

interface GatheredShards {
  readonly merged: ReturnType<ShardMerger['merged']>;
  readonly isWhole: boolean;
}

/** Reads the shards a few at a time and puts them together in the order of their indexes. */
export async function gatherShards(run: Run, store: RunStore): Promise<GatheredShards> {
  const merger = new ShardMerger(run.settings.keep);
  for await (const shard of store.readShards(run.id)) if (shard !== null && shard.result !== null) merger.add(shard.result);
  const merged = merger.merged();
  return { merged, isWhole: merged.complete && merger.shardCount === run.shardCount };
}

/** Why shards are missing although nobody has said so. */
async function findReason(job: FinishJob, run: Run, { isWhole }: GatheredShards): Promise<Stop | null> {
  if (isWhole) return null;
  const { maxSeconds } = run.settings;
  if (maxSeconds !== null && run.startedAt !== null && Date.now() >= run.startedAt.getTime() + maxSeconds * 1000)
    return timeLimitStop(maxSeconds);
  const failures = Object.values(await job.getIgnoredChildrenFailures());
  return {
    kind: 'failed',
    code: 'workerCrashed',
    message: `A worker process ended ${MAX_CRASHES} times at the same place${failures[0] === undefined ? '' : ` (${failures[0]})`}. Narrow the evidence, or ask whoever runs the workers to look into their logs.`,
  };
}
