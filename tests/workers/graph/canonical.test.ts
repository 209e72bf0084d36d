import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { MolecularGraph } from '../../../shared/types/molecular-graph.js';
import { perceiveAromaticity } from '../../../workers/graph/aromaticity.js';
import { canonicalForm } from '../../../workers/graph/canonical.js';
import { constitutionKey } from '../../../workers/graph/constitution-key.js';
import { createGraph, packGraph, unpackGraph } from '../../../workers/graph/pack.js';
import { findRingSet } from '../../../workers/graph/rings.js';
import { enumerateAll } from '../../support/enumerate.js';

const molecules = ['C6H6', 'C5H4O', 'C4H5N', 'C5H8O', 'C7H6'].flatMap((formula) => enumerateAll({ formula }, { keep: true }).graphs);

function renumber(graph: MolecularGraph, order: readonly number[]): MolecularGraph {
  const n = graph.atomCount;
  const result = createGraph(n);
  for (let i = 0; i < n; i++) {
    result.atomicNumbers[i] = graph.atomicNumbers[order[i]];
    result.hydrogens[i] = graph.hydrogens[order[i]];
    result.charges[i] = graph.charges[order[i]];
    for (let j = 0; j < n; j++) result.bondOrders[i * n + j] = graph.bondOrders[order[i] * n + order[j]];
  }
  return result;
}
const renumbered = fc.constantFrom(...molecules).chain((graph) =>
  fc
    .shuffledSubarray(
      Array.from({ length: graph.atomCount }, (_, i) => i),
      { minLength: graph.atomCount },
    )
    .map((order) => [graph, order] as const),
);

describe('canonical forms', () => {
  it('do not depend on how the atoms are numbered', () => {
    fc.assert(
      fc.property(renumbered, ([graph, order]) => {
        const other = renumber(graph, order);
        expect(constitutionKey(other, true)).toBe(constitutionKey(graph, true));
        expect(constitutionKey(other, false)).toBe(constitutionKey(graph, false));
      }),
      { numRuns: 400 },
    );
  });

  it('find the whole automorphism group of very symmetric graphs', () => {
    // K(3,3) has 72 automorphisms, the cube 48, neopentane's carbon skeleton 24 (textbook values).
    const groupOrder = (n: number, edges: ReadonlyArray<readonly [number, number]>): number => {
      const matrix = new Uint8Array(n * n);
      for (const [a, b] of edges) matrix[a * n + b] = matrix[b * n + a] = 1;
      const generators = canonicalForm(n, new Uint16Array(n), matrix).automorphisms;
      const identity = Array.from({ length: n }, (_, i) => i);
      const group = [identity];
      const seen = new Set([identity.join()]);
      for (let head = 0; head < group.length; head++) {
        for (const generator of generators) {
          const product = group[head].map((v) => generator[v]);
          if (!seen.has(product.join())) {
            seen.add(product.join());
            group.push(product);
          }
        }
      }
      return group.length;
    };
    const bipartite = [0, 1, 2].flatMap((a) => [3, 4, 5].map((b) => [a, b] as const));
    const cube = Array.from({ length: 8 }, (_, v) => [1, 2, 4].flatMap((bit) => ((v & bit) === 0 ? [[v, v | bit] as const] : []))).flat();
    expect(groupOrder(6, bipartite)).toBe(72);
    expect(groupOrder(8, cube)).toBe(48);
    expect(
      groupOrder(5, [
        [0, 1],
        [0, 2],
        [0, 3],
        [0, 4],
      ]),
    ).toBe(24);
  });

  it('survive packing', () => {
    for (const graph of molecules.slice(0, 50)) expect(unpackGraph(packGraph(graph))).toEqual(graph);
  });
});

describe('rings', () => {
  it('are as many as the graph has independent cycles, and do not depend on numbering', () => {
    fc.assert(
      fc.property(renumbered, ([graph, order]) => {
        const bonds = graph.bondOrders.reduce((sum, bond) => sum + (bond > 0 ? 1 : 0), 0) / 2;
        const { basis, relevant } = findRingSet(graph);
        expect(basis.length).toBe(bonds - graph.atomCount + 1);
        const sizes = (rings: readonly (readonly number[])[]): number[] => rings.map((ring) => ring.length).sort((a, b) => a - b);
        const other = findRingSet(renumber(graph, order));
        expect(sizes(other.relevant)).toEqual(sizes(relevant));
        expect(sizes(other.basis)).toEqual(sizes(basis));
      }),
      { numRuns: 300 },
    );
  });
});

describe('aromaticity', () => {
  it('does not depend on numbering', () => {
    fc.assert(
      fc.property(renumbered, ([graph, order]) => {
        const marks = perceiveAromaticity(graph).atoms;
        const other = perceiveAromaticity(renumber(graph, order)).atoms;
        expect(Array.from(other)).toEqual(order.map((atom) => marks[atom]));
      }),
      { numRuns: 400 },
    );
  });
});
