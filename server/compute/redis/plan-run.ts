import { Run } from '../../models/run.js';
import { describeEnd, endWithoutResult } from '../run-end.js';
import { ShardMerger } from '../merge-shards.js';
import { guessSeconds } from '../run-size.js';
import { readStop, type RunFailure } from '../run-stop.js';
import { CannotResume, readRunTask, type RunTask } from '../run-task.js';
import { runSize, shardSpacing } from '../share.js';
import { attempt, withSignal } from './attempt.js';
import { frontOfLine, respaceTeam, shardPriorities } from './line.js';
import { type FinishData, finishId, jobOptions, type PlanJob, RUN_QUEUE, shardId } from './run-jobs.js';
import { onDatabase, type RunJobsContext } from './run-jobs-context.js';

/**
 * Cuts a run into shards, or takes the plan of an earlier process, and adds the flow of those that are still to be done.
 * @returns what the flow is about; null when the run has ended
 */
export async function planRun(
  context: RunJobsContext,
  job: PlanJob,
  token: string | undefined,
  signal: AbortSignal | undefined,
): Promise<FinishData | null> {
  const { store } = context;
  const { runId } = job.data;
  const giveUp = async ({ code, message }: RunFailure, status: 'failed' | 'interrupted' = 'failed') => {
    const run = await Run.findByPk(runId);
    if (run === null) return;
    const cpuSeconds = run.cpuSeconds + (await store.sumCpuSeconds(runId));
    await onDatabase(context, () => store.end(run, endWithoutResult(status, { code, message }, cpuSeconds), new Date()));
  };
  return await attempt(context, {
    job,
    token,
    what: 'planning',
    giveUp,
    work: async () => {
      const run = await onDatabase(context, () => Run.findByPk(runId));
      if (run === null || (run.status !== 'queued' && run.status !== 'running')) return null;
      const stop = readStop(run);
      if (stop !== null && stop.kind !== 'limit' && run.shardCount === 0) {
        await onDatabase(context, () => store.end(run, endBeforeWork(run, stop), new Date()));
        return null;
      }
      try {
        const task = await onDatabase(context, () => readRunTask(run, store));
        await onDatabase(context, () => store.claim(runId, new Date()));
        await job.updateProgress('begun');
        return await addFlow(context, task, signal);
      } catch (error) {
        if (!(error instanceof CannotResume)) throw error;
        await giveUp(error.failure, 'interrupted');
        return null;
      }
    },
  });
}

const endBeforeWork = (run: Run, stop: NonNullable<ReturnType<typeof readStop>>) =>
  describeEnd({
    merged: new ShardMerger(run.settings.keep).merged(),
    isPlanned: false,
    stop,
    candidates: [],
    noneOfTheseProbability: null,
    otherCpuSeconds: run.cpuSeconds,
  });

async function addFlow(context: RunJobsContext, task: RunTask, signal: AbortSignal | undefined): Promise<FinishData> {
  const { compute, store, queue, flows, timing, targetShards } = context;
  const started = performance.now();
  const plan = async () =>
    (await compute.runJob('plan', { evidence: task.evidence, settings: task.settings, targetShards }, withSignal(signal))).shards;
  const [shards, expectedSeconds] = await Promise.all([task.shards ?? plan(), guessSeconds(compute, task)]);
  if (task.shards === null) await onDatabase(context, () => store.savePlan(task, shards));
  await onDatabase(context, () => store.addCpuSeconds(task.id, (performance.now() - started) / 1000));

  const merger = new ShardMerger(1);
  for (const result of task.results) merger.add({ ...result, kept: [] });
  const { constitutionCount, survivorCount, cpuSeconds, shardCount } = merger;
  const size = runSize(expectedSeconds, shards.length);
  const data: FinishData = {
    runId: task.id,
    teamId: task.teamId,
    size,
    shardCount: shards.length,
    doneBefore: { constitutionCount, survivorCount, cpuSeconds, shardCount },
  };
  const open = shards.filter(({ index }) => !merger.has(index));
  const priorities = shardPriorities(await frontOfLine(queue), shardSpacing(size, [size.weight]), open.length);
  const options = jobOptions(timing);
  // Jobs that are there already, from an attempt that was cut off here, stay as they are.
  await flows.add({
    name: 'finish',
    queueName: RUN_QUEUE,
    data,
    opts: { ...options, jobId: finishId(task.id) },
    children: open.map(({ index }, position) => ({
      name: 'shard',
      queueName: RUN_QUEUE,
      data: { runId: task.id, index },
      // A shard that failed for good has said so in the row of the run: `finish` comes all the same and ends it.
      opts: { ...options, jobId: shardId(task.id, index), priority: priorities[position] ?? 1, ignoreDependencyOnFailure: true },
    })),
  });
  await respaceTeam(queue, task.teamId);
  return data;
}
