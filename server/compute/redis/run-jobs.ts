import type { DefaultJobOptions, Job } from 'bullmq';
import { MAX_CRASHES } from '../run-failure.js';
import { SHARD_PLAN_VERSION } from '../run-store.js';
import type { RunSize } from '../share.js';

/**
 * The jobs of a run. `plan` cuts it into shards and adds the flow: `finish` as the parent, which BullMQ starts when every
 * `shard` below it is done. Jobs only say what is to be done; evidence, plan and results are in the database.
 */
export type RunJobName = 'plan' | 'shard' | 'finish';

/** By the version of the plan: a worker of another version must not take our shards. */
export const RUN_QUEUE = `runs-v${SHARD_PLAN_VERSION}`;
export const KEY_PREFIX = 'isoloom';

/** What shards have done, in sum or one by one. */
export interface ShardFigures {
  readonly constitutionCount: number;
  readonly survivorCount: number;
  readonly cpuSeconds: number;
}
export interface PlanData {
  readonly runId: string;
}
export interface ShardData {
  readonly runId: string;
  readonly index: number;
}
export interface FinishData {
  readonly runId: string;
  readonly teamId: string;
  readonly size: RunSize;
  readonly shardCount: number;
  /** Shards that were done before this flow was made. */
  readonly doneBefore: ShardFigures & { readonly shardCount: number };
}
/** What a job reports while it is active: a plan that it has begun, a shard what it has seen. */
export interface ShardProgress {
  readonly constitutionsSeen: number;
  readonly survivors: number;
  readonly seconds: number;
}

export type PlanJob = Job<PlanData, FinishData | null, 'plan', 'begun'>;
/** null: there was nothing more to do for this run. */
export type ShardJob = Job<ShardData, ShardFigures | null, 'shard', ShardProgress>;
export type FinishJob = Job<FinishData, null, 'finish'>;
export type RunJob = PlanJob | ShardJob | FinishJob;

export const planId = (runId: string): string => `plan.${runId}`;
export const finishId = (runId: string): string => `finish.${runId}`;
export const shardId = (runId: string, index: number): string => `shard.${runId}.${index}`;

const JOB_ID = /^(plan|shard|finish)\.([^.]+)(?:\.(\d+))?$/;

/** Reads an id made above; null for any other. */
export function readJobId(jobId: string): { readonly name: RunJobName; readonly runId: string; readonly index: number } | null {
  const match = JOB_ID.exec(jobId);
  return match === null ? null : { name: match[1] as RunJobName, runId: match[2] ?? '', index: Number(match[3] ?? -1) };
}

/** Times of the queue; shorter ones are for tests. */
export interface QueueTiming {
  /** A job whose worker gives no sign of life for so long goes to another one. */
  readonly lockMs: number;
  /** First pause before a job is tried again; it doubles each time. */
  readonly backoffMs: number;
  readonly progressMs: number;
  /** How often a worker looks whether its runs are to stop. */
  readonly lookMs: number;
  /** How often the server looks for runs that no job carries any more. */
  readonly upkeepMs: number;
}
export const DEFAULT_TIMING: QueueTiming = { lockMs: 15_000, backoffMs: 500, progressMs: 400, lookMs: 200, upkeepMs: 15_000 };

/** Jobs leave nothing behind: what remains of a run is in the database. */
export const jobOptions = ({ backoffMs }: QueueTiming): DefaultJobOptions => ({
  attempts: MAX_CRASHES,
  backoff: { type: 'exponential', delay: backoffMs },
  removeOnComplete: true,
  removeOnFail: true,
});
