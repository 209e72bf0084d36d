import { createHash } from 'node:crypto';
import { Op, type Sequelize, Transaction } from 'sequelize';
import { z } from 'zod';
import type { BranchCut, Funnel, RankedCandidate, ShardResult, ShardSpec } from '../../shared/jobs/contract.js';
import type { RunStatus } from '../../shared/types/states.js';
import { Candidate } from '../models/candidate.js';
import { Run } from '../models/run.js';
import { RunShard } from '../models/run-shard.js';
import { extendReservation, settleUsage } from '../quotas/reservations.js';
import { readStop, type RunFailure, type Stop } from './run-stop.js';

/**
 * Version of the search plan that shard rows hold. To be raised whenever the engine would read an old plan in
 * another way: runs planned before are then not resumed but marked interrupted.
 */
export const SHARD_PLAN_VERSION = 1;

const writtenByThisVersion = z.looseObject({ version: z.literal(SHARD_PLAN_VERSION) });
/** Rows a transaction writes at once; a candidate takes some kB, a packet at most 16 MB. */
const CANDIDATES_PER_STATEMENT = 100;
const SHARDS_PER_STATEMENT = 500;
const SHARD_RESULTS_PER_QUERY = 20;

/** How a run ended, as its row will say. */
export interface RunEnd {
  readonly status: Extract<RunStatus, 'finished' | 'stopped' | 'cancelled' | 'failed' | 'interrupted'>;
  readonly complete: boolean;
  readonly constitutionCount: number | null;
  readonly multigraphCount: number | null;
  readonly survivorCount: number | null;
  readonly funnel: Funnel | null;
  readonly cuts: readonly BranchCut[] | null;
  readonly logSumExp: number | null;
  readonly noneOfTheseProbability: number | null;
  readonly candidates: readonly RankedCandidate[];
  readonly cpuSeconds: number;
  readonly failure: RunFailure | null;
}

/** A shard as an earlier process left it. */
export interface StoredShard {
  readonly spec: ShardSpec;
  readonly interruptions: number;
  /** null when it is still to be done. */
  readonly result: ShardResult | null;
  readonly finishedAt: Date | null;
}

const UNDER_WAY = { status: ['queued', 'running'] satisfies RunStatus[] };

const toStoredShard = (row: RunShard): StoredShard | null =>
  writtenByThisVersion.safeParse(row.spec).success
    ? { spec: row.spec, interruptions: row.attempt, result: row.status === 'done' ? row.result : null, finishedAt: row.finishedAt }
    : null;

export const sha256 = (text: string): string => createHash('sha256').update(text).digest('hex');

/** What the queue reads from and writes to the rows of a run. Every write is one transaction. */
export class RunStore {
  readonly #sequelize: Sequelize;

  constructor(sequelize: Sequelize) {
    this.#sequelize = sequelize;
  }

  /** Moves a run from `queued` to `running`; one that was running before a crash stays so. */
  async claim(runId: string, now: Date): Promise<void> {
    await Run.update(
      { status: 'running', startedAt: this.#sequelize.fn('COALESCE', this.#sequelize.col('started_at'), now) as unknown as Date },
      { where: { id: runId, status: 'queued' } },
    );
  }

  /** @returns CPU seconds set aside for the run now */
  extendReservation(runId: string, usedSeconds: number): Promise<number> {
    // Read committed: usage is counted after waiting for the lock on the membership, and must be that of then.
    const isolationLevel = Transaction.ISOLATION_LEVELS.READ_COMMITTED;
    return this.#sequelize.transaction({ isolationLevel }, (transaction) => extendReservation(transaction, runId, usedSeconds));
  }

  /** Gives a run back, so that the next process goes on with it. */
  async release(runId: string): Promise<void> {
    await Run.update({ status: 'queued' }, { where: { id: runId, status: 'running' } });
  }

  /** Keeps the plan of a run that is under way; a run that has ended or was planned meanwhile gets none. */
  async savePlan(run: { id: string; teamId: string }, shards: readonly ShardSpec[]): Promise<void> {
    await this.#sequelize.transaction(async (transaction) => {
      const row = await Run.findByPk(run.id, { attributes: ['id', 'status', 'shardCount'], transaction, lock: transaction.LOCK.UPDATE });
      if (row?.status !== 'running' || row.shardCount > 0) return;
      await RunShard.destroy({ where: { runId: run.id }, transaction });
      for (let start = 0; start < shards.length; start += SHARDS_PER_STATEMENT) {
        const rows = shards.slice(start, start + SHARDS_PER_STATEMENT).map((shard) => ({
          teamId: run.teamId,
          runId: run.id,
          index: shard.index,
          spec: { version: SHARD_PLAN_VERSION, ...shard },
        }));
        await RunShard.bulkCreate(rows, { transaction });
      }
      await Run.update({ shardCount: shards.length }, { where: { id: run.id }, transaction });
    });
  }

  /** Keeps the result of a finished shard; a shard that is done already stays as it is. */
  async saveShard(runId: string, result: ShardResult, now: Date): Promise<void> {
    await RunShard.update(
      { status: 'done', result, cpuSeconds: result.cpuSeconds, finishedAt: now },
      { where: { runId, index: result.index, status: { [Op.ne]: 'done' } } },
    );
  }

  /** Notes that a process was killed while these shards were open. */
  async countInterruption(runId: string): Promise<void> {
    await RunShard.increment('attempt', { where: { runId, status: { [Op.ne]: 'done' } } });
  }

  /**
   * Reads the shards of a run in the order of their indexes.
   * @returns null when the plan was written by another version of the engine
   */
  async loadShards(runId: string): Promise<StoredShard[] | null> {
    const shards: StoredShard[] = [];
    for await (const shard of this.readShards(runId)) {
      if (shard === null) return null;
      shards.push(shard);
    }
    return shards;
  }

  /** Reads the same shards a few at a time; null stands for one that was planned by another version of the engine. */
  async *readShards(runId: string): AsyncGenerator<StoredShard | null> {
    for (let offset = 0; ; offset += SHARD_RESULTS_PER_QUERY) {
      const rows = await RunShard.findAll({ where: { runId }, order: [['index', 'ASC']], offset, limit: SHARD_RESULTS_PER_QUERY });
      for (const row of rows) yield toStoredShard(row);
      if (rows.length < SHARD_RESULTS_PER_QUERY) return;
    }
  }

  /** One shard of a run that is planned; null when it is not there, or was planned by another version. */
  async readShard(runId: string, index: number): Promise<StoredShard | null> {
    const row = await RunShard.findOne({ where: { runId, index } });
    return row === null ? null : toStoredShard(row);
  }

  /** Notes that a run is to be cancelled, if that is not known yet. */
  async requestCancel(runId: string, now: Date): Promise<void> {
    await Run.update({ cancelRequestedAt: now }, { where: { id: runId, ...UNDER_WAY, cancelRequestedAt: null } });
  }

  /** Notes why a run is to stop, so that every process that works on it sees it; the first reason stays. */
  async noteStop(runId: string, { code, message }: RunFailure): Promise<void> {
    await Run.update({ failure: { code, message } }, { where: { id: runId, ...UNDER_WAY, failure: null } });
  }

  /** Adds CPU seconds that belong to no finished shard; in the row of a run under way, `cpuSeconds` counts these alone. */
  async addCpuSeconds(runId: string, cpuSeconds: number): Promise<void> {
    await Run.increment({ cpuSeconds }, { where: { id: runId, ...UNDER_WAY } });
  }

  /** Those of the runs that are to stop, and why, or that have ended. */
  async findStops(runIds: readonly string[]): Promise<Map<string, Stop | 'ended'>> {
    const rows = await Run.findAll({ where: { id: [...runIds] }, attributes: ['id', 'status', 'cancelRequestedAt', 'failure'] });
    const stops = new Map<string, Stop | 'ended'>(runIds.map((id) => [id, 'ended']));
    for (const row of rows) {
      if (row.status !== 'queued' && row.status !== 'running') continue;
      const stop = readStop(row);
      if (stop === null) stops.delete(row.id);
      else stops.set(row.id, stop);
    }
    return stops;
  }

  /** CPU seconds of the shards that are done. */
  async sumCpuSeconds(runId: string): Promise<number> {
    return (await RunShard.sum('cpuSeconds', { where: { runId } })) || 0;
  }

  /** Writes candidates, counts and usage and drops the shards, all or nothing. Does nothing to a run that has ended. */
  async end(run: { id: string; teamId: string }, end: RunEnd, now: Date): Promise<void> {
    await this.#sequelize.transaction(async (transaction) => {
      const row = await Run.findByPk(run.id, { attributes: ['id', 'status'], transaction, lock: transaction.LOCK.UPDATE });
      if (row === null || (row.status !== 'queued' && row.status !== 'running')) return;
      await this.#saveCandidates(run, end.candidates, transaction);
      await Run.update(
        {
          status: end.status,
          complete: end.complete,
          constitutionCount: end.constitutionCount,
          multigraphCount: end.multigraphCount,
          survivorCount: end.survivorCount,
          keptCount: end.candidates.length,
          funnel: end.funnel,
          cuts: end.cuts,
          logSumExp: end.logSumExp,
          noneOfTheseProbability: end.noneOfTheseProbability,
          cpuSeconds: end.cpuSeconds,
          failure: end.failure,
          finishedAt: now,
        },
        { where: { id: run.id }, transaction },
      );
      await RunShard.destroy({ where: { runId: run.id }, transaction });
      await settleUsage(transaction, run.id, end.cpuSeconds);
    });
  }

  async #saveCandidates(
    run: { id: string; teamId: string },
    candidates: readonly RankedCandidate[],
    transaction: Transaction,
  ): Promise<void> {
    for (let start = 0; start < candidates.length; start += CANDIDATES_PER_STATEMENT) {
      const rows = candidates.slice(start, start + CANDIDATES_PER_STATEMENT).map(({ key, ...candidate }) => ({
        ...candidate,
        teamId: run.teamId,
        runId: run.id,
        idcodeHash: sha256(candidate.idcode),
        keyHash: sha256(key),
      }));
      await Candidate.bulkCreate(rows, { transaction });
    }
  }
}
