import { describe, expect, it } from 'vitest';
import { evidenceDocument, type EvidenceInput } from '../../../shared/schemas/evidence.js';
import { countExactly, estimateSearch, type SearchEstimate } from '../../../workers/enumeration/estimate.js';
import { openBranch } from '../../../workers/enumeration/open-branch.js';
import { createRandom, descend } from '../../../workers/enumeration/random-descent.js';
import { createSearch } from '../../../workers/enumeration/search.js';
import { enumerateAll } from '../../support/enumerate.js';
import { readOutside } from '../../support/outside.js';

const never = (): boolean => false;
/** Counts are of everything that the formula allows. */
const searchOf = (input: EvidenceInput) =>
  createSearch(evidenceDocument.parse({ ...input, options: { plausibility: false, ...input.options } }));
function estimate(input: EvidenceInput, seed: number, maxProbes: number): SearchEstimate<null> {
  return estimateSearch(searchOf(input), { seed, maxProbes, shouldStop: never, observe: () => null });
}

describe('a random descent', () => {
  it('is right on average: without bias, whatever its width', () => {
    // SCIENCE.md 2.6 (OEIS): 217 valence multigraphs of C6H6. One branch after the other, many descents each.
    const search = searchOf({ formula: 'C6H6', options: { mergeResonanceForms: false } });
    for (const walkers of [1, 5]) {
      const random = createRandom(11);
      const total = search.branches.reduce((sum, _, d) => {
        const branch = openBranch(search.branches[d]);
        let weights = 0;
        for (let k = 0; k < 1_500; k++) weights += descend(branch, walkers, random, never)!.weight;
        return sum + weights / 1_500;
      }, 0);
      expect(Math.abs(total / 217 - 1)).toBeLessThan(0.03);
    }
  });

  it('is exact when it is wide enough to keep every child', () => {
    const search = searchOf({ formula: 'C5H8O' });
    const total = search.branches.reduce(
      (sum, _, d) => sum + descend(openBranch(search.branches[d]), 1e6, createRandom(1), never)!.weight,
      0,
    );
    expect(total).toBe(enumerateAll({ formula: 'C5H8O' }).constitutions);
  });

  it('says nothing when it is ended half way', () => {
    expect(descend(openBranch(searchOf({ formula: 'C20H30O5' }).branches[3]), 400, createRandom(1), () => true)).toBeNull();
  });
});

describe('the estimate of a search', () => {
  it('is the same for the same seed, and another for another', () => {
    const first = estimate({ formula: 'C8H8O' }, 5, 300);
    expect(estimate({ formula: 'C8H8O' }, 5, 300)).toEqual(first);
    expect(estimate({ formula: 'C8H8O' }, 6, 300).estimate).not.toBe(first.estimate);
  });

  it('lets its samples stand for the whole', () => {
    const { estimate: size, samples } = estimate({ formula: 'C7H10O' }, 3, 400);
    expect(samples.reduce((sum, { weight }) => sum + weight, 0) / size).toBeCloseTo(1, 9);
  });

  it('is nothing, exactly, for a search without branches', () => {
    const search = { ...searchOf({ formula: 'C2H6O' }), branches: [] };
    expect(estimateSearch(search, { seed: 1, maxProbes: 10, shouldStop: never, observe: () => null })).toMatchObject({
      estimate: 0,
      low: 0,
      high: 0,
    });
  });

  it('makes one descent even when its time is over before it begins', () => {
    const late = estimateSearch(searchOf({ formula: 'C20H30O5' }), {
      seed: 1,
      maxProbes: 100,
      shouldStop: () => true,
      observe: () => null,
    });
    expect(late.probes).toBe(1);
    expect(late.high).toBeGreaterThan(1);
  });

  it('counts branch by branch what enumerating counts', () => {
    const counted = countExactly(searchOf({ formula: 'C6H8O' }), never)!;
    expect(counted.reduce((sum, size) => sum + size, 0)).toBe(enumerateAll({ formula: 'C6H8O' }).constitutions);
    expect(countExactly(searchOf({ formula: 'C10H16O2' }), () => true)).toBeNull();
  });

  it('has intervals that hold the truth as often as they say', () => {
    const rows = readOutside<{ formula: string; multigraphCount: number }[]>('oracles/isomer-counts.json');
    if (rows === null) return;
    // Independent counts by nauty (oracles/README.md). Nine of ten is asked for; the seeds are fixed, so this never flickers.
    const some = rows.filter(({ multigraphCount }) => multigraphCount >= 1_000 && multigraphCount <= 400_000).filter((_, k) => k % 3 === 0);
    let held = 0;
    let tried = 0;
    for (const { formula, multigraphCount } of some) {
      for (const seed of [1, 2, 3, 4]) {
        const { low, high } = estimate({ formula, options: { mergeResonanceForms: false } }, seed, 250);
        tried++;
        if (low <= multigraphCount && multigraphCount <= high) held++;
      }
    }
    expect(tried).toBeGreaterThan(20);
    expect(held / tried).toBeGreaterThanOrEqual(0.9);
  }, 60_000);
});
