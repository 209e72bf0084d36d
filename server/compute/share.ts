/**
 * How runs share the workers. All waiting shards stand on one line; whoever is free takes the one furthest to the front.
 * A new run begins at the front, and the next of its shards stands one spacing further back each time. The spacings of the
 * runs of a team are such that together they get what a single run of another team gets; among themselves a small run gets
 * more than a large one, so that it does not wait for it.
 */

/** A run whose size nobody could estimate counts as one of a minute. */
const UNKNOWN_SIZE_SECONDS = 60;

/**
 * What a run may claim beside others of its team: 1 below a second, 1/4 at ten seconds, 1/12 at an hour.
 * @param expectedSeconds - thread seconds of the whole search; null = unknown
 */
export function runWeight(expectedSeconds: number | null): number {
  return 1 / (1 + Math.floor(Math.log2(1 + (expectedSeconds ?? UNKNOWN_SIZE_SECONDS))));
}

/**
 * Distance between two shards of a run on the line; 1 for a run that is alone in its team.
 * @param weight - of the run. @param teamWeights - of all runs that the team has under way, this one among them
 */
export function shardSpacing(weight: number, teamWeights: readonly number[]): number {
  return teamWeights.reduce((sum, other) => sum + other, 0) / weight;
}
