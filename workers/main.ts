/**
 * Entry of the compute threads: one handler per job of shared/jobs/contract. A handler never throws across the thread
 * boundary (a thrown error would lose its code); it returns a failure that says what was wrong with the input, or that
 * the fault is ours.
 */
import { parseSmiles } from '../shared/chemistry/smiles.js';
import type { JobContract, JobName, JobResult } from '../shared/jobs/contract.js';
import { TooSymmetricError } from './enumeration/distributions.js';
import { ProblemError } from './enumeration/problem.js';
import { planShards } from './enumeration/search.js';
import { estimateRun } from './jobs/estimate.js';
import { explainStructure } from './jobs/explain.js';
import { layOut } from './jobs/layout.js';
import { evaluatorFor, searchFor } from './jobs/search-cache.js';
import { runShard } from './jobs/shard.js';
import { predictSpectra } from './prediction/predict-spectra.js';
import { finishRanking } from './ranking/finish.js';
import { yieldToServer } from './yield-to-server.js';

if (process.env.ISOLOOM_YIELDING_THREADS === '1') yieldToServer();

function handler<K extends JobName>(work: (input: JobContract[K]['input']) => JobContract[K]['output']) {
  return (input: JobContract[K]['input']): JobResult<JobContract[K]['output']> => {
    try {
      return { ok: true, value: work(input) };
    } catch (error) {
      if (error instanceof ProblemError) return { ok: false, failure: { code: 'badInput', message: error.message, issues: error.issues } };
      if (error instanceof TooSymmetricError) {
        return {
          ok: false,
          failure: { code: 'badInput', message: error.message, issues: [{ path: 'fragments.required', message: error.message }] },
        };
      }
      return { ok: false, failure: { code: 'internal', message: error instanceof Error ? (error.stack ?? error.message) : String(error) } };
    }
  };
}

export const plan = handler<'plan'>(({ evidence, settings, targetShards }) => {
  // Made here although the shards use it, so that an unreadable pattern is bad input of the run, not a fault of a shard.
  evaluatorFor(evidence, settings);
  const search = searchFor(evidence, settings.mode);
  return { shards: planShards(search, targetShards), notes: search.notes };
});

export const shard = handler<'shard'>(runShard);

export const finish = handler<'finish'>(finishRanking);

export const explain = handler<'explain'>(explainStructure);

export const predict = handler<'predict'>(({ smiles, solvent }) => {
  const read = parseSmiles(smiles);
  if (!read.ok) throw new ProblemError([{ path: 'smiles', message: read.message }]);
  if (read.attachments.length > 0) throw new ProblemError([{ path: 'smiles', message: 'expected a whole structure without *' }]);
  return { ...predictSpectra(read.graph, solvent), smiles, notes: read.notes };
});

export const estimate = handler<'estimate'>(estimateRun);

export const layout = handler<'layout'>(({ smiles }) => ({ structures: smiles.map(layOut) }));
