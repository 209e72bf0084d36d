import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { kekuleForms, parseFragment } from '../../../shared/chemistry/fragment.js';
import { findPerfectMatching, listPerfectMatchings, type PiSystem } from '../../../shared/chemistry/kekule.js';

const system = fc
  .integer({ min: 0, max: 10 })
  .chain((size) =>
    fc.tuple(
      fc.constant(size),
      fc.array(fc.tuple(fc.nat({ max: Math.max(size - 1, 0) }), fc.nat({ max: Math.max(size - 1, 0) })), { maxLength: 18 }),
    ),
  )
  .map(([size, pairs]): PiSystem => {
    const neighbours: number[][] = Array.from({ length: size }, () => []);
    for (const [a, b] of pairs) {
      if (size === 0 || a === b || neighbours[a].includes(b)) continue;
      neighbours[a].push(b);
      neighbours[b].push(a);
    }
    return { size, neighbours };
  });

/** Largest matching by trying everything. */
function hasPerfectMatching({ size, neighbours }: PiSystem, taken = 0): boolean {
  if (taken === (1 << size) - 1) return true;
  const first = Math.log2(~taken & (taken + 1));
  return neighbours[first].some(
    (to) => (taken & (1 << to)) === 0 && hasPerfectMatching({ size, neighbours }, taken | (1 << first) | (1 << to)),
  );
}

describe('perfect matchings', () => {
  it('finds one exactly when trying everything finds one', () => {
    fc.assert(
      fc.property(system, (graph) => {
        const partner = findPerfectMatching(graph);
        expect(partner !== null).toBe(hasPerfectMatching(graph));
        partner?.forEach((to, from) => {
          expect(partner[to]).toBe(from);
          expect(graph.neighbours[from]).toContain(to);
        });
      }),
      { numRuns: 2000 },
    );
  });

  it('lists different ones only, and some whenever there is one', () => {
    fc.assert(
      fc.property(system, (graph) => {
        const all = listPerfectMatchings(graph);
        expect(new Set(all.map(String)).size).toBe(all.length);
        expect(all.length > 0).toBe(findPerfectMatching(graph) !== null);
      }),
    );
  });
});

describe('kekuleForms', () => {
  // Kekulé structure counts: Gutman & Cyvin, Introduction to the Theory of Benzenoid Hydrocarbons, 1989 (from memory).
  it.each([
    ['*c1ccccc1', 2],
    ['*c1ccc2ccccc2c1', 3],
    ['*c1ccc2cc3ccccc3cc2c1', 4],
    ['*c1cccc2c1ccc1ccccc12', 5],
    ['*c1cc2ccc3cccc4ccc(c1)c2c34', 6],
    ['*c1ccc(-c2ccccc2)cc1', 4],
    ['*c1ccco1', 1],
    ['*C1=CC=CC=C1', 1],
    ['*CC', 1],
  ])('finds the forms of %s: %i', (smiles, count) => {
    const read = parseFragment(smiles);
    if (!read.ok) throw new Error(read.message);
    const forms = kekuleForms(read.fragment);
    expect(new Set(forms.map(String)).size).toBe(count);
    expect(forms).toHaveLength(count);
    expect(forms.map(String)).toContain(String(read.fragment.graph.bondOrders));
  });

  it('keeps the sum of bond orders at every atom', () => {
    const read = parseFragment('*c1ccc2c(c1)ncn2*');
    if (!read.ok) throw new Error(read.message);
    const { graph } = read.fragment;
    const sums = (orders: Uint8Array): number[] =>
      Array.from({ length: graph.atomCount }, (_, atom) =>
        orders.slice(atom * graph.atomCount, (atom + 1) * graph.atomCount).reduce((sum, order) => sum + order, 0),
      );
    for (const form of kekuleForms(read.fragment)) expect(sums(form)).toEqual(sums(graph.bondOrders));
  });
});
