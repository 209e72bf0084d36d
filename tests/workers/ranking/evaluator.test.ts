import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { RunSettings } from '../../../shared/jobs/contract.js';
import { evidenceDocument, type EvidenceInput } from '../../../shared/schemas/evidence.js';
import { createEvaluator, explainEvaluation } from '../../../workers/ranking/evaluator.js';
import { describeReason } from '../../../workers/ranking/reasons.js';
import { graphOf } from '../../support/graph-of.js';
import { permutationOf, relabelGraph } from '../../support/random-molecules.js';
import { REFERENCE_COMPOUNDS } from './reference-compounds.js';

const settings = (mode: RunSettings['mode']): RunSettings => ({ keep: 100, maxSeconds: null, mode });
const evaluate = (input: EvidenceInput, smiles: string, mode: RunSettings['mode'] = 'rank') =>
  createEvaluator(evidenceDocument.parse(input), settings(mode)).evaluate(graphOf(smiles));
const scoreOf = (input: EvidenceInput, graph = graphOf('CC')): number => {
  const evaluation = createEvaluator(evidenceDocument.parse(input), settings('rank')).evaluate(graph);
  if (evaluation.kind !== 'scored') throw new Error(`rejected: ${evaluation.reason}`);
  return evaluation.score;
};

describe('createEvaluator', () => {
  const butanol = REFERENCE_COMPOUNDS.find(({ name }) => name === '1-butanol')!;

  it('names the first stage that rejects, in the order of the funnel', () => {
    const everything: EvidenceInput = {
      formula: 'C7H10O2',
      fragments: { excluded: [{ smiles: 'OO' }] },
      options: { ringSizes: { min: 5 } },
      carbonSignals: [{ shift: 10, hydrogens: 3 }],
    };
    expect(evaluate(everything, 'C1CC2=CC1(OO)CC2')).toMatchObject({
      kind: 'rejected',
      stage: 'excludedFragments',
      reason: 'excludedFragment:OO',
    });
    expect(evaluate(everything, 'OC1(O)C2CC1CC=C2')).toMatchObject({ stage: 'ringSizes', reason: 'ringTooSmall' });
    expect(evaluate(everything, 'OC1(O)C2=CCC1CC2')).toMatchObject({ stage: 'plausibility', reason: 'plausibility:twistedRingAlkene' });
    expect(evaluate(everything, 'OC1C(O)C2CCC1=C2'.replace('C1=C2', 'C1C2'))).toMatchObject({ stage: 'signals' });
  });

  it('holds every ring of a minimum cycle basis to the limits', () => {
    const limited = (min: number, max: number | null): EvidenceInput => ({ formula: 'C10H18', options: { ringSizes: { min, max } } });
    expect(evaluate(limited(3, 6), 'C1CCC2CCCCC2C1').kind).toBe('scored');
    expect(evaluate(limited(3, 5), 'C1CCC2CCCCC2C1')).toMatchObject({ stage: 'ringSizes', reason: 'ringTooLarge' });
    expect(evaluate(limited(3, 5), 'C1CCC2CCCC2C1')).toMatchObject({ reason: 'ringTooLarge' });
    expect(evaluate(limited(6, null), 'C1CCC2CCCC2C1')).toMatchObject({ reason: 'ringTooSmall' });
    expect(evaluate(limited(5, 6), 'CCCCCC').kind).toBe('scored');
  });

  it('passes hard rules that are switched off', () => {
    const smiles = 'C1CC2=CC1CC2';
    expect(evaluate({ formula: 'C7H10' }, smiles).kind).toBe('rejected');
    expect(evaluate({ formula: 'C7H10', options: { disabledRules: ['twistedRingAlkene'] } }, smiles).kind).toBe('scored');
    expect(evaluate({ formula: 'C7H10', options: { plausibility: false } }, smiles).kind).toBe('scored');
  });

  it('filters but does not score when only counting or listing', () => {
    for (const mode of ['count', 'list'] as const) {
      expect(evaluate(butanol.evidence, 'CCCCO', mode)).toEqual({ kind: 'scored', score: 0, terms: {} });
      expect(evaluate(butanol.evidence, 'CCC(C)O', mode)).toMatchObject({ kind: 'rejected', stage: 'signals' });
    }
  });

  it('gives terms for the evidence there is, and their sum', () => {
    const evaluation = evaluate(butanol.evidence, 'CCCCO');
    if (evaluation.kind !== 'scored') throw new Error('rejected');
    expect(Object.keys(evaluation.terms).sort()).toEqual(['carbon13', 'integral', 'multiplicity', 'plausibility', 'proton1']);
    expect(Object.values(evaluation.terms).reduce((sum, term) => sum + term, 0)).toBeCloseTo(evaluation.score, 9);
    const carbonOnly = evaluate({ ...butanol.evidence, protonSignals: [], options: { plausibility: false } }, 'CCCCO');
    expect(carbonOnly.kind === 'scored' && Object.keys(carbonOnly.terms)).toEqual(['carbon13']);
  });

  it('does not depend on how the atoms are numbered nor on the order of the signals', () => {
    for (const { evidence, smiles } of REFERENCE_COMPOUNDS) {
      const graph = graphOf(smiles);
      const expected = scoreOf(evidence, graph);
      fc.assert(
        fc.property(
          fc.integer(),
          fc.shuffledSubarray(evidence.carbonSignals!, { minLength: evidence.carbonSignals!.length }),
          fc.shuffledSubarray(evidence.protonSignals!, { minLength: evidence.protonSignals!.length }),
          (seed, carbonSignals, protonSignals) => {
            const relabelled = relabelGraph(graph, permutationOf(graph.atomCount, seed));
            expect(scoreOf({ ...evidence, carbonSignals, protonSignals }, relabelled)).toBeCloseTo(expected, 9);
          },
        ),
        { numRuns: 8 },
      );
    }
  });

  it('scores again and again the same, whatever was scored before', () => {
    const evaluator = createEvaluator(evidenceDocument.parse(butanol.evidence), settings('rank'));
    const first = { ...evaluator.evaluate(graphOf('CCCCO')) };
    for (const other of ['CCOCC', 'CC(C)CO', 'CC(C)(C)O', 'COC(C)C']) evaluator.evaluate(graphOf(other));
    expect(evaluator.evaluate(graphOf('CCCCO'))).toEqual(first);
  });

  it('never removes the true structure or makes it worse by what is truly known less', () => {
    // Metamorphic: dropping the attached hydrogens or the 1H list leaves every reference compound in the list.
    for (const { evidence, smiles, name } of REFERENCE_COMPOUNDS) {
      const untyped = { ...evidence, carbonSignals: evidence.carbonSignals!.map(({ shift }) => ({ shift })) };
      for (const input of [evidence, untyped, { ...evidence, protonSignals: [] }, { ...evidence, carbonSignals: [] }])
        expect(evaluate(input, smiles).kind, name).toBe('scored');
    }
  });
});

describe('explainEvaluation', () => {
  it('lists every reason of every stage with its atoms, the first stage first', () => {
    const evidence = evidenceDocument.parse({
      formula: 'C7H10O2',
      fragments: { excluded: [{ smiles: 'OO' }] },
      options: { ringSizes: { min: 6 } },
      carbonSignals: [{ shift: 10, hydrogens: 3 }],
    });
    const explanation = explainEvaluation(evidence, settings('rank'), graphOf('C1CC2=CC1(OO)CC2'));
    if (explanation.kind !== 'rejected') throw new Error('survives');
    expect(explanation.stage).toBe('excludedFragments');
    expect(explanation.reasons.map(({ reason }) => reason)).toEqual([
      'excludedFragment:OO',
      'ringTooSmall',
      'plausibility:twistedRingAlkene',
      'signals:carbonAbsent:1',
      'signals:carbonAbsent:2',
      'signals:tooFewCarbons:3',
    ]);
    const atomsOf = (reason: string): number[] =>
      [...explanation.reasons.find((entry) => entry.reason === reason)!.atoms].sort((a, b) => a - b);
    expect(atomsOf('excludedFragment:OO')).toEqual([5, 6]);
    expect(atomsOf('plausibility:twistedRingAlkene')).toEqual([2, 3]);
    expect(atomsOf('signals:carbonAbsent:1')).toEqual([3]);
    for (const { reason, text } of explanation.reasons) expect(text).toBe(describeReason(reason));
  });

  it('gives the score of a structure that survives, the same as in the run', () => {
    for (const { evidence, smiles } of REFERENCE_COMPOUNDS) {
      const explanation = explainEvaluation(evidenceDocument.parse(evidence), settings('rank'), graphOf(smiles));
      expect(explanation).toMatchObject({ kind: 'survives', score: scoreOf(evidence, graphOf(smiles)) });
    }
  });
});

describe('describeReason', () => {
  it('refuses codes that no stage gives', () => {
    expect(() => describeReason('plausibility:nonsense')).toThrow(RangeError);
    expect(() => describeReason('signals:nonsense:1')).toThrow(RangeError);
  });
});
