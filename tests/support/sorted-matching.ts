/**
 * Least sum of absolute deviations when two ascending lists are laid on each other in order and every entry of both
 * is used at least once; extra entries of the longer list double up on neighbours. Equal lengths give plain sorted
 * matching unless doubling up is cheaper, which is forbidden then.
 *
 * @returns index pairs [predicted, observed], or null if one list is empty and the other is not.
 */
export function matchSorted(predicted: readonly number[], observed: readonly number[]): [number, number][] | null {
  const p = predicted.length;
  const o = observed.length;
  if (p === 0 || o === 0) return p === o ? [] : null;
  if (p === o) return predicted.map((_, i) => [i, i]);
  if (p < o) return matchSorted(observed, predicted)!.map(([a, b]) => [b, a]);
  // p > o: entry i goes to signal j; from there the next entry goes to j or j + 1.
  const cost = new Float64Array(p * o).fill(Infinity);
  cost[0] = Math.abs(predicted[0] - observed[0]);
  for (let i = 1; i < p; i++) {
    for (let j = 0; j < o && j <= i; j++) {
      const before = Math.min(cost[(i - 1) * o + j], j > 0 ? cost[(i - 1) * o + j - 1] : Infinity);
      cost[i * o + j] = before + Math.abs(predicted[i] - observed[j]);
    }
  }
  const pairs: [number, number][] = [];
  for (let i = p - 1, j = o - 1; i >= 0; i--) {
    pairs.push([i, j]);
    if (i > 0 && j > 0 && cost[(i - 1) * o + j - 1] <= cost[(i - 1) * o + j]) j--;
  }
  return pairs.reverse();
}

/** Mean, median and 90th percentile. */
export function summarise(values: readonly number[]): { count: number; mean: number; median: number; p90: number } {
  const sorted = [...values].sort((a, b) => a - b);
  const at = (share: number): number => sorted[Math.min(sorted.length - 1, Math.floor(share * sorted.length))] ?? NaN;
  return { count: sorted.length, mean: sorted.reduce((sum, v) => sum + v, 0) / sorted.length, median: at(0.5), p90: at(0.9) };
}
