import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { analyseStructure, AnalysisScratch, NEIGHBOUR_STRIDE } from '../../../workers/graph/analysis.js';
import { perceiveAromaticity } from '../../../workers/graph/aromaticity.js';
import { findRings } from '../../../workers/graph/rings.js';
import { graphOf } from '../../support/graph-of.js';
import { randomMolecule } from '../../support/random-molecules.js';

describe('structure analysis', () => {
  it('agrees with ring search, aromaticity and the bond matrix on random molecules, also in a reused scratch', () => {
    const scratch = new AnalysisScratch();
    fc.assert(
      fc.property(fc.integer(), (seed) => {
        const graph = randomMolecule(seed, 20);
        const n = graph.atomCount;
        const analysis = analyseStructure(graph, scratch);
        const rings = findRings(graph);
        const aromaticity = perceiveAromaticity(graph);
        for (let a = 0; a < n; a++) {
          const neighbours = Array.from(analysis.neighbours.subarray(a * NEIGHBOUR_STRIDE, a * NEIGHBOUR_STRIDE + analysis.degrees[a]));
          expect(neighbours).toEqual([...Array(n).keys()].filter((b) => graph.bondOrders[a * n + b] > 0));
          expect(analysis.aromaticAtoms[a]).toBe(aromaticity.atoms[a]);
          // The smallest ring through a bond is never a sum of shorter ones, hence among the relevant rings.
          const smallest = (of: readonly (readonly number[])[]): number =>
            of.length === 0 ? 0 : Math.min(...of.map((ring) => ring.length));
          expect(analysis.smallestRingOfAtom[a]).toBe(smallest(rings.filter((ring) => ring.includes(a))));
          let ringBonds = 0;
          for (let b = 0; b < n; b++) {
            const through = rings.filter((ring) =>
              ring.some((atom, i) => atom === a && (ring[(i + 1) % ring.length] === b || ring.at(i - 1) === b)),
            );
            expect(analysis.smallestRingOfBond[a * n + b]).toBe(smallest(through));
            expect(analysis.aromaticBonds[a * n + b]).toBe(aromaticity.bonds[a * n + b]);
            if (through.length > 0) ringBonds++;
          }
          expect(analysis.ringBondCounts[a]).toBe(ringBonds);
        }
      }),
      { numRuns: 300 },
    );
  });

  it('tells hybridisation', () => {
    const of = (smiles: string): number[] => Array.from(analyseStructure(graphOf(smiles)).hybridisation);
    expect(of('CC=C')).toEqual([3, 2, 2]);
    expect(of('CC#N')).toEqual([3, 1, 1]);
    expect(of('C=C=C')).toEqual([2, 1, 2]);
    // Tetrahedral in spite of the double bonds they are written with.
    expect(of('CS(C)(=O)=O')[1]).toBe(3);
    expect(of('c1cc[nH]c1')).toEqual([2, 2, 2, 2, 2]);
  });

  it('refuses a structure larger than its scratch', () => {
    expect(() => analyseStructure(graphOf('CCCC'), new AnalysisScratch(3))).toThrow(RangeError);
  });
});
