/** Where an unknown stands; people set it by hand except that a first run moves `new` to `inProgress`. */
export const UNKNOWN_STATUSES = ['new', 'inProgress', 'settled', 'shelved'] as const;
export type UnknownStatus = (typeof UNKNOWN_STATUSES)[number];

/** Life of a run. `stopped` = ended by a limit: what was found is kept and marked incomplete. */
export const RUN_STATUSES = ['queued', 'running', 'finished', 'stopped', 'cancelled', 'failed', 'interrupted'] as const;
export type RunStatus = (typeof RUN_STATUSES)[number];
export const ENDED_RUN_STATUSES: readonly RunStatus[] = ['finished', 'stopped', 'cancelled', 'failed', 'interrupted'];

/** What a running run is doing. */
export const RUN_STAGES = ['planning', 'enumerating', 'ranking', 'done'] as const;
export type RunStage = (typeof RUN_STAGES)[number];

export const VERDICTS = ['open', 'supported', 'refuted', 'confirmed'] as const;
export type Verdict = (typeof VERDICTS)[number];
