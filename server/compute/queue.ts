import type { RunProgress } from '../../shared/jobs/contract.js';

/** What a run tells those who watch it. `changed`: its row has a new status. */
export type RunEvent = { readonly kind: 'progress'; readonly progress: RunProgress } | { readonly kind: 'changed' };
export type RunListener = (event: RunEvent) => void;

/**
 * Carries runs from `queued` to their end. The rows of runs and shards are the truth; a queue only moves them, so
 * that another process, or the same one after a restart, can go on from there.
 */
export interface RunQueue {
  /** Takes over the runs that an earlier process left behind: goes on with them or marks them interrupted. */
  start(): Promise<void>;
  /** Hands over a run whose row says `queued` and is committed. */
  submit(runId: string): void;
  /** Asks a run to stop; resolves when its row says so. Does nothing to a run that has ended. */
  cancel(runId: string): Promise<void>;
  /** Latest progress of a run that is under way here. */
  progress(runId: string): RunProgress | null;
  /** @returns stops the listening */
  subscribe(runId: string, listener: RunListener): () => void;
  /** Resolves when the run has ended, at once if it is not under way here. */
  settled(runId: string): Promise<void>;
  /** Stops working; runs under way stay in the database as queued, with their finished shards. */
  close(): Promise<void>;
}
