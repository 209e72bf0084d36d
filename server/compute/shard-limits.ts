/** Shards a run is cut into, at most about so many; independent of the number of threads, so that results are too. */
export const TARGET_SHARDS = 192;
/** How long a job may ignore that it is to stop before its thread is ended. */
export const HARD_STOP_MS = 5_000;
