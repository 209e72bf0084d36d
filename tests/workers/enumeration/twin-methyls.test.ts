import { describe, expect, it } from 'vitest';
import type { FillLayout } from '../../../workers/enumeration/layout.js';
import { mostSignalsOfTwins } from '../../../workers/enumeration/twin-methyls.js';
import { analyseStructure } from '../../../workers/graph/analysis.js';
import { Environments } from '../../../workers/ranking/environments.js';
import { SignalBounds } from '../../../workers/ranking/signal-bounds.js';
import { enumerateAll } from '../../support/enumerate.js';
import { graphOf } from '../../support/graph-of.js';

/** A layout in which everything is bonded already. */
const closed = (base: FillLayout['base']): FillLayout => ({
  open: 0,
  tied: 0,
  freeValence: new Uint8Array(0),
  bondQuota: new Uint8Array(0),
  classOf: new Uint16Array(0),
  unitOf: new Uint16Array(0),
  allowedOrders: null,
  ringLimits: { smallest: 3, largest: null, alkyne: 0, allene: 0 },
  tiedPermutations: [],
  base,
  resonantBonds: null,
  tellsForms: false,
});

describe('mostSignalsOfTwins', () => {
  // Diastereotopic groups: SCIENCE.md 2.5; the compounds are constructed.
  it.each([
    ['isopropyl beside nothing that tells its sides apart', 'CC(C)c1ccc(Cl)cc1', 1, 1],
    ['isopropyl beside a stereocentre', 'CC(C)C(O)CC', 1, 2],
    ['isopropylidene', 'CC(C)=CCC', 1, 2],
    ['dimethylamide', 'CN(C)C=O', 1, 2],
  ])('bounds the methyl signals of an %s', (_, smiles, pivot, expected) => {
    expect(mostSignalsOfTwins(closed(graphOf(smiles)))[pivot]).toBe(expected);
  });

  it.each(['C7H12', 'C7H14', 'C6H12O', 'C5H9NO'])('is never below what the finished molecule can show: %s', (formula) => {
    const { graphs } = enumerateAll({ formula, options: { plausibility: false } }, { keep: true });
    let alike = 0;
    for (const graph of graphs) {
      const { atomCount: n, bondOrders, atomicNumbers, hydrogens } = graph;
      const structure = analyseStructure(graph);
      const environments = new Environments();
      environments.find(structure);
      const bounds = new SignalBounds();
      bounds.find(structure, environments);
      const most = mostSignalsOfTwins(closed(graph));
      for (let c = 0; c < environments.classCount; c++) {
        const first = environments.first[c];
        if (atomicNumbers[first] !== 6 || hydrogens[first] !== 3) continue;
        const methyls = Array.from({ length: n }, (_, a) => a).filter((a) => environments.classOf[a] === c);
        const pivots = new Set(methyls.map((a) => Array.from({ length: n }, (_, b) => b).find((b) => bondOrders[a * n + b] > 0)!));
        const bound = [...pivots].reduce((sum, pivot) => sum + most[pivot], 0);
        if (methyls.length > pivots.size && bound === pivots.size) alike++;
        expect(bounds.carbonSignals[c]).toBeLessThanOrEqual(bound);
      }
    }
    expect(alike).toBeGreaterThan(0);
  });
});
