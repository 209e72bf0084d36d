import { describe, expect, it } from 'vitest';
import { runWeight, shardSpacing } from '../../../server/compute/share.js';

describe('the share of a run', () => {
  it('falls slowly with its size; an unknown one counts as a minute', () => {
    expect([0, 0.9, 10, 3_600].map(runWeight)).toEqual([1, 1, 1 / 4, 1 / 12]);
    expect(runWeight(null)).toBe(runWeight(60));
  });

  it('adds up to that of one run for every team', () => {
    const teams = [[1], [1, 1 / 12], [1 / 4, 1 / 4, 1 / 6]];
    for (const weights of teams) {
      const shards = weights.reduce((sum, weight) => sum + 1 / shardSpacing(weight, weights), 0);
      expect(shards).toBeCloseTo(1, 12);
    }
  });
});
