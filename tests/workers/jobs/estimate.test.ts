import { describe, expect, it } from 'vitest';
import { evidenceDocument, type EvidenceInput } from '../../../shared/schemas/evidence.js';
import type { MolecularGraph } from '../../../shared/types/molecular-graph.js';
import { countExactly, estimateSearch } from '../../../workers/enumeration/estimate.js';
import { createSearch, type Search } from '../../../workers/enumeration/search.js';
import { fallByFittedCensus } from '../../../workers/jobs/census-by-fit.js';
import { estimateRun } from '../../../workers/jobs/estimate.js';
import { createMemoryGuard } from '../../../workers/jobs/memory-guard.js';
import { enumerateAll } from '../../support/enumerate.js';

const estimateOf = (input: EvidenceInput, maxSeconds = 1.5) =>
  estimateRun({ evidence: evidenceDocument.parse(input), mode: 'rank', probes: 1e6, seed: 1, maxSeconds });

/** What is left on average when the class of the true constitution is known: Σ s² / Σ s, over all constitutions. */
function expectedFall(formula: string, classOf: (graph: MolecularGraph) => string): number {
  const { graphs, constitutions } = enumerateAll({ formula }, { keep: true });
  const sizes = new Map<string, number>();
  for (const graph of graphs) sizes.set(classOf(graph), (sizes.get(classOf(graph)) ?? 0) + 1);
  return constitutions ** 2 / [...sizes.values()].reduce((sum, size) => sum + size * size, 0);
}
const carbonHydrogens = ({ atomCount, atomicNumbers, hydrogens }: MolecularGraph): string =>
  Array.from({ length: atomCount }, (_, a) => (atomicNumbers[a] === 6 ? String(hydrogens[a]) : ''))
    .sort()
    .join('');

/** The same from the exact sizes of all branches, whose carbons are alike. */
function fallByCounts({ branches }: Search, sizes: Float64Array): number {
  const byCensus = new Map<string, number>();
  branches.forEach(({ distribution }, d) => {
    const census = distribution.filter(({ atomicNumber }) => atomicNumber === 6).map(({ hydrogens, count }) => `${hydrogens}:${count}`);
    byCensus.set(census.join(), (byCensus.get(census.join()) ?? 0) + sizes[d]!);
  });
  const all = [...byCensus.values()];
  return all.reduce((sum, size) => sum + size, 0) ** 2 / all.reduce((sum, size) => sum + size * size, 0);
}

describe('the estimate of a run', () => {
  it('counts what is small enough', () => {
    // SCIENCE.md 2.6: 596 constitutions of C7H14O.
    expect(estimateOf({ formula: 'C7H14O', options: { plausibility: false } })).toMatchObject({
      isExact: true,
      estimate: 596,
      low: 596,
      high: 596,
    });
  });

  it('says by how much attached-hydrogen counts would cut it, as a full count of the classes does', () => {
    const { hints } = estimateOf({ formula: 'C7H10O', options: { plausibility: false } });
    const hint = hints.find(({ kind }) => kind === 'attachedHydrogens')!;
    const truth = expectedFall('C7H10O', carbonHydrogens);
    expect(hint.factor / truth).toBeGreaterThan(0.85);
    expect(hint.factor / truth).toBeLessThan(1.15);
    expect(hint.text).toMatch(/^Attached-hydrogen counts \(DEPT or HSQC\) would cut this about \d+-fold\.$/);
  });

  it('knows it roughly from one probe a branch, by the trend over all branches', () => {
    // Reference: the classes of all constitutions, counted.
    const search = createSearch(evidenceDocument.parse({ formula: 'C5H9NO3', options: { plausibility: false } }));
    const probed = estimateSearch(search, { seed: 3, maxProbes: search.branches.length, shouldStop: () => false, observe: () => null });
    const exact = countExactly(search, () => false)!;
    const truth = fallByCounts(search, exact);
    for (const sizes of [exact, probed.branchSizes]) {
      const factor = fallByFittedCensus(search, sizes)!;
      expect(factor / truth).toBeGreaterThan(0.8);
      expect(factor / truth).toBeLessThan(1.25);
    }
    expect(fallByFittedCensus(search, new Float64Array(search.branches.length).fill(NaN))).toBeNull();
  }, 30_000);

  it('does not ask for what is known', () => {
    const kinds = (input: EvidenceInput) => estimateOf(input).hints.map(({ kind }) => kind);
    const carbonSignals = [170, 130, 128, 60, 30, 14].map((shift, k) => ({ shift, hydrogens: [0, 1, 1, 2, 2, 3][k]! }));
    expect(kinds({ formula: 'C8H10O2', carbonSignals })).not.toContain('attachedHydrogens');
    expect(kinds({ formula: 'C8H10O2', carbonSignals })).not.toContain('carbonShifts');
    const ruledOut: EvidenceInput = {
      formula: 'C6H8O3',
      fragments: { excluded: [{ smiles: 'OO' }] },
      options: { ringSizes: { min: 5, max: 6 } },
    };
    expect(kinds(ruledOut)).not.toContain('heteroBonds');
    expect(kinds(ruledOut)).not.toContain('ringSizes');
    expect(kinds({ formula: 'C6H8O3' })).toEqual(expect.arrayContaining(['heteroBonds', 'ringSizes', 'attachedHydrogens', 'carbonShifts']));
  });

  it('lists the most helpful first', () => {
    const factors = estimateOf({ formula: 'C8H8O2' }).hints.map(({ factor }) => factor);
    expect(factors.length).toBeGreaterThan(1);
    expect([...factors].sort((a, b) => b - a)).toEqual(factors);
  });

  it('is ended by the clock, however hopeless the run', () => {
    for (const formula of ['C30H50O', 'C20H28N2O5', 'C14H20N4O6S2']) {
      const startedMs = performance.now();
      const result = estimateOf({ formula });
      // A second and a half was given; the rest is setting the search up, and this machine may be busy.
      expect(performance.now() - startedMs).toBeLessThan(4_000);
      expect(result.estimate).toBeGreaterThan(1e9);
      expect(result.low).toBeLessThan(result.estimate);
      expect(result.high).toBeGreaterThan(result.estimate);
      expect(result.cpuSecondsLow).toBeGreaterThan(3_600);
    }
  }, 30_000);
});

describe('the memory guard of a shard', () => {
  it('looks about ten times a second, and stays decided', () => {
    let nowMs = 0;
    let used = 10;
    let looks = 0;
    const isOver = createMemoryGuard(
      100,
      () => {
        looks++;
        return used;
      },
      () => nowMs,
    );
    expect(isOver()).toBe(false);
    used = 200;
    expect(isOver()).toBe(false);
    expect(looks).toBe(1);
    nowMs = 150;
    expect(isOver()).toBe(true);
    used = 10;
    nowMs = 900;
    expect(isOver()).toBe(true);
  });
});
