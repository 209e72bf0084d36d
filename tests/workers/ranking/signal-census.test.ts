import { describe, expect, it } from 'vitest';
import { evidenceDocument, type EvidenceInput } from '../../../shared/schemas/evidence.js';
import type { MolecularGraph } from '../../../shared/types/molecular-graph.js';
import { analyseStructure } from '../../../workers/graph/analysis.js';
import { findEquivalence } from '../../../workers/graph/equivalence.js';
import { Environments } from '../../../workers/ranking/environments.js';
import { describeReason } from '../../../workers/ranking/reasons.js';
import { SignalBounds } from '../../../workers/ranking/signal-bounds.js';
import { SignalCensus, type SignalContradiction } from '../../../workers/ranking/signal-census.js';
import { graphOf } from '../../support/graph-of.js';
import { readOutsideLines } from './outside-lines.js';

type Signals = Pick<EvidenceInput, 'carbonSignals' | 'protonSignals' | 'options'>;

function judge(smiles: string, signals: Signals): { first: string | null; all: SignalContradiction[] } {
  const census = new SignalCensus(evidenceDocument.parse({ formula: '?', ...signals }));
  const structure = analyseStructure(graphOf(smiles));
  const environments = new Environments();
  environments.find(structure);
  const bounds = new SignalBounds();
  bounds.find(structure, environments);
  return { first: census.check(structure, environments, bounds), all: census.checkAll(structure, environments, bounds) };
}

const carbons = (...list: readonly (readonly [shift: number, hydrogens?: number, count?: number])[]): Signals['carbonSignals'] =>
  list.map(([shift, hydrogens, count]) => ({
    shift,
    ...(hydrogens === undefined ? {} : { hydrogens }),
    ...(count === undefined ? {} : { count }),
  }));

describe('SignalCensus', () => {
  // One constructed case for each reason: what the structure must have less or more of, and on which atoms.
  it.each<[string, string, Signals, string, readonly number[]]>([
    [
      'more carbons under the signals of a type than there are',
      'CCCC(=O)O',
      { carbonSignals: carbons([14, 3, 2], [20, 2], [36, 2]) },
      'signals:tooFewCarbons:3',
      [0],
    ],
    ['more signals of any type than carbons', 'CC(=O)O', { carbonSignals: carbons([20], [60], [170]) }, 'signals:tooFewCarbons:4', [0, 1]],
    [
      'a type without any signal in a complete list',
      'CC(C)C(=O)O',
      { carbonSignals: carbons([19, 3], [20, 3]) },
      'signals:carbonAbsent:1',
      [1],
    ],
    [
      'more carbons than a complete list with counts stands for',
      'CCCCO',
      { carbonSignals: carbons([62, 2, 1], [19, 2, 1], [14, 3, 1]) },
      'signals:carbonCount:2',
      [1, 2, 3],
    ],
    [
      'fewer different carbons than signals',
      'CC(C)CO',
      { carbonSignals: carbons([70, 2], [31, 1], [19, 3], [23, 3]) },
      'signals:carbonEnvironments:3',
      [0, 2],
    ],
    [
      'fewer different carbons than signals without known hydrogens',
      'Cc1ccc(C)cc1',
      { carbonSignals: carbons([21], [129], [134], [140]) },
      'signals:carbonEnvironments:4',
      [0, 1, 2, 3, 4, 5, 6, 7],
    ],
    [
      'more equivalent carbons than any signal stands for',
      'Cc1ccc(C)cc1',
      { carbonSignals: carbons([129, 1, 2], [130, 1, 2], [21, 3]) },
      'signals:carbonEnvironments:1',
      [2, 3, 6, 7],
    ],
    [
      'equivalent carbons that the counts keep apart',
      'CC(C)(C)CC(C)=O',
      { carbonSignals: carbons([56, 2], [31, 3, 2], [30, 3, 2]) },
      'signals:equivalentCarbons:3',
      [0, 2, 3, 6],
    ],
    [
      'fewer different hydrogens than ¹H signals',
      'CCOCC',
      { protonSignals: [{ shift: 3.5 }, { shift: 1.2 }, { shift: 2.0 }, { shift: 2.2 }] },
      'signals:protonEnvironments:4',
      [0, 1, 3, 4],
    ],
    [
      'fewer exchangeable hydrogens than marked',
      'CCOCC',
      { protonSignals: [{ shift: 2.5, count: 1, exchangeable: true }] },
      'signals:exchangeableProtons:4',
      [],
    ],
    [
      'hydrogen on phosphorus, which does not exchange, where an exchangeable one is marked',
      'C[PH](C)=O',
      { protonSignals: [{ shift: 6.9, count: 1, exchangeable: true }] },
      'signals:exchangeableProtons:4',
      [],
    ],
    [
      'fewer hydrogens on carbon than marked',
      'CO',
      { protonSignals: [{ shift: 3.4, count: 4, exchangeable: false }] },
      'signals:boundProtons:4',
      [0],
    ],
  ])('rejects %s', (_, smiles, signals, reason, atoms) => {
    const { first, all } = judge(smiles, signals);
    expect(first).toBe(reason);
    expect(all[0]).toEqual({ reason, atoms: [...atoms] });
    expect(describeReason(reason)).toMatch(/^(It|Symmetry) .+\.$/);
  });

  it('lets a structure pass that has what the signals show', () => {
    expect(
      judge('CCC(=O)OC', {
        carbonSignals: carbons([27, 2], [9, 3], [51, 3], [174, 0]),
        protonSignals: [{ shift: 3.6, count: 3, exchangeable: false }],
      }).first,
    ).toBeNull();
  });

  it('lets quaternary carbons be missing, and any carbon when the list is partial', () => {
    expect(judge('CC(=O)C', { carbonSignals: carbons([30, 3]) }).first).toBeNull();
    expect(judge('CCC', { carbonSignals: carbons([16, 3]) }).first).toBe('signals:carbonAbsent:2');
    expect(judge('CCC', { carbonSignals: carbons([16, 3]), options: { carbonList: 'partial' } }).first).toBeNull();
    expect(judge('CCC', { carbonSignals: carbons([16, 3], [16.1]) }).first).toBeNull();
  });

  it('allows two signals to groups that only stereochemistry tells apart (SCIENCE.md 2.5)', () => {
    // Isopropyl beside a stereocentre; the CH2 hydrogens of 2-butanol and of an acetal; =CH2 of styrene.
    expect(judge('CC(C)C(O)C', { carbonSignals: carbons([18, 3], [19, 3], [20, 3], [35, 1], [72, 1]) }).first).toBeNull();
    const protons = (count: number): Signals => ({ protonSignals: Array.from({ length: count }, (_, i) => ({ shift: 1 + i })) });
    expect(judge('CCC(C)O', protons(6)).first).toBeNull();
    expect(judge('CCOC(C)OCC', protons(5)).first).toBeNull();
    expect(judge('C=Cc1ccccc1', protons(6)).first).toBeNull();
    // Ethanol: homotopic CH3, enantiotopic CH2, OH.
    expect(judge('CCO', protons(3)).first).toBeNull();
    expect(judge('CCO', protons(4)).first).toBe('signals:protonEnvironments:4');
  });

  it('allows two methyl signals to a dimethylamide (SCIENCE.md 11, row 21: DMF)', () => {
    expect(judge('CN(C)C=O', { carbonSignals: carbons([162.62, 1], [36.5, 3], [31.45, 3]) }).first).toBeNull();
  });
});

describe('SignalBounds', () => {
  const structures = [
    'CC(C)C(O)C(C)C',
    'CC(N)C(C)(C)C',
    'CC1CCC(C)(C)CC1',
    'CC(C)=CC',
    'CC(C)=NO',
    'Cc1ccccc1',
    'CC(O)c1ccccc1',
    'CC(C)CC(C)O',
    'CCOC(=O)CC(=O)OCC',
    'OCC(O)CO',
    'C=CC',
    'C=C(C)C',
    'CC1CCCCC1',
    'CS(=O)CC',
    'CP(=O)(OCC)OCC',
    'CC(C)N(C)C',
    'CC(C)(C)OC',
  ];

  /** Most carbon and proton signals by the bounds and by the exact test. */
  function compare(graph: MolecularGraph): { bound: [number, number]; exact: [number, number] } {
    const structure = analyseStructure(graph);
    const environments = new Environments();
    environments.find(structure);
    const bounds = new SignalBounds();
    bounds.find(structure, environments);
    const equivalence = findEquivalence(graph, structure);
    const isCarbon = (atom: number): boolean => graph.atomicNumbers[atom] === 6;
    const carbonClasses = new Set(Array.from(equivalence.shiftClasses).filter((_, atom) => isCarbon(atom)));
    const sum = (list: Uint8Array): number => list.subarray(0, environments.classCount).reduce((total, value) => total + value, 0);
    const kinds = new Map<number, number>();
    for (let atom = 0; atom < graph.atomCount; atom++) {
      if (graph.hydrogens[atom] === 0) continue;
      const own = isCarbon(atom) ? (equivalence.hydrogenTopicity[atom] === 'diastereotopic' ? 2 : 1) : Math.min(graph.hydrogens[atom], 2);
      kinds.set(equivalence.shiftClasses[atom], Math.max(kinds.get(equivalence.shiftClasses[atom]) ?? 0, own));
    }
    const protonSignals = [...kinds.values()].reduce((total, value) => total + value, 0);
    return { bound: [sum(bounds.carbonSignals), sum(bounds.protonSignals)], exact: [carbonClasses.size, protonSignals] };
  }

  it.each(structures)('%s: as many signals as the exact substitution test gives', (smiles) => {
    const { bound, exact } = compare(graphOf(smiles));
    expect(bound).toEqual(exact);
  });

  it.each(['C1COC2(C1)CCCO2', 'C1CC2(C1)CO2', 'C1CC2CCC1C2', 'OC1CC(O)CC(O)C1', 'C1CC2CC12', 'CC1CN1C', 'NC(=O)N(C)C'])(
    '%s: rather more signals than fewer',
    (smiles) => {
      const { bound, exact } = compare(graphOf(smiles));
      expect(bound[0]).toBeGreaterThanOrEqual(exact[0]);
      expect(bound[1]).toBeGreaterThanOrEqual(exact[1]);
    },
  );
});

describe('hard filters on measured spectra', () => {
  const cases = readOutsideLines<{ truth: string; variant: string; evidence: EvidenceInput }>('data/nmr/evidence-train.jsonl.gz', 5);

  it.skipIf(cases === null)('keep the true structure in at least 99.5 % of the cases (nmrshiftdb2, see the README of the data)', () => {
    let judged = 0;
    let rejected = 0;
    for (const { truth, variant, evidence } of cases!) {
      if (variant !== 'spectra') continue;
      judged++;
      if (judge(truth, evidence as Signals).first !== null) rejected++;
    }
    expect(judged).toBeGreaterThan(2000);
    expect(rejected / judged).toBeLessThan(0.005);
  });
});
