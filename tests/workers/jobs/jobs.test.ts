import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { cancelRun, createCounters, readCounter } from '../../../shared/jobs/counters.js';
import type { JobContract, RunSettings, ShardResult } from '../../../shared/jobs/contract.js';
import { evidenceDocument, VALENCE_GROUPS, type EvidenceInput } from '../../../shared/schemas/evidence.js';
import { parseSmiles } from '../../../shared/chemistry/smiles.js';
import { BestCandidates } from '../../../workers/jobs/best-candidates.js';
import { unpackGraph } from '../../../workers/graph/pack.js';
import { constitutionKey } from '../../../workers/graph/constitution-key.js';
import { enumerateAll } from '../../support/enumerate.js';
import { writeExplicitSmiles } from '../../support/explicit-smiles.js';
import * as jobs from '../../../workers/main.js';

const settings: RunSettings = { keep: 20, maxSeconds: null, mode: 'rank' };

function outputOf<T>(result: { ok: true; value: T } | { ok: false; failure: { message: string } }): T {
  if (!result.ok) throw new Error(result.failure.message);
  return result.value;
}
function shardsOf(input: EvidenceInput, targetShards: number, used = settings): ShardResult[] {
  const evidence = evidenceDocument.parse(input);
  return outputOf(jobs.plan({ evidence, settings: used, targetShards })).shards.map((shard) =>
    outputOf(jobs.shard({ evidence, settings: used, shard, counters: createCounters(), deadlineEpochMs: null })),
  );
}
const explain = (input: EvidenceInput, smiles: string) => jobs.explain({ evidence: evidenceDocument.parse(input), settings, smiles });

describe('the shard job', () => {
  const input: EvidenceInput = {
    formula: 'C6H10O',
    carbonSignals: [
      { shift: 211.0, hydrogens: 0 },
      { shift: 41.9, hydrogens: 2 },
      { shift: 27.0, hydrogens: 2 },
    ],
  };

  it('counts, rejects and keeps the same whatever the number of shards', () => {
    const sum = (results: readonly ShardResult[]) => ({
      constitutions: results.reduce((total, result) => total + result.constitutionCount, 0),
      ranked: results.reduce((total, result) => total + result.funnel.at(-1)!.passed, 0),
      best: results
        .flatMap((result) => result.kept)
        .sort((a, b) => b.score - a.score || (a.key < b.key ? -1 : 1))
        .slice(0, settings.keep)
        .map((candidate) => [candidate.key, candidate.score]),
    });
    expect(sum(shardsOf(input, 9))).toEqual(sum(shardsOf(input, 1)));
  });

  it('lets the stages of the funnel follow from one another', () => {
    for (const { funnel, constitutionCount } of shardsOf(input, 3)) {
      expect(funnel[0]!.entered).toBe(constitutionCount);
      funnel.forEach((step, k) => {
        expect(step.passed).toBe(step.entered - step.rejections.reduce((total, rejection) => total + rejection.count, 0));
        if (k > 0) expect(step.entered).toBe(funnel[k - 1]!.passed);
      });
    }
  });

  it('stops soon when the run is cancelled, and says that it is incomplete', () => {
    const evidence = evidenceDocument.parse({ formula: 'C10H16O2' });
    const shard = outputOf(jobs.plan({ evidence, settings, targetShards: 1 })).shards[0]!;
    const counters = createCounters();
    cancelRun(counters);
    const result = outputOf(jobs.shard({ evidence, settings, shard, counters, deadlineEpochMs: null }));
    expect(result.complete).toBe(false);
    expect(result.constitutionCount).toBeLessThan(5000);
    expect(readCounter(counters, 'constitutionsSeen')).toBe(result.constitutionCount);
  });

  it('stops at a number of constitutions and says so; a search of exactly so many is complete', () => {
    const evidence = evidenceDocument.parse({ formula: 'C5H8' });
    const counting: RunSettings = { ...settings, mode: 'count' };
    const [shard] = outputOf(jobs.plan({ evidence, settings: counting, targetShards: 1 })).shards;
    const run = (maxConstitutions: number) =>
      outputOf(
        jobs.shard({ evidence, settings: counting, shard: shard!, counters: createCounters(), deadlineEpochMs: null, maxConstitutions }),
      );
    expect(run(10)).toMatchObject({ complete: false, stoppedBy: 'count', constitutionCount: 10 });
    // SCIENCE.md 2.6: 26.
    expect(run(26)).toMatchObject({ complete: true, constitutionCount: 26 });
    expect(run(26)).not.toHaveProperty('stoppedBy');
  });

  it('stops when its thread uses more memory than it may, and keeps what it has', () => {
    const evidence = evidenceDocument.parse({ formula: 'C10H16O2' });
    const shard = outputOf(jobs.plan({ evidence, settings, targetShards: 1 })).shards[0]!;
    process.env.ISOLOOM_SHARD_HEAP_MB = '1';
    try {
      const result = outputOf(jobs.shard({ evidence, settings, shard, counters: createCounters(), deadlineEpochMs: null }));
      expect(result).toMatchObject({ complete: false, stoppedBy: 'memory' });
      expect(result.funnel[0]!.entered).toBe(result.constitutionCount);
    } finally {
      delete process.env.ISOLOOM_SHARD_HEAP_MB;
    }
  });

  it('answers bad input as data with its field', () => {
    const evidence = {
      ...evidenceDocument.parse({ formula: 'C6H6' }),
      fragments: { required: [{ smiles: '*C(=O)O', count: 1 }], excluded: [] },
    };
    const result = jobs.plan({ evidence, settings, targetShards: 4 });
    expect(result).toMatchObject({ ok: false, failure: { code: 'badInput', issues: [{ path: 'fragments.required[0].smiles' }, {}] } });
  });

  it('names an excluded pattern that nothing can read', () => {
    const evidence = evidenceDocument.parse({ formula: 'C6H6', fragments: { excluded: [{ smiles: '[#6;Q9]~*' }] } });
    const result = jobs.plan({ evidence, settings, targetShards: 4 });
    expect(result).toMatchObject({ ok: false, failure: { code: 'badInput', issues: [{ path: 'fragments.excluded[0].smiles' }] } });
  });

  it('says in the plan what the evidence rules out', () => {
    const evidence = evidenceDocument.parse({ formula: 'C2H6OS', fragments: { excluded: [{ smiles: 'S=O' }] } });
    expect(outputOf(jobs.plan({ evidence, settings, targetShards: 4 })).notes).toEqual([
      'Sulfoxide groups were left out: the excluded fragment S=O is part of them.',
    ]);
    expect(outputOf(jobs.plan({ evidence, settings: { ...settings, mode: 'count' }, targetShards: 4 })).notes).toEqual([]);
  });

  it('only counts in mode count', () => {
    const results = shardsOf({ formula: 'C5H8' }, 4, { ...settings, mode: 'count' });
    expect(results.flatMap((result) => result.kept)).toEqual([]);
    expect(results.reduce((total, result) => total + result.constitutionCount, 0)).toBe(26);
  });
});

describe('the best candidates of a shard', () => {
  it('are the highest scores whatever the order of arrival, equal scores by key', () => {
    const graphs = ['CCCCO', 'CCOCC', 'CC(C)CO', 'CC(C)(C)O', 'CCC(C)O', 'COCCC', 'COC(C)C'].map((smiles) => {
      const parsed = parseSmiles(smiles);
      if (!parsed.ok) throw new Error(parsed.message);
      return parsed.graph;
    });
    fc.assert(
      fc.property(fc.shuffledSubarray(graphs, { minLength: graphs.length }), fc.integer({ min: 1, max: 7 }), (order, capacity) => {
        const best = new BestCandidates(capacity, true);
        for (const graph of order) best.offer(graph, graph.bondOrders.length % 3 === 0 ? 1 : graphs.indexOf(graph) % 2, {});
        const expected = graphs
          .map((graph) => ({ key: constitutionKey(graph, true), score: graph.bondOrders.length % 3 === 0 ? 1 : graphs.indexOf(graph) % 2 }))
          .sort((a, b) => b.score - a.score || (a.key < b.key ? -1 : 1))
          .slice(0, capacity);
        const kept = best.list();
        expect(kept.map(({ key, score }) => ({ key, score }))).toEqual(expected);
        for (const candidate of kept) expect(constitutionKey(unpackGraph(candidate.packed), true)).toBe(candidate.key);
      }),
    );
  });
});

describe('the explain job', () => {
  const input: EvidenceInput = { formula: 'C9H10O2', fragments: { required: [{ smiles: '*c1ccc(*)cc1', count: 1 }] } };
  type Explanation = JobContract['explain']['output'];
  const explanationOf = (smiles: string, from = input): Explanation => outputOf(explain(from, smiles));

  it('names a formula that differs', () => {
    expect(explanationOf('CCO')).toMatchObject({ kind: 'otherFormula', formula: 'C2H6O', expected: 'C9H10O2' });
  });

  it('names the required fragment that is missing', () => {
    expect(explanationOf('CCOC(=O)c1ccccc1')).toMatchObject({
      kind: 'rejected',
      stage: 'constitutions',
      reasons: [{ reason: 'requiredFragment' }],
    });
  });

  it('finds a fragment in any Kekulé form of the structure', () => {
    expect(explanationOf('Cc1ccc(cc1)C(=O)OC').kind).toBe('survives');
  });

  it('finds a nitro group without a fragment that brings it, unless groups were chosen without it', () => {
    const nitro: EvidenceInput = { formula: 'C7H7NO2' };
    const smiles = 'Cc1ccc(cc1)[N+](=O)[O-]';
    expect(explanationOf(smiles, nitro).kind).toBe('survives');
    const without: EvidenceInput = { ...nitro, options: { valenceGroups: ['sulfone', 'nOxide'] } };
    const explained = explanationOf(smiles, without);
    expect(explained).toMatchObject({ kind: 'rejected', stage: 'constitutions', reasons: [{ reason: 'valenceState' }] });
    expect(explained.kind === 'rejected' && explained.reasons[0].text).toMatch(/\(Nitro\)\. Allow it/);
    expect(explained.kind === 'rejected' && [...explained.reasons[0].atoms].sort()).toEqual([7, 9]);
    const withFragment: EvidenceInput = { ...without, fragments: { required: [{ smiles: '*[N+](=O)[O-]', count: 1 }] } };
    expect(explanationOf(smiles, withFragment).kind).toBe('survives');
  });

  it('says which evidence rules a group out', () => {
    const excluded: EvidenceInput = { formula: 'C2H6OS', fragments: { excluded: [{ smiles: 'S=O' }] } };
    const explained = explanationOf('CS(C)=O', excluded);
    expect(explained.kind === 'rejected' && explained.reasons.map(({ text }) => text)).toEqual([
      'It holds a group that this run does not form. Sulfoxide groups were left out: the excluded fragment S=O is part of them.',
    ]);
  });

  it('says that a valence state of no such group needs a fragment that brings it', () => {
    const explained = explanationOf('CS(C)(=O)=N', { formula: 'C2H7NOS' });
    expect(explained.kind === 'rejected' && explained.reasons).toMatchObject([{ reason: 'valenceState', atoms: [1] }]);
    expect(explained.kind === 'rejected' && explained.reasons[0].text).toContain('only inside a required fragment');
  });

  it('agrees with the search on every structure with such groups (CH3NO2S, all and some groups)', () => {
    const all = enumerateAll({ formula: 'CH3NO2S', options: { valenceGroups: [...VALENCE_GROUPS] } }, { keep: true });
    for (const valenceGroups of [[...VALENCE_GROUPS], ['sulfone', 'nitro'] as const, ['nOxide'] as const]) {
      const from: EvidenceInput = { formula: 'CH3NO2S', options: { valenceGroups: [...valenceGroups], plausibility: false } };
      const found = new Set(enumerateAll(from, { keep: true }).keys);
      all.graphs.forEach((graph, k) =>
        expect(explanationOf(writeExplicitSmiles(graph), from).kind).toBe(found.has(all.keys[k]) ? 'survives' : 'rejected'),
      );
    }
  });

  it('refuses what is no whole structure, naming the field', () => {
    expect(explain(input, '*CC')).toMatchObject({ ok: false, failure: { code: 'badInput', issues: [{ path: 'smiles' }] } });
  });
});

describe('the estimate job', () => {
  it.each(['C6H10O', 'C8H14', 'C7H8O'])('covers the true count of %s, and equal seeds agree', (formula) => {
    const evidence = evidenceDocument.parse({ formula });
    const input = { evidence, mode: 'count' as const, probes: 400, seed: 7, maxSeconds: 600 };
    const estimate = outputOf(jobs.estimate(input));
    const truth = shardsOf({ formula }, 1, { ...settings, mode: 'count' }).reduce((total, result) => total + result.constitutionCount, 0);
    expect(estimate.low).toBeLessThanOrEqual(truth);
    expect(estimate.high).toBeGreaterThanOrEqual(truth);
    expect(outputOf(jobs.estimate(input)).estimate).toBe(estimate.estimate);
  });
});
