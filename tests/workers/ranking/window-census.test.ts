import { describe, expect, it } from 'vitest';
import { evidenceDocument, type EvidenceInput } from '../../../shared/schemas/evidence.js';
import { analyseStructure } from '../../../workers/graph/analysis.js';
import { Environments } from '../../../workers/ranking/environments.js';
import { createEvaluator, explainEvaluation } from '../../../workers/ranking/evaluator.js';
import { describeReason } from '../../../workers/ranking/reasons.js';
import { SignalBounds } from '../../../workers/ranking/signal-bounds.js';
import { SignalCensus, type SignalContradiction } from '../../../workers/ranking/signal-census.js';
import { graphOf } from '../../support/graph-of.js';

function judge(smiles: string, input: EvidenceInput): { first: string | null; all: SignalContradiction[] } {
  const census = new SignalCensus(evidenceDocument.parse(input));
  const structure = analyseStructure(graphOf(smiles));
  const environments = new Environments();
  environments.find(structure);
  const bounds = new SignalBounds();
  bounds.find(structure, environments);
  return { first: census.check(structure, environments, bounds), all: census.checkAll(structure, environments, bounds) };
}

const sp3 = { hybridisations: ['sp3' as const] };
const carbonyl = { hybridisations: ['sp2' as const], heteroNeighbours: { min: 1 } };

describe('windows of 13C signals at the finished structure', () => {
  // One constructed case for each reason.
  it.each<[string, string, EvidenceInput, string, readonly number[]]>([
    [
      'a signal that no carbon fits',
      'CC(C)=CCO',
      { formula: 'C5H10O', carbonSignals: [{ shift: 172.3, hydrogens: 0, window: carbonyl }], options: { carbonList: 'partial' } },
      'None of its quaternary carbons fits the ¹³C signal at 172.3 ppm (sp², bonded to at least 1 heteroatom).',
      [1],
    ],
    [
      'a signal for several carbons that too few fit',
      'CC(=O)CCO',
      {
        formula: 'C4H8O2',
        carbonSignals: [{ shift: 62, hydrogens: 2, count: 2, window: { ...sp3, heteroNeighbours: { min: 1, max: 1 } } }],
        options: { carbonList: 'partial' },
      },
      'Fewer than 2 of its CH₂ carbons fit the ¹³C signal at 62 ppm (sp³, bonded to 1 heteroatom).',
      [3, 4],
    ],
    [
      'a carbon with hydrogens that no signal of a complete list leaves room for',
      'C=CCC',
      {
        formula: 'C4H8',
        carbonSignals: [
          { shift: 14, hydrogens: 3 },
          { shift: 27, hydrogens: 2, window: sp3 },
          { shift: 140, hydrogens: 1 },
        ],
      },
      'It has CH₂ carbons that fit none of the CH₂ signals in the ¹³C list, taken as complete, with their windows of hybridisation and heteroatoms.',
      [0],
    ],
    [
      'two signals that ask for the same carbon',
      'CC(=O)CC=C',
      {
        formula: 'C5H8O',
        carbonSignals: [
          { shift: 207, window: carbonyl },
          { shift: 199, window: carbonyl },
        ],
      },
      'Its different carbons cannot be shared out among the ¹³C signals so that each lies in its window of hybridisation and heteroatoms.',
      [0, 1, 3, 4, 5],
    ],
    [
      'two signals that ask for equivalent carbons',
      'O=C1CCC(=O)CC1',
      {
        formula: 'C6H8O2',
        carbonSignals: [
          { shift: 208, hydrogens: 0, window: carbonyl },
          { shift: 207, window: carbonyl },
        ],
      },
      'Its different carbons cannot be shared out among the ¹³C signals so that each lies in its window of hybridisation and heteroatoms.',
      [1, 2, 3, 4, 6, 7],
    ],
  ])('rejects for %s', (_, smiles, input, sentence, atoms) => {
    const { first, all } = judge(smiles, input);
    expect(describeReason(first!)).toBe(sentence);
    expect(all.map(({ reason }) => describeReason(reason))).toContain(sentence);
    expect(all.find(({ reason }) => describeReason(reason) === sentence)!.atoms).toEqual(atoms);
  });

  it('rejects nothing where a window is taken away, and nothing for a signal that may be the solvent’s', () => {
    const input = (window: typeof carbonyl | null): EvidenceInput => ({
      formula: 'C5H10O',
      carbonSignals: [
        { shift: 77.2, hydrogens: 0, window },
        { shift: 135, hydrogens: 0, window },
      ],
      options: { carbonList: 'partial', shiftWindows: true },
    });
    expect(judge('CC(C)=CCO', input(null)).first).toBeNull();
    expect(describeReason(judge('CC(C)=CCO', input(carbonyl)).first!)).toContain('at 135 ppm');
  });

  it('derives windows only where the options ask for them', () => {
    // A ketone carbon is not found at 60 ppm, nor an sp3 carbon at 205 (SCIENCE.md 4.1).
    const input = (shiftWindows: boolean): EvidenceInput => ({
      formula: 'C5H10O',
      carbonSignals: [{ shift: 205, hydrogens: 0 }],
      options: { carbonList: 'partial', shiftWindows },
    });
    expect(judge('CC1(C)CCO1', input(false)).first).toBeNull();
    expect(describeReason(judge('CC1(C)CCO1', input(true)).first!)).toBe(
      'None of its quaternary carbons fits the ¹³C signal at 205 ppm (sp² or sp, bonded to at most 1 heteroatom).',
    );
    expect(judge('CCC(=O)CC', input(true)).first).toBeNull();
  });

  it('explains a rejection by the evaluator with the signal and its atoms', () => {
    const evidence = evidenceDocument.parse({
      formula: 'C3H6O',
      carbonSignals: [{ shift: 206, hydrogens: 0, window: carbonyl }],
      options: { carbonList: 'partial', plausibility: false },
    });
    const settings = { keep: 1, maxSeconds: null, mode: 'list' } as const;
    expect(createEvaluator(evidence, settings).evaluate(graphOf('C=C(O)C')).kind).toBe('scored');
    const explanation = explainEvaluation(evidence, settings, graphOf('CC1CO1'));
    expect(explanation).toMatchObject({ kind: 'rejected', stage: 'signals' });
    expect(explanation.kind === 'rejected' && explanation.reasons.map(({ text }) => text)).toContain(
      'None of its quaternary carbons fits the ¹³C signal at 206 ppm (sp², bonded to at least 1 heteroatom).',
    );
  });
});
