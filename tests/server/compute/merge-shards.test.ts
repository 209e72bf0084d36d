import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { Funnel, ShardCandidate, ShardResult } from '../../../shared/jobs/contract.js';
import { compareCandidates, ShardMerger } from '../../../server/compute/merge-shards.js';

const score = fc.double({ min: -200, max: 10, noNaN: true });
/** Few distinct scores and keys, so that ties are common. */
const candidate = fc.record({
  key: fc.string({ minLength: 1, maxLength: 3, unit: fc.constantFrom('a', 'b', 'c', 'd') }),
  score: fc.oneof(score, fc.constantFrom(-3, -2, -1)),
});

const shards = fc
  .array(
    fc.record({
      constitutionCount: fc.nat(1_000_000),
      rejected: fc.dictionary(fc.constantFrom('ringTooSmall', 'peroxide', 'tooFewSignals'), fc.integer({ min: 1, max: 1000 })),
      kept: fc.array(candidate, { maxLength: 12 }),
      logSumExp: fc.option(score),
      cpuSeconds: fc.double({ min: 0, max: 10, noNaN: true }),
      complete: fc.boolean(),
    }),
    { minLength: 1, maxLength: 8 },
  )
  .map((drafts) =>
    drafts.map((draft, index): ShardResult => {
      const rejections = Object.entries(draft.rejected).map(([reason, count]) => ({ reason, text: `because of ${reason}`, count }));
      const passed = draft.constitutionCount;
      const entered = passed + rejections.reduce((sum, { count }) => sum + count, 0);
      const funnel: Funnel = [
        { stage: 'constitutions', entered, passed: entered, rejections: [] },
        { stage: 'plausibility', entered, passed, rejections },
      ];
      return {
        index,
        constitutionCount: entered,
        multigraphCount: entered,
        funnel,
        // Constitutions of different shards differ: the shard number makes their keys differ too.
        kept: [...draft.kept.map((kept): ShardCandidate => ({ ...kept, key: `${kept.key}${index}`, packed: 'p', terms: {} }))].sort(
          compareCandidates,
        ),
        logSumExp: draft.logSumExp,
        cpuSeconds: draft.cpuSeconds,
        complete: draft.complete,
      };
    }),
  );

const mergeAll = (results: readonly ShardResult[], keep: number) => {
  const merger = new ShardMerger(keep);
  for (const result of results) merger.add(result);
  return merger.merged();
};

describe('ShardMerger', () => {
  const plain = { constitutionCount: 0, multigraphCount: 0, funnel: [], kept: [], logSumExp: null, cpuSeconds: 0, complete: true };

  it('adds the branches that were cut while building up by reason, most frequent first', () => {
    const { cuts } = mergeAll(
      [
        { ...plain, index: 0, cuts: [{ reason: 'ringSize', text: 'a ring too small', count: 5 }] },
        { ...plain, index: 1 },
        {
          ...plain,
          index: 2,
          cuts: [
            { reason: 'window', text: 'no carbon for δ 170', count: 7 },
            { reason: 'ringSize', text: 'a ring too small', count: 4 },
          ],
        },
      ],
      10,
    );
    expect(cuts).toEqual([
      { reason: 'ringSize', text: 'a ring too small', count: 9 },
      { reason: 'window', text: 'no carbon for δ 170', count: 7 },
    ]);
  });

  it('remembers the limit that cut a shard short', () => {
    expect(mergeAll([{ ...plain, index: 0 }], 1)).toMatchObject({ complete: true, stoppedBy: null });
    const cut = { ...plain, index: 1, complete: false, stoppedBy: 'memory' as const };
    expect(mergeAll([{ ...plain, index: 0 }, cut], 1)).toMatchObject({ complete: false, stoppedBy: 'memory' });
  });

  it('gives the same counts, funnel and ranking in any order of arrival', () => {
    fc.assert(
      fc.property(
        shards.chain((results) =>
          fc.tuple(fc.constant(results), fc.shuffledSubarray(results, { minLength: results.length, maxLength: results.length })),
        ),
        fc.integer({ min: 1, max: 10 }),
        ([results, shuffled], keep) => {
          expect(mergeAll(shuffled, keep)).toEqual(mergeAll(results, keep));
        },
      ),
    );
  });

  it('keeps exactly the best of all candidates by score, then key', () => {
    fc.assert(
      fc.property(shards, fc.integer({ min: 1, max: 10 }), (results, keep) => {
        const expected = results
          .flatMap(({ kept }) => kept)
          .sort(compareCandidates)
          .slice(0, keep);
        expect(mergeAll(results, keep).kept).toEqual(expected);
      }),
    );
  });

  it('counts a shard once, however often it ran', () => {
    fc.assert(
      fc.property(shards, (results) => {
        const merger = new ShardMerger(5);
        for (const result of results) expect(merger.add(result)).toBe(true);
        for (const result of results) expect(merger.add(result)).toBe(false);
        expect(merger.merged()).toEqual(mergeAll(results, 5));
      }),
    );
  });

  it('loses nothing when only the contenders of each shard were stored', () => {
    fc.assert(
      fc.property(shards, fc.integer({ min: 1, max: 10 }), (results, keep) => {
        const live = new ShardMerger(keep);
        const stored = results.map((result) => {
          const row = { ...result, kept: live.contenders(result.kept) };
          live.add(result);
          return row;
        });
        expect(mergeAll([...stored].reverse(), keep)).toEqual(live.merged());
      }),
    );
  });

  it('adds probabilities without overflow or underflow', () => {
    const base: ShardResult = {
      index: 0,
      constitutionCount: 1,
      multigraphCount: 1,
      funnel: [],
      kept: [],
      logSumExp: -2000,
      cpuSeconds: 0,
      complete: true,
    };
    const { logSumExp } = mergeAll([base, { ...base, index: 1 }, { ...base, index: 2, logSumExp: null }], 1);
    // log(2·e^−2000) = −2000 + log 2
    expect(logSumExp).toBeCloseTo(-2000 + Math.LN2, 9);
  });

  it('says incomplete as soon as one shard was cut short', () => {
    const base: ShardResult = {
      index: 0,
      constitutionCount: 1,
      multigraphCount: 1,
      funnel: [],
      kept: [],
      logSumExp: null,
      cpuSeconds: 0,
      complete: true,
    };
    expect(mergeAll([base, { ...base, index: 1 }], 1).complete).toBe(true);
    expect(mergeAll([base, { ...base, index: 1, complete: false }], 1).complete).toBe(false);
  });
});
