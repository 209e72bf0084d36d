import { describe, expect, it } from 'vitest';
import { runSize, shardSpacing } from '../../../server/compute/share.js';

describe('the share of a run', () => {
  it('falls slowly with its size; an unknown one counts as a minute', () => {
    expect([0, 0.9, 10, 3_600].map((seconds) => runSize(seconds, 10).weight)).toEqual([1, 1, 1 / 4, 1 / 12]);
    expect(runSize(null, 10)).toEqual(runSize(60, 10));
  });

  it('is counted in the seconds of its shards, within bounds', () => {
    expect(runSize(192, 192).shardSeconds).toBe(1);
    expect(runSize(1e9, 192).shardSeconds).toBe(60);
    expect(runSize(0, 0).shardSeconds).toBeGreaterThan(0);
  });

  it('adds up to one second a second for every team', () => {
    const teams = [[20], [0.1, 3_600], [10, 12, 60]];
    for (const team of teams) {
      const sizes = team.map((seconds) => runSize(seconds, 192));
      const weights = sizes.map(({ weight }) => weight);
      const share = sizes.reduce((sum, size) => sum + size.shardSeconds / shardSpacing(size, weights), 0);
      expect(share).toBeCloseTo(1, 12);
    }
  });
});
