import { describe, expect, it } from 'vitest';
import { analyseStructure } from '../../../workers/graph/analysis.js';
import {
  createPredictedPattern,
  patternCost,
  predictPattern,
  readPattern,
  type ObservedPattern,
} from '../../../workers/ranking/coupling-patterns.js';
import { Environments } from '../../../workers/ranking/environments.js';
import { graphOf } from '../../support/graph-of.js';

const read = (multiplicity: string, couplings?: readonly number[]): ObservedPattern => {
  const pattern = readPattern(multiplicity, couplings);
  if (pattern === null) throw new Error(`${multiplicity} says nothing`);
  return pattern;
};

function cost(smiles: string, atom: number, multiplicity: string, couplings?: readonly number[]): number {
  const structure = analyseStructure(graphOf(smiles));
  const environments = new Environments();
  environments.find(structure);
  const predicted = createPredictedPattern();
  predictPattern(structure, environments.classOf, atom, predicted);
  return patternCost(read(multiplicity, couplings), predicted);
}

describe('readPattern', () => {
  it('counts partners by letter and sets small couplings apart', () => {
    expect(read('s')).toMatchObject({ partners: [], total: 0 });
    expect(read('dt')).toMatchObject({ partners: [2, 1], total: 3 });
    expect(read('sept')).toMatchObject({ total: 6 });
    expect(read('non')).toMatchObject({ total: 8 });
    expect(read('br d')).toMatchObject({ total: 1, isBroad: true });
    expect(read('dd', [8.2, 1.5])).toMatchObject({ partners: [1], total: 1, smallTotal: 1 });
  });

  it('makes nothing of m, br and no pattern at all', () => {
    for (const text of ['m', 'br', 'br m', undefined]) expect(readPattern(text, undefined)).toBeNull();
  });
});

describe('patternCost', () => {
  // First-order patterns, SCIENCE.md 3.4 and the compounds of section 11.
  it.each<[string, number, string]>([
    ['CCOC(C)=O', 0, 't'],
    ['CCOC(C)=O', 1, 'q'],
    ['CCOC(C)=O', 4, 's'],
    ['CC(C)O', 1, 'sept'],
    ['CC(C)O', 0, 'd'],
    ['CC(C)CO', 3, 'd'],
    ['CC(C)(C)OC', 0, 's'],
    ['C1CCOC1', 2, 't'],
    ['Cc1ccc(C)cc1', 2, 's'],
    ['ClCCl', 1, 's'],
    ['COC(=O)OC', 0, 's'],
  ])('%s, atom %i: %s is as expected', (smiles, atom, multiplicity) => {
    expect(cost(smiles, atom, multiplicity)).toBe(0);
  });

  it('accepts merged couplings and long-range ones at little cost', () => {
    expect(cost('CC(C)CO', 1, 'non')).toBeLessThan(0.5);
    expect(cost('CCCC#N', 1, 'sext')).toBeLessThan(0.5);
    expect(cost('COc1ccc(C=O)cc1', 3, 'd')).toBe(0);
    expect(cost('c1ccncc1', 0, 'tt')).toBeLessThanOrEqual(0.5);
    expect(cost('CC(C)O', 1, 'dsept')).toBeLessThanOrEqual(0.5);
    expect(cost('C=CC(=O)OC', 1, 'dd')).toBeLessThan(0.5);
  });

  it('costs a clean singlet beside vicinal hydrogens dearly, less in rings, and a wrong number of partners in between', () => {
    expect(cost('CCOCC', 0, 's')).toBeGreaterThan(cost('CCOCC', 0, 'd'));
    expect(cost('CCOCC', 0, 's')).toBeGreaterThan(3);
    expect(cost('C1CCOC1', 2, 's')).toBeLessThan(cost('CCOCC', 0, 's'));
    expect(cost('COC(C)=O', 0, 'q')).toBeGreaterThan(1);
    expect(cost('COC(C)=O', 0, 'br q')).toBeLessThan(cost('COC(C)=O', 0, 'q'));
  });
});
