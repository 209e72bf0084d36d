import { describe, expect, it } from 'vitest';
import type { z } from 'zod';
import { type carbonWindow, evidenceDocument, type EvidenceInput } from '../../../shared/schemas/evidence.js';
import { createEvaluator, explainEvaluation } from '../../../workers/ranking/evaluator.js';
import { describeReason } from '../../../workers/ranking/reasons.js';
import { correlationEvidenceOf } from '../../support/correlation-evidence.js';
import { graphOf } from '../../support/graph-of.js';

const LIST = { keep: 10, maxSeconds: null, mode: 'list' } as const;
const evaluate = (input: EvidenceInput, smiles: string) => createEvaluator(evidenceDocument.parse(input), LIST).evaluate(graphOf(smiles));
const explain = (input: EvidenceInput, smiles: string) => explainEvaluation(evidenceDocument.parse(input), LIST, graphOf(smiles));

/** An ester of four kinds of carbon; its isomer has the ester the other way round. */
const ester = graphOf('CCC(=O)OC');
const isomer = 'CCOC(C)=O';
const base: EvidenceInput = { formula: 'C4H8O2', ...correlationEvidenceOf(ester), options: { plausibility: false } };

describe('2D pairs on a finished structure', () => {
  it('reject an isomer that has the same carbons but not the same neighbours', () => {
    expect(evaluate(base, 'CCC(=O)OC').kind).toBe('scored');
    expect(evaluate(base, isomer)).toMatchObject({ kind: 'rejected', stage: 'signals', reason: 'signals:correlations' });
    expect(describeReason('signals:correlations')).toContain('COSY and HMBC');
  });

  it('name the pairs that the best assignment leaves unmet, with the atoms of both ends', () => {
    const explained = explain(base, isomer);
    if (explained.kind !== 'rejected') throw new Error('survives');
    expect(explained.stage).toBe('signals');
    // One CH3 sees C=O over the ester oxygen in the ester only; all its other pairs the isomer has as well.
    expect(explained.reasons).toHaveLength(1);
    const [reason] = explained.reasons;
    expect(reason.reason).toMatch(/^signals:hmbc\[\d\]$/);
    expect(reason.text).toMatch(/^HMBC [\d.]+ → [\d.]+ cannot be met within 3 bonds together with the other pairs\.$/);
    expect(reason.atoms).toHaveLength(2);
    expect(explain(base, 'CCC(=O)OC').kind).toBe('survives');
  });

  it('know where carbons of diazo groups are found', () => {
    // A constructed case: at 30 ppm other carbons with one hydrogen are sp3, those of a diazo group sp2.
    const input: EvidenceInput = {
      formula: 'C2H4N2',
      carbonSignals: [{ shift: 10 }, { shift: 30, hydrogens: 1 }],
      protonSignals: [{ shift: 1.6 }, { shift: 3.3 }],
      correlations: { hsqc: [[10, 1.6]], hmbc: [[1.6, 30]] },
      options: { plausibility: false, shiftWindows: true },
    };
    expect(evaluate(input, 'CC=[N+]=[N-]').kind).toBe('scored');
  });

  it('reject a structure with fewer carbons with hydrogens than have an HSQC pair', () => {
    const input: EvidenceInput = {
      formula: 'C2H6O2S',
      carbonSignals: [{ shift: 25 }, { shift: 30 }],
      protonSignals: [{ shift: 1.4 }, { shift: 1.7 }],
      correlations: {
        hsqc: [
          [25, 1.4],
          [30, 1.7],
        ],
      },
      options: { plausibility: false },
    };
    expect(evaluate(input, 'CSOOC').kind).toBe('scored');
    expect(evaluate(input, 'CC(O)OS').kind).toBe('scored');
    expect(evaluate(input, 'CC(O)(O)S')).toMatchObject({ kind: 'rejected', reason: 'signals:tooFewProtonated:0' });
  });

  it('allow as many unmet pairs as there are exceptions, and longer distances where the limit is longer', () => {
    const { correlations } = correlationEvidenceOf(ester);
    expect(evaluate({ ...base, correlations: { ...correlations, exceptions: 1 } }, isomer).kind).toBe('scored');
    expect(evaluate({ ...base, correlations: { ...correlations, hmbcBonds: 4 } }, isomer).kind).toBe('scored');
  });

  it('say so when the signals of the pairs find no atoms at all', () => {
    const input: EvidenceInput = {
      formula: 'C4H8O2',
      carbonSignals: [{ shift: 30, hydrogens: 1 }, { shift: 60 }],
      protonSignals: [{ shift: 2 }, { shift: 4 }],
      correlations: {
        hsqc: [
          [30, 2],
          [60, 4],
        ],
        hmbc: [[2, 60]],
      },
      options: { plausibility: false, carbonList: 'partial' },
    };
    const explained = explain(input, 'CCC(=O)OC');
    if (explained.kind !== 'rejected') throw new Error('survives');
    expect(explained.reasons.at(-1)!.text).toContain('no atoms on which all signals');
  });

  it('lay signals only on carbons within their windows', () => {
    const input = (window: z.input<typeof carbonWindow>): EvidenceInput => ({
      formula: 'C4H8O2',
      carbonSignals: [
        { shift: 51.5, window },
        { shift: 174, hydrogens: 0 },
      ],
      protonSignals: [{ shift: 3.67 }],
      correlations: { hsqc: [[51.5, 3.67]], hmbc: [[3.67, 174]] },
      options: { plausibility: false, carbonList: 'partial' },
    });
    // The signal that sees C=O may be either CH3 or the CH2, but a carbon on oxygen is only one of them.
    expect(evaluate(input({ hybridisations: ['sp3'], heteroNeighbours: { min: 1 } }), 'CCC(=O)OC').kind).toBe('scored');
    expect(evaluate(input({ hybridisations: ['sp3'], heteroNeighbours: { min: 1 } }), 'CCC(=O)CO').kind).toBe('scored');
    expect(evaluate(input({ hybridisations: ['sp2'] }), 'CCC(=O)OC').kind).toBe('rejected');
  });

  it('take a COSY pair within one CH2 only where its hydrogens differ', () => {
    const geminal = (smiles: string) =>
      evaluate(
        {
          formula: 'C3H7NO2',
          carbonSignals: [{ shift: 64, hydrogens: 2 }],
          protonSignals: [{ shift: 3.5 }, { shift: 3.7 }],
          correlations: {
            hsqc: [
              [64, 3.5],
              [64, 3.7],
            ],
            cosy: [[3.5, 3.7]],
          },
          options: { plausibility: false, carbonList: 'partial' },
        },
        smiles,
      ).kind;
    // A stereocentre beside the CH2 tells its hydrogens apart (SCIENCE.md 2.5).
    expect(geminal('NC(CO)C=O')).toBe('scored');
    expect(geminal('OCC(N)=O')).toBe('rejected');
  });
});
