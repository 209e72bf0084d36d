import { describe, expect, it } from 'vitest';
import { fitCautions } from '../../../../src/features/ranking/components/fit-caution.js';

// A list of wrong structures can have a clear winner: SCIENCE.md 8.3, "show absolute fit next to every probability".
describe('cautions about the absolute fit', () => {
  it('are silent for a usual fit', () => {
    expect(fitCautions({ isComplete: true, noneOfTheseProbability: 0.04, carbonDeviation: 1.6, protonDeviation: 0.12 })).toEqual([]);
    expect(fitCautions({ isComplete: true, noneOfTheseProbability: null, carbonDeviation: null, protonDeviation: null })).toEqual([]);
  });

  it('say it first when none of the structures is likely to be right', () => {
    const cautions = fitCautions({ isComplete: true, noneOfTheseProbability: 0.83, carbonDeviation: 7.2, protonDeviation: 0.1 });
    expect(cautions).toHaveLength(2);
    expect(cautions[0]).toContain('83');
    expect(cautions[0]).toContain('none of these');
    expect(cautions[0]).not.toContain('run it to the end');
  });

  it('name the missing part of the search first when the run was stopped', () => {
    const [first] = fitCautions({ isComplete: false, noneOfTheseProbability: 0.58, carbonDeviation: 1.6, protonDeviation: null });
    expect(first).toContain('did not reach every constitution: run it to the end');
  });

  it('look at the misfit even where the probabilities look settled', () => {
    const cautions = fitCautions({ isComplete: true, noneOfTheseProbability: 0.01, carbonDeviation: 4.4, protonDeviation: 0.52 });
    expect(cautions.map((text) => /¹³C|¹H/.exec(text)?.[0])).toEqual(['¹³C', '¹H']);
  });
});
