import { describe, expect, it } from 'vitest';
import { PLAUSIBILITY_RULES, type PlausibilityRuleId } from '../../../shared/plausibility/rules.js';
import { evidenceDocument } from '../../../shared/schemas/evidence.js';
import { analyseStructure } from '../../../workers/graph/analysis.js';
import { selectRules } from '../../../workers/ranking/plausibility/active-rules.js';
import { graphOf } from '../../support/graph-of.js';
import { permutationOf, randomMolecule, relabelGraph } from '../../support/random-molecules.js';

/** With an unreadable formula every rule stays on. */
const everyRule = (options: object = {}) => {
  const evidence = evidenceDocument.parse({ formula: '?', options });
  const { hard, soft } = selectRules(evidence);
  return [...hard, ...soft];
};

function occurrences(id: string, smiles: string): { count: number; atoms: number[][] } {
  const active = everyRule().find(({ rule }) => rule.id === id);
  if (active === undefined) throw new Error(`no rule ${id}`);
  const atoms: number[][] = [];
  const count = active.test(analyseStructure(graphOf(smiles)), (found) => atoms.push([...found]));
  return { count, atoms };
}

/**
 * One structure that each rule must find (with the atoms it names) and near neighbours that it must let pass. The rules
 * and their exceptions: SCIENCE.md 2.4 and 2.3, common practice.
 */
const CASES: Readonly<
  Record<PlausibilityRuleId, { finds: readonly [smiles: string, atoms: readonly number[]]; passes: readonly string[] }>
> = {
  // Cyclooctyne keeps, cycloheptyne does not; ring electrons of benzyne count as aromatic.
  alkyneInSmallRing: { finds: ['C1CCCCC#C1', [5, 6]], passes: ['C1CCCCCC#C1', 'CC#CC', 'C1CCCCCCC1C#C'] },
  alleneInSmallRing: { finds: ['C1CCCCC=C=C1', [5, 6, 7]], passes: ['C1CCCCCC=C=C1', 'CC=C=CC', 'C1CC1C=C=C'] },
  // Bredt: norbornene at the bridgehead; a fused ring with C=C at the fusion and trans-cyclooctene size bridges pass.
  twistedRingAlkene: {
    finds: ['C1CC2=CC1CC2', [2, 3]],
    passes: ['C1CC2CC1C=C2', 'C1CCC2=CCCCC2C1', 'C1CCC2=C(C1)CCCC2', 'C1CC2CCCC=C(C1)CCC2', 'c1ccc2c(c1)CCC2', 'C1c2ccccc21'],
  },
  // [5]Metacyclophane and [5]paracyclophane have been made; julolidine, acenaphthene and fluorene have bridges from ortho.
  bridgedArene: {
    finds: ['c1cc2CCCCc(c1)c2', [2, 7]],
    passes: [
      'c1cc2CCCCCc(c1)c2',
      'C1Cc2ccccc2C1',
      'C1Cc2cccc3c2N(C1)CCC3',
      'C1Cc2cccc3cccc1c23',
      'C1c2ccccc2-c2ccccc12',
      'c1ccc2c(c1)[nH]c1ccccc12',
    ],
  },
  alkyneInMediumRing: { finds: ['C1CCCCCC#C1', [6, 7]], passes: ['C1CCCCCCCCCC#C1', 'CC#CC', 'C1CCCCCCC1C#C'] },
  heterocumuleneInSmallRing: { finds: ['C1CCN=C=NC1', [3, 4, 5]], passes: ['CN=C=NC', 'C1CCCCCN=C=N1'] },
  cumulatedDoubleBonds: {
    finds: ['CC=C=NC', [1, 2, 3]],
    passes: ['C=C=C', 'CC=C=O', 'CN=C=O', 'CN=C=S', 'CN=C=NC', 'CN=[N+]=[N-]', 'CC=[N+]=[N-]', 'CS(C)(=O)=O'],
  },
  peroxide: { finds: ['COOC', [1, 2]], passes: ['COCOC', 'C1OCCO1'] },
  nitrogenOxygenBond: {
    finds: ['CN(C)OC', [1, 3]],
    passes: ['C[N+](=O)[O-]', 'CC=NO', 'CC=NOC', 'c1cnoc1', 'C[N+](C)(C)[O-]', 'CC(=O)NO', 'CN=O'],
  },
  nitrogenChain: { finds: ['CN(C)N(C)N(C)C', [1, 3, 5]], passes: ['CNNC', 'CN=NC', 'c1cn[nH]n1', 'CN=[N+]=[N-]'] },
  heteroatomHalogen: { finds: ['CN(C)Cl', [1, 3]], passes: ['CCl', 'CS(=O)(=O)Cl', 'NCCCl'] },
  geminalDiol: { finds: ['CCC(O)O', [2]], passes: ['OC(O)C(Cl)(Cl)Cl', 'CC(=O)O', 'OCCO'] },
  hemiacetal: { finds: ['CC(O)OC', [1]], passes: ['OC1CCCCO1', 'OC1CCCO1', 'CC(OC)OC'] },
  geminalAminoAlcohol: { finds: ['CC(O)NC', [1]], passes: ['OCNC(C)=O', 'OCCN'] },
  geminalDiamine: { finds: ['CC(NC)NC', [1]], passes: ['CN(C)CN(C)C', 'CC(=O)NCNC(C)=O', 'NCCN'] },
  enol: { finds: ['CC=CO', [1, 2, 3]], passes: ['Oc1ccccc1', 'CC(O)=CC(C)=O', 'CC=CCO'] },
  enamine: { finds: ['CC=CNC', [1, 2, 3]], passes: ['CC=CN(C)C', 'CC(=O)C=CNC', 'Nc1ccccc1', 'c1cc[nH]c1', 'CC=CNC(C)=O'] },
  enethiol: { finds: ['CC=CS', [1, 2, 3]], passes: ['Sc1ccccc1', 'CC=CCS', 'CC=CSC'] },
  imidicAcid: { finds: ['CC(O)=NC', [1, 2, 3]], passes: ['CC(=O)NC', 'COC(C)=NC', 'Oc1ccccn1'] },
  nitrosoWithHydrogen: { finds: ['CCN=O', [1, 2, 3]], passes: ['CC(C)(C)N=O', 'CC=NO', 'O=Nc1ccccc1', 'CN(C)N=O'] },
  unsubstitutedImine: { finds: ['CC(C)=N', [1, 3]], passes: ['CC(N)=N', 'CC(OC)=N', 'CC(C)=NC'] },
  thioaldehyde: { finds: ['CC=S', [1, 2]], passes: ['NC=S', 'CC(C)=S'] },
  thioketone: { finds: ['CC(C)=S', [1, 3]], passes: ['CC(N)=S', 'COC(C)=S', 'CN=C=S', 'CC=S'] },
  // Cyclobutadiene; benzene, quinone and 1,4-dioxin pass.
  antiaromaticRing: {
    finds: ['C1=CC=C1', [0, 1, 2, 3]],
    passes: ['c1ccccc1', 'O=C1C=CC(=O)C=C1', 'O1C=COC=C1', 'C1=CCC=C1', 'O=C1C=CC=CC=C1', 'C1=CC=CC=C1'],
  },
  threeMemberedRing: { finds: ['CC1CO1', [1, 2, 3]], passes: ['C1CCC1', 'CC'] },
  fourMemberedRing: { finds: ['CC1CCO1', [1, 2, 3, 4]], passes: ['C1CC1', 'C1CCCC1'] },
  smallRingAlkene: { finds: ['CC1=CC1', [1, 2]], passes: ['C=C1CC1', 'C1=CCCC1'] },
  fusedSmallRings: { finds: ['C1C2CC12', [1, 3]], passes: ['C1CC1C1CC1', 'C1CC12CC2', 'C1CCC2CC12'] },
  acylHalideWithNucleophile: { finds: ['OCCC(=O)Cl', [0, 3]], passes: ['CCC(=O)Cl', 'OCCCCl', 'OC(=O)CCl'] },
  aldehydeWithAmine: { finds: ['NCCC=O', [0, 3]], passes: ['Nc1ccccc1C=O', 'NCCC(C)=O', 'CN(C)CC=O', 'NC=O'] },
  isocyanateWithNucleophile: { finds: ['OCCN=C=O', [0, 4]], passes: ['CCN=C=O', 'OCCNC=O'] },
  carbamicAcid: { finds: ['CNC(=O)O', [1, 2, 4]], passes: ['CNC(=O)OC', 'NCC(=O)O'] },
  betaKetoAcid: { finds: ['CC(=O)CC(=O)O', [1, 3, 4]], passes: ['CC(=O)CCC(=O)O', 'OC(=O)CC(=O)O', 'CC(=O)CC(=O)OC'] },
  carbonicHalfEster: { finds: ['COC(=O)O', [1, 2, 4]], passes: ['COC(=O)OC', 'COCC(=O)O'] },
  orthoacid: { finds: ['COC(C)(O)OC', [2]], passes: ['COC(C)(OC)OC', 'CC(O)OC'] },
  alphaHaloHeteroatom: { finds: ['COCCl', [1, 2]], passes: ['COC(F)(F)F', 'CC(=O)OCCl', 'COCCCl', 'ClC[N+](=O)[O-]'] },
};

describe('plausibility rules', () => {
  it.each(PLAUSIBILITY_RULES.map(({ id, title }) => [id, title] as const))(
    '%s (%s): finds it, names its atoms and lets its neighbours pass',
    (id) => {
      const { finds, passes } = CASES[id];
      const found = occurrences(id, finds[0]);
      expect(found.count, finds[0]).toBe(1);
      expect([...found.atoms[0]].sort((a, b) => a - b)).toEqual([...finds[1]]);
      for (const smiles of passes) expect(occurrences(id, smiles).count, smiles).toBe(0);
    },
  );

  it('finds a triple bond in a six-membered ring whose electrons count as aromatic', () => {
    expect(occurrences('alkyneInSmallRing', 'C1=CC=CC#C1').count).toBe(1);
    expect(occurrences('alleneInSmallRing', 'C1=C=C=CC=C1').count).toBe(2);
  });

  it('counts every small ring: two three-membered ones cost twice', () => {
    expect(occurrences('threeMemberedRing', 'C1CC1C1CC1').count).toBe(2);
    expect(occurrences('fourMemberedRing', 'C1CC2(C1)CCC2').count).toBe(2);
  });

  it('can be switched off one by one and all together', () => {
    expect(everyRule({ disabledRules: ['peroxide', 'twistedRingAlkene'] }).map(({ rule }) => rule.id)).not.toContain('peroxide');
    expect(everyRule({ disabledRules: ['peroxide', 'twistedRingAlkene'] })).toHaveLength(PLAUSIBILITY_RULES.length - 2);
    expect(everyRule({ plausibility: false })).toHaveLength(0);
  });

  it('leaves out rules for which the formula has no elements, and no other', () => {
    const active = selectRules(evidenceDocument.parse({ formula: 'C6H12O' }));
    const ids = [...active.hard, ...active.soft].map(({ rule }) => rule.id);
    expect(ids).toContain('enol');
    expect(ids).not.toContain('peroxide');
    for (let seed = 0; seed < 300; seed++) {
      const graph = randomMolecule(seed);
      const structure = analyseStructure(graph);
      const formula = formulaOf(graph.atomicNumbers);
      const chosen = selectRules(evidenceDocument.parse({ formula }));
      const applied = new Set([...chosen.hard, ...chosen.soft].map(({ rule }) => rule.id));
      for (const { rule, test } of everyRule())
        if (test(structure, null) > 0) expect(applied, `${rule.id} in ${formula}`).toContain(rule.id);
    }
  });

  it('does not depend on how the atoms are numbered', () => {
    for (let seed = 0; seed < 300; seed++) {
      const graph = randomMolecule(seed);
      const relabelled = relabelGraph(graph, permutationOf(graph.atomCount, seed));
      for (const { rule, test } of everyRule()) {
        // Of equal pairs the first one found is named; which one that is may differ, their number may not.
        expect(test(analyseStructure(relabelled), null), `${rule.id} seed ${seed}`).toBe(test(analyseStructure(graph), null));
      }
    }
  });
});

const SYMBOLS: Readonly<Record<number, string>> = {
  6: 'C',
  7: 'N',
  8: 'O',
  9: 'F',
  14: 'Si',
  15: 'P',
  16: 'S',
  17: 'Cl',
  35: 'Br',
  53: 'I',
};
function formulaOf(atomicNumbers: Uint8Array): string {
  const counts = new Map<string, number>();
  for (const z of atomicNumbers) counts.set(SYMBOLS[z], (counts.get(SYMBOLS[z]) ?? 0) + 1);
  return [...counts].map(([symbol, count]) => `${symbol}${count}`).join('');
}
