import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { analyseStructure, AnalysisScratch } from '../../../workers/graph/analysis.js';
import { findEquivalence } from '../../../workers/graph/equivalence.js';
import { createShiftPredictor } from '../../../workers/prediction/create-shift-predictor.js';
import { TERM_BY_NAME, TERM_COUNT } from '../../../workers/prediction/features.js';
import { createPredictedShifts } from '../../../workers/prediction/predicted-shifts.js';
import type { MolecularGraph } from '../../../shared/types/molecular-graph.js';
import { graphOf } from '../../support/graph-of.js';
import { permutationOf, randomMolecule, relabelGraph } from '../../support/random-molecules.js';

const predictor = createShiftPredictor();
function shiftsOf(graph: MolecularGraph) {
  const out = createPredictedShifts(graph.atomCount);
  predictor.predictInto(graph, analyseStructure(graph), out);
  return out;
}
const seeds = fc.integer({ min: 0, max: 2 ** 31 - 1 });

describe('shift predictor', () => {
  it('names every term differently', () => {
    expect(TERM_BY_NAME.size).toBe(TERM_COUNT);
  });

  it('gives every carbon and hydrogen of a random valid molecule a finite number with a positive spread', () => {
    fc.assert(
      fc.property(seeds, (seed) => {
        const graph = randomMolecule(seed, 20);
        const out = shiftsOf(graph);
        for (let a = 0; a < graph.atomCount; a++) {
          if (graph.atomicNumbers[a] === 6) {
            expect(Number.isFinite(out.carbonShift[a])).toBe(true);
            expect(out.carbonSd[a]).toBeGreaterThan(0.3);
            expect(out.carbonSd[a]).toBeLessThan(60);
          } else expect(out.carbonShift[a]).toBe(0);
          if (graph.hydrogens[a] > 0) {
            expect(Number.isFinite(out.protonShift[a])).toBe(true);
            expect(out.protonSd[a]).toBeGreaterThan(0.02);
          } else expect(out.protonShift[a]).toBe(0);
        }
      }),
      { numRuns: 500 },
    );
  });

  it('does not depend on how the atoms are numbered', () => {
    fc.assert(
      fc.property(seeds, seeds, (seed, order) => {
        const graph = randomMolecule(seed);
        const permutation = permutationOf(graph.atomCount, order);
        const before = shiftsOf(graph);
        const after = shiftsOf(relabelGraph(graph, permutation));
        for (let a = 0; a < graph.atomCount; a++) {
          expect(after.carbonShift[permutation[a]]).toBeCloseTo(before.carbonShift[a], 6);
          expect(after.carbonSd[permutation[a]]).toBeCloseTo(before.carbonSd[a], 6);
          expect(after.protonShift[permutation[a]]).toBeCloseTo(before.protonShift[a], 6);
          expect(after.protonSd[permutation[a]]).toBeCloseTo(before.protonSd[a], 6);
        }
      }),
      { numRuns: 300 },
    );
  });

  it('gives atoms of one orbit one shift', () => {
    fc.assert(
      fc.property(seeds, (seed) => {
        const graph = randomMolecule(seed);
        const { orbits } = findEquivalence(graph);
        const { carbonShift, protonShift } = shiftsOf(graph);
        for (let a = 0; a < graph.atomCount; a++) {
          for (let b = 0; b < a; b++) {
            if (orbits[a] !== orbits[b]) continue;
            expect(carbonShift[a]).toBeCloseTo(carbonShift[b], 6);
            expect(protonShift[a]).toBeCloseTo(protonShift[b], 6);
          }
        }
      }),
      { numRuns: 200 },
    );
  });

  it.each([
    ['CC1=CC=CC=C1O', 'CC=1C=CC=CC=1O'],
    ['CC1=CC=CN=C1Cl', 'CC=1C=CC=NC=1Cl'],
    ['C1=CC2=CC=CC=C2C(O)=C1', 'C=1C=C2C=CC=CC2=C(O)C=1'],
    ['C1=CC=C2C(=C1)C=CN2', 'C=1C=CC2=C(C=1)C=CN2'],
  ])('predicts the same for the resonance forms %s and %s', (one, other) => {
    const [a, b] = [shiftsOf(graphOf(one)), shiftsOf(graphOf(other))];
    const sorted = (values: Float64Array): number[] => Array.from(values).sort((x, y) => x - y);
    sorted(a.carbonShift).forEach((shift, i) => expect(shift).toBeCloseTo(sorted(b.carbonShift)[i], 6));
    sorted(a.protonShift).forEach((shift, i) => expect(shift).toBeCloseTo(sorted(b.protonShift)[i], 6));
  });

  it('is sure of a common surrounding and unsure of one it has never seen', () => {
    const common = shiftsOf(graphOf('CCCCC(=O)OC'));
    const odd = shiftsOf(graphOf('CC(F)(I)SP'));
    expect(odd.carbonSd[1]).toBeGreaterThan(2 * common.carbonSd[1]);
  });

  it('reads reused, longer buffers by the atom count only', () => {
    const scratch = new AnalysisScratch();
    const out = createPredictedShifts();
    const long = graphOf('CC(C)c1ccc(C)cc1');
    const short = graphOf('CCO');
    predictor.predictInto(long, analyseStructure(long, scratch), out);
    const padded = (array: Uint8Array): Uint8Array => Uint8Array.from([...array, ...Array.from({ length: 30 }, () => 7)]);
    const reused: MolecularGraph = {
      atomCount: 3,
      atomicNumbers: padded(short.atomicNumbers),
      hydrogens: padded(short.hydrogens),
      charges: new Int8Array(20),
      bondOrders: padded(short.bondOrders),
    };
    predictor.predictInto(reused, analyseStructure(reused, scratch), out);
    const fresh = shiftsOf(short);
    for (let a = 0; a < 3; a++) expect(out.carbonShift[a]).toBe(fresh.carbonShift[a]);
  });
});
