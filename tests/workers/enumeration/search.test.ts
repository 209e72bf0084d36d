import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { enumerateAll } from '../../support/enumerate.js';

const FORMULAS = ['C5H8O', 'C4H7NO', 'C6H6', 'C4H6O2', 'C3H6ClNO', 'C7H8', 'C4H4N2'] as const;
const WITH_FRAGMENTS = [
  { formula: 'C9H10O2', fragments: { required: [{ smiles: '*c1cccc(*)c1', count: 1 }] } },
  {
    formula: 'C8H16O2',
    fragments: {
      required: [
        { smiles: '*C(=O)O*', count: 1 },
        { smiles: '*C(C)C', count: 1 },
      ],
    },
  },
  { formula: 'C6H10O4', fragments: { required: [{ smiles: '*C(=O)O*', count: 2 }] } },
  { formula: 'C5H12O2', fragments: { required: [{ smiles: '*O*', count: 2 }] } },
];

describe('shards of one search', () => {
  it.each([...FORMULAS.map((formula) => ({ formula })), ...WITH_FRAGMENTS])(
    'give the same constitutions for any number of shards: %j',
    (input) => {
      const whole = enumerateAll(input, { keep: true }).keys.sort();
      for (const shards of [2, 7, 64]) {
        const split = enumerateAll(input, { keep: true, shards });
        expect(split.keys.sort()).toEqual(whole);
      }
      expect(new Set(whole).size).toBe(whole.length);
    },
  );

  it('give the same result in any order and when one runs twice', () => {
    const input = { formula: 'C6H8O' };
    const whole = enumerateAll(input, { keep: true, shards: 16 }).keys.sort();
    const backwards = enumerateAll(input, { keep: true, shards: 16, order: (indexes) => indexes.reverse() }).keys.sort();
    expect(backwards).toEqual(whole);
    const once = enumerateAll(input, { keep: true, shards: 16, order: () => [3] }).keys;
    const twice = enumerateAll(input, { keep: true, shards: 16, order: () => [3, 3] }).keys;
    expect(twice).toEqual([...once, ...once]);
  });
});

describe('attached hydrogens from 13C signals', () => {
  it('keep exactly the constitutions with such carbons', () => {
    fc.assert(
      fc.property(fc.constantFrom('C5H8O', 'C4H8O2', 'C5H9N', 'C6H10'), fc.nat(1e6), (formula, pick) => {
        const all = enumerateAll({ formula }, { keep: true });
        const example = all.graphs[pick % all.graphs.length];
        const census = (graph: typeof example): number[] => {
          const counts = [0, 0, 0, 0, 0];
          for (let atom = 0; atom < graph.atomCount; atom++) if (graph.atomicNumbers[atom] === 6) counts[graph.hydrogens[atom]]++;
          return counts;
        };
        const wanted = census(example);
        fc.pre(wanted[4] === 0);
        const carbonSignals = [0, 1, 2, 3]
          .filter((hydrogens) => wanted[hydrogens] > 0)
          .map((hydrogens) => ({ shift: 20, hydrogens, count: wanted[hydrogens] }));
        const narrowed = enumerateAll({ formula, carbonSignals }, { keep: true }).keys.sort();
        const filtered = all.keys.filter((_, k) => census(all.graphs[k]).join() === wanted.join()).sort();
        expect(narrowed).toEqual(filtered);
      }),
      { numRuns: 25 },
    );
  });
});
