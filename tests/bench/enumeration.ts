/*
 * Speed of the enumeration, each pair in one run on this machine: `npm run bench -- enumeration [plain|fragments|memory|threads]`.
 *
 * plain: one thread against the pipe of nauty's geng, vcolg and multig (Debian package nauty; script and C filter of
 * the reference folder), structures a processor second of all processes.
 * fragments: prebonded fragments against generating everything and matching afterwards, same answer.
 * memory: resident memory after searches of rising size. threads: the command line on one thread and on two.
 */
import { execFileSync } from 'node:child_process';
import { existsSync, mkdtempSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join, resolve } from 'node:path';
import { createCounters } from '../../shared/jobs/counters.js';
import { evidenceDocument, type EvidenceDocument } from '../../shared/schemas/evidence.js';
import type { ComputeService } from '../../server/compute/compute-service.js';
import { createComputePool } from '../../server/compute/pool.js';
import { fill } from '../../workers/enumeration/fill.js';
import { createLayout } from '../../workers/enumeration/distributions.js';
import { listPlacementSets } from '../../workers/enumeration/placements.js';
import { createSearch, enumerateShard, planShards, type Search } from '../../workers/enumeration/search.js';

const oracles = resolve(import.meta.dirname, '../../../shared/oracles');
const part = process.argv[2] ?? 'all';

function searchOf(formula: string, required: { smiles: string; count?: number }[] = []): Search {
  return createSearch(
    evidenceDocument.parse({ formula, fragments: { required }, options: { mergeResonanceForms: false, plausibility: false } }),
  );
}

/** Counts on this thread; no sink but a counter. */
function countPlain(search: Search): number {
  let count = 0;
  for (const { problem, distribution } of search.branches) {
    fill(createLayout(problem, distribution), [], 0, {
      onLeaf() {
        count++;
        return false;
      },
      shouldStop: () => false,
    });
  }
  return count;
}

function cpuSecondsOf<T>(work: () => T): { value: T; seconds: number } {
  const before = process.cpuUsage();
  const value = work();
  const used = process.cpuUsage(before);
  return { value, seconds: (used.user + used.system) / 1e6 };
}

function benchPlain(): void {
  const script = join(oracles, 'nauty_count.sh');
  const hasNauty = existsSync(script) && ['/usr/bin/geng', '/usr/bin/nauty-geng'].some((file) => existsSync(file));
  let filter = '';
  if (hasNauty) {
    filter = join(mkdtempSync(join(tmpdir(), 'isoloom-bench-')), 'valence_filter');
    execFileSync('cc', ['-O2', '-o', filter, join(oracles, 'valence_filter.c')]);
  }
  countPlain(searchOf('C9H12'));
  console.log('formula       structures   here M/s   nauty M/s   ratio   (million structures a processor second)');
  for (const formula of ['C10H10', 'C12H18', 'C8H8O2', 'C9H10O2', 'C6H8O6']) {
    const search = searchOf(formula);
    const here = cpuSecondsOf(() => countPlain(search));
    let line = `${formula.padEnd(12)} ${String(here.value).padStart(11)} ${(here.value / here.seconds / 1e6).toFixed(2).padStart(10)}`;
    if (hasNauty) {
      const timed = execFileSync('bash', ['-c', `{ TIMEFORMAT='%U %S'; time NAUTY_FILTER=${filter} bash ${script} ${formula}; } 2>&1`], {
        encoding: 'utf8',
      });
      const [count, user, system] = timed.trim().split(/\s+/).map(Number);
      const rate = count / (user + system) / 1e6;
      line += ` ${rate.toFixed(2).padStart(11)} ${(here.value / here.seconds / 1e6 / rate).toFixed(2).padStart(7)}`;
      if (count !== here.value) line += '  COUNTS DIFFER';
    }
    console.log(line);
  }
}

/** Problems of everyday shape; the whole list exceeds 10^5 for most. */
const FRAGMENT_PROBLEMS: ReadonlyArray<readonly [string, readonly { smiles: string; count?: number }[]]> = [
  ['C9H10O2', [{ smiles: '*c1ccc(*)cc1' }, { smiles: '*C(=O)O' }]],
  ['C9H10O2', [{ smiles: '*c1cccc(*)c1' }, { smiles: '*C(=O)O*' }]],
  ['C9H12O', [{ smiles: '*c1ccccc1' }, { smiles: '*O' }]],
  ['C10H14', [{ smiles: '*c1ccc(*)cc1' }, { smiles: '*C(C)C' }]],
  ['C10H14', [{ smiles: '*c1ccccc1' }]],
  ['C8H10O2', [{ smiles: '*c1ccccc1*' }, { smiles: '*OC' }]],
  ['C8H8O2', [{ smiles: '*c1ccccc1' }, { smiles: '*C(=O)O*' }]],
  ['C9H10O', [{ smiles: '*c1ccccc1' }, { smiles: '*C(=O)*' }]],
  ['C8H9NO', [{ smiles: '*c1ccc(*)cc1' }, { smiles: '*C(N)=O' }]],
  ['C8H10O', [{ smiles: '*c1ccccc1' }, { smiles: '*C' }]],
  ['C6H5NO2', [{ smiles: '*c1ccncc1' }]],
  ['C8H7N', [{ smiles: '*c1ccccc1' }, { smiles: '*C#N' }]],
];

function benchFragments(): void {
  console.log('\nproblem                                        all      kept    with units s   filter s    ratio');
  for (const [formula, required] of FRAGMENT_PROBLEMS) {
    const search = searchOf(formula, [...required]);
    // Most take less than a clock tick: repeated until they can be timed.
    let repeats = 0;
    const timed = cpuSecondsOf(() => {
      let count = 0;
      for (const until = performance.now() + 200; repeats === 0 || performance.now() < until; repeats++) {
        count = 0;
        enumerateAllShards(search, () => count++);
      }
      return count;
    });
    const direct = { value: timed.value, seconds: timed.seconds / repeats };
    const everything = searchOf(formula);
    const { units, demands } = search.required;
    let all = 0;
    const filtered = cpuSecondsOf(() => {
      let count = 0;
      enumerateAllShards(everything, (graph) => {
        all++;
        if (listPlacementSets(graph, units, demands).length > 0) count++;
      });
      return count;
    });
    const name = `${formula} ${required.map(({ smiles }) => smiles).join(' ')}`;
    console.log(
      name.padEnd(40),
      String(all).padStart(9),
      String(direct.value).padStart(9),
      direct.seconds.toFixed(5).padStart(14),
      filtered.seconds.toFixed(2).padStart(10),
      (filtered.seconds / direct.seconds).toFixed(0).padStart(8),
      direct.value === filtered.value ? '' : `ANSWERS DIFFER (${filtered.value})`,
    );
  }
}

function enumerateAllShards(
  search: Search,
  visit: (graph: Parameters<Parameters<typeof enumerateShard>[2]['onConstitution']>[0]) => void,
): void {
  for (const shard of planShards(search, 1)) {
    enumerateShard(search, shard, {
      onConstitution: visit,
      onMultigraphs: () => undefined,
      shouldStop: () => false,
      stopRequested: () => false,
    });
  }
}

function benchMemory(): void {
  console.log('\nresident memory of the process after each search (MB)');
  for (const formula of ['C10H16', 'C12H22', 'C12H18', 'C9H10O2', 'C8H9NO2']) {
    const count = countPlain(searchOf(formula));
    console.log(formula.padEnd(12), String(count).padStart(10), (process.memoryUsage.rss() / 1e6).toFixed(0).padStart(6));
  }
}

/** The best of three runs each, in turn, so that both see the same machine; threads are kept, as a server keeps them. */
async function benchThreads(): Promise<void> {
  const pools = [1, 2].map((threads) => createComputePool({ threads }));
  console.log('\nformula         count   one thread s   two threads s   ratio');
  for (const formula of ['C9H10O2', 'C12H18', 'C8H9NO2']) {
    const evidence = evidenceDocument.parse({ formula, options: { plausibility: false } });
    const best = [Infinity, Infinity];
    const counts = [0, 0];
    for (let round = 0; round < 3; round++) {
      for (const [k, pool] of pools.entries()) {
        const startedMs = performance.now();
        counts[k] = await countOnPool(pool, evidence);
        best[k] = Math.min(best[k], (performance.now() - startedMs) / 1000);
      }
    }
    const [one, two] = best;
    console.log(
      formula.padEnd(12),
      String(counts[0]).padStart(8),
      one.toFixed(2).padStart(14),
      two.toFixed(2).padStart(15),
      (one / two).toFixed(2).padStart(7),
      counts[0] === counts[1] ? '' : 'COUNTS DIFFER',
    );
  }
  await Promise.all(pools.map((pool) => pool.close()));
}

async function countOnPool(pool: ComputeService, evidence: EvidenceDocument): Promise<number> {
  const settings = { keep: 1, maxSeconds: null, mode: 'count' } as const;
  const { shards } = await pool.runJob('plan', { evidence, settings, targetShards: 192 });
  const counters = createCounters();
  const open = shards[Symbol.iterator]();
  let count = 0;
  const work = async (): Promise<void> => {
    for (const shard of open) {
      const input = { evidence, settings, shard, counters, deadlineEpochMs: null };
      const { constitutionCount } = await pool.runJob('shard', input);
      count += constitutionCount;
    }
  };
  await Promise.all(Array.from({ length: pool.threadCount }, work));
  return count;
}

if (part === 'all' || part === 'plain') benchPlain();
if (part === 'all' || part === 'fragments') benchFragments();
if (part === 'all' || part === 'memory') benchMemory();
if (part === 'all' || part === 'threads') await benchThreads();
