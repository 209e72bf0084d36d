import { afterAll, describe, expect, it } from 'vitest';
import { checkEvidence } from '../../../shared/chemistry/check-evidence.js';
import type { ShardCandidate } from '../../../shared/jobs/contract.js';
import { createCounters } from '../../../shared/jobs/counters.js';
import { evidenceDocument } from '../../../shared/schemas/evidence.js';
import { TEAM_ROLES } from '../../../shared/types/roles.js';
import { createComputePool } from '../../../server/compute/pool.js';
import { ShardMerger } from '../../../server/compute/merge-shards.js';
import { DEMO_PEOPLE, DEMO_UNKNOWNS } from '../../../server/demo/demo-data.js';

/** What the data of each sample were invented for; the product itself is not told. */
const MEANT: Readonly<Record<string, string>> = {
  'Late peak in ester batch 7': 'CCC(=O)Oc1ccc(C)cc1',
  'Colourless oil from the furan step': 'CCC(C)c1ccco1',
  'Crystals from the amine wash': 'CC(C)CNC(C)=O',
  'Chlorinated by-product, fraction 12': 'COc1ccc(C)c(Cl)c1',
  'Fruity forerun of still 2': 'C=CCOC(=O)C(C)C',
  'Camphor-like liquid, retained sample': 'CCC(=O)C1CCCCC1',
  'Solvent trap, week 14': 'CCCC(=O)C(C)C',
};
const pool = createComputePool({ threads: 1 });
afterAll(() => pool.close());

describe('the demo', () => {
  it('has all four roles and unknowns at every stage', () => {
    expect(DEMO_PEOPLE.map(({ role }) => role).sort()).toEqual([...TEAM_ROLES, 'admin'].sort());
    expect(new Set(DEMO_UNKNOWNS.map(({ status }) => status))).toEqual(new Set(['new', 'inProgress', 'settled', 'shelved']));
    expect(DEMO_UNKNOWNS.filter(({ run }) => run).length).toBeGreaterThanOrEqual(5);
    expect(DEMO_UNKNOWNS.some(({ revisions }) => revisions.length > 1)).toBe(true);
  });

  it.each(
    DEMO_UNKNOWNS.flatMap(({ title, revisions }) => revisions.map(({ evidence }, index) => ({ title, number: index + 1, evidence }))),
  )('says nothing that contradicts itself: $title, revision $number', ({ evidence }) => {
    expect(checkEvidence(evidenceDocument.parse(evidence)).issues).toEqual([]);
  });

  it.each(DEMO_UNKNOWNS.map(({ title, revisions }) => ({ title, evidence: revisions[revisions.length - 1].evidence })))(
    'is chemically sound: the engine finds the meant structure among the first three of $title',
    async ({ title, evidence: input }) => {
      const evidence = evidenceDocument.parse(input);
      const settings = { keep: 3, maxSeconds: null, mode: 'rank' } as const;
      const { shards } = await pool.runJob('plan', { evidence, settings, targetShards: 8 });
      const merger = new ShardMerger(settings.keep);
      for (const shard of shards)
        merger.add(await pool.runJob('shard', { evidence, settings, shard, counters: createCounters(), deadlineEpochMs: null }));
      const meant = await pool.runJob('explain', { evidence, settings, smiles: MEANT[title] });
      expect(meant).toMatchObject({ kind: 'survives' });
      const keys = merger.merged().kept.map(({ key }: ShardCandidate) => key);
      expect(keys).toContain((meant as { key: string }).key);
    },
    120_000,
  );
});
