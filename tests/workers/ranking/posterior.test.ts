import { describe, expect, it } from 'vitest';
import { evidenceDocument } from '../../../shared/schemas/evidence.js';
import { anyCarbonCost, noneOfTheseLogLikelihood } from '../../../workers/ranking/none-of-these.js';
import { readCarbonObservations, readProtonObservations, UNKNOWN_HYDROGENS } from '../../../workers/ranking/observations.js';
import { createPosterior } from '../../../workers/ranking/posterior.js';
import { SCORE_MODEL } from '../../../workers/ranking/score-model.js';
import { logGamma, StudentT } from '../../../workers/ranking/student-t.js';

/** DP4 13C parameters, SCIENCE.md 8.2 (Smith & Goodman, J. Am. Chem. Soc. 2010, 132, 12946, from memory). */
const SIGMA = 2.306;
const density = new StudentT(11.38);
const logLikelihood = (errors: readonly number[]): number => -errors.reduce((sum, error) => sum + density.cost(error, SIGMA), 0);
const logSumExp = (...values: readonly number[]): number => Math.log(values.reduce((sum, value) => sum + Math.exp(value), 0));

const A = logLikelihood([0.5, 1.0, -1.5, 2.0, -0.5]);
const B = logLikelihood([1.0, -2.5, 4.0, -3.0, 1.5]);
const C = logLikelihood([6, -8, 5, 9, -7]);
const D = logLikelihood([10, 12, -9, 8, -11]);

const posterior = (none: number, ...scores: readonly number[]) =>
  createPosterior({ logSumExp: logSumExp(...scores), survivorCount: scores.length, noneOfTheseLogLikelihood: none, noneOfThesePrior: 0.1 });

describe('posterior', () => {
  it('reproduces the likelihoods of the worked example (SCIENCE.md 8.3)', () => {
    expect(Math.exp(A) / 6.4e-5).toBeCloseTo(1, 2);
    expect(Math.exp(B) / 5.4e-6).toBeCloseTo(1, 2);
    expect(Math.exp(C) / 1.38e-12).toBeCloseTo(1, 2);
    expect(Math.exp(D) / 1.18e-17).toBeCloseTo(1, 2);
  });

  it('gives the stated probabilities for a list that fits and for one that does not (SCIENCE.md 8.3, priors 0.45/0.45/0.10)', () => {
    const uniform = 5 * Math.log(1 / 220);
    const regions = 5 * Math.log(1 / 40);
    const good = posterior(uniform, A, B);
    expect(good.probabilityOf(A)).toBeCloseTo(0.922, 3);
    expect(good.probabilityOf(B)).toBeCloseTo(0.078, 3);
    expect(posterior(uniform, C, D).probabilityOf(C)).toBeCloseTo(0.76, 2);
    expect(posterior(regions, C, D).noneOfTheseProbability).toBeCloseTo(0.999, 3);
  });

  it('adds up to one over survivors and none of them, whatever the size of the scores', () => {
    for (const offset of [-5000, 0, 5000]) {
      const scores = [0, -1, -2.5, -30].map((score) => score + offset);
      const highest = Math.max(...scores);
      const total = highest + logSumExp(...scores.map((score) => score - highest));
      const p = createPosterior({ logSumExp: total, survivorCount: 4, noneOfTheseLogLikelihood: offset - 1, noneOfThesePrior: 0.1 });
      expect(scores.reduce((sum, score) => sum + p.probabilityOf(score), p.noneOfTheseProbability)).toBeCloseTo(1, 9);
    }
  });

  it('is sure of "none of these" when nothing survived', () => {
    const p = createPosterior({ logSumExp: null, survivorCount: 0, noneOfTheseLogLikelihood: -50, noneOfThesePrior: 0.1 });
    expect(p.noneOfTheseProbability).toBe(1);
  });
});

describe('none of these', () => {
  it('spreads each signal over where its type lies: a density that integrates to one', () => {
    for (const hydrogens of [0, 1, 2, 3, UNKNOWN_HYDROGENS]) {
      let sum = 0;
      for (let shift = -39.5; shift < 260; shift++) sum += Math.exp(-anyCarbonCost(shift, hydrogens));
      expect(sum).toBeCloseTo(1, 6);
    }
    expect(anyCarbonCost(170, 0)).toBeLessThan(anyCarbonCost(170, 3));
  });

  it('counts 13C and 1H signals, tempered like the scores', () => {
    const evidence = evidenceDocument.parse({
      formula: 'C2H6O',
      carbonSignals: [{ shift: 58.3, hydrogens: 2 }],
      protonSignals: [{ shift: 3.7 }],
    });
    const carbons = readCarbonObservations(evidence);
    const none = readProtonObservations(evidenceDocument.parse({ formula: 'C2H6O' }));
    const both = noneOfTheseLogLikelihood(carbons, readProtonObservations(evidence), SCORE_MODEL);
    expect(noneOfTheseLogLikelihood(carbons, none, SCORE_MODEL)).toBeCloseTo(-anyCarbonCost(58.3, 2) / SCORE_MODEL.temperature.carbon, 9);
    expect(both).toBeLessThan(noneOfTheseLogLikelihood(carbons, none, SCORE_MODEL));
  });
});

describe('StudentT', () => {
  it('has the density of a Student t (Cauchy for ν = 1, in closed form) and nearly a normal one for large ν', () => {
    expect(new StudentT(1).cost(1.5, 1)).toBeCloseTo(Math.log(Math.PI * (1 + 2.25)), 9);
    expect(new StudentT(1e6).cost(1.5, 1)).toBeCloseTo(0.5 * Math.log(2 * Math.PI) + 1.125, 5);
    expect(new StudentT(4).cost(3, 2)).toBeCloseTo(new StudentT(4).cost(1.5, 1) + Math.log(2), 9);
  });

  it('uses a log gamma that gives factorials and the square root of π', () => {
    expect(Math.exp(logGamma(6))).toBeCloseTo(120, 8);
    expect(Math.exp(2 * logGamma(0.5))).toBeCloseTo(Math.PI, 9);
  });
});
