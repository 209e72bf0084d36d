/**
 * How runs share the workers. All waiting shards stand on one line; whoever is free takes the one furthest to the front.
 * A new run begins at the front, and each of its shards stands behind the one before it by the thread seconds it is expected
 * to take. A run whose team has others under way is spread out further, so that they get together what a single run of
 * another team gets; among themselves a small run gets more than a large one. So teams share thread time, and a small run is
 * done before the next shard of a large one is due.
 */
export interface RunSize {
  /** What a run may claim beside others of its team: 1 below a second, 1/4 at ten seconds, 1/12 at an hour. */
  readonly weight: number;
  /** Expected thread seconds of one shard. */
  readonly shardSeconds: number;
}

/** A run whose size nobody could estimate counts as one of a minute. */
const UNKNOWN_SIZE_SECONDS = 60;
const SHORTEST_SHARD_SECONDS = 0.001;
/** A hopeless run must not stand so far behind that it never comes. */
const LONGEST_SHARD_SECONDS = 60;

/** @param expectedSeconds - thread seconds of the whole search; null = unknown. @param shardCount - what it is cut into */
export function runSize(expectedSeconds: number | null, shardCount: number): RunSize {
  const seconds = expectedSeconds ?? UNKNOWN_SIZE_SECONDS;
  const shardSeconds = Math.min(LONGEST_SHARD_SECONDS, Math.max(SHORTEST_SHARD_SECONDS, seconds / Math.max(1, shardCount)));
  return { weight: 1 / (1 + Math.floor(Math.log2(1 + seconds))), shardSeconds };
}

/**
 * Distance between two shards of a run on the line, in seconds.
 * @param teamWeights - of all runs that the team has under way, this one among them
 */
export function shardSpacing({ weight, shardSeconds }: RunSize, teamWeights: readonly number[]): number {
  return (shardSeconds * teamWeights.reduce((sum, other) => sum + other, 0)) / weight;
}
