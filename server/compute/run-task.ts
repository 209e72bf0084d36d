import type { RunSettings, ShardResult, ShardSpec } from '../../shared/jobs/contract.js';
import { type EvidenceDocument, evidenceDocument } from '../../shared/schemas/evidence.js';
import type { Run } from '../models/run.js';
import type { RunFailure } from './run-stop.js';
import type { RunStore } from './run-store.js';

/** What the jobs of a run are given. */
export interface RunInput {
  readonly evidence: EvidenceDocument;
  readonly settings: RunSettings;
}

/** A run as a queue takes it over, fresh or from an earlier process. */
export interface RunTask extends RunInput {
  readonly id: string;
  readonly teamId: string;
  /** Shards as planned; null = still to be planned. */
  readonly shards: readonly ShardSpec[] | null;
  /** Results that an earlier process left behind. */
  readonly results: readonly ShardResult[];
  /** Seconds the run was under way before. */
  readonly elapsedSeconds: number;
}

/** A run that cannot be gone on with. */
export class CannotResume extends Error {
  override readonly name = 'CannotResume';
  constructor(readonly failure: RunFailure) {
    super(failure.message);
  }
}

/** A run that was under way every time the server was killed is not tried for ever. */
const MAX_INTERRUPTIONS = 3;

/** @throws CannotResume when the evidence was saved by a version that is no longer understood */
export function readRunInput(run: Run): RunInput {
  const evidence = evidenceDocument.safeParse(run.evidence);
  if (!evidence.success) {
    throw new CannotResume({
      code: 'evidenceUnreadable',
      message:
        'The server was updated while this run was under way, and its evidence cannot be read any more. Save the evidence again and start a new run.',
    });
  }
  return { evidence: evidence.data, settings: { ...run.settings, mode: 'rank' } };
}

/**
 * Reads what is left to be done of a run.
 * @throws CannotResume when nobody can go on with it
 */
export async function readRunTask(run: Run, store: RunStore): Promise<RunTask> {
  const input = readRunInput(run);
  const shards = await store.loadShards(run.id);
  if (shards === null) {
    throw new CannotResume({
      code: 'planOutdated',
      message: 'The server was updated while this run was under way, and its search plan no longer holds. Start the run again.',
    });
  }
  if (shards.some(({ interruptions, result }) => result === null && interruptions >= MAX_INTERRUPTIONS)) {
    throw new CannotResume({
      code: 'interruptedTooOften',
      message: `The server was killed ${MAX_INTERRUPTIONS} times while this run was under way; it was not taken up again.`,
    });
  }
  const lastDone = shards.reduce((latest, { finishedAt }) => Math.max(latest, finishedAt?.getTime() ?? 0), 0);
  return {
    ...input,
    id: run.id,
    teamId: run.teamId,
    shards: run.shardCount === 0 && shards.length === 0 ? null : shards.map(({ spec }) => spec),
    results: shards.flatMap(({ result }) => (result === null ? [] : [result])),
    elapsedSeconds: run.startedAt === null ? 0 : Math.max(0, (lastDone - run.startedAt.getTime()) / 1000),
  };
}
