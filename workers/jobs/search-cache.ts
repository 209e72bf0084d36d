import { resolveOptions } from '../../shared/chemistry/resolve-options.js';
import type { RunSettings } from '../../shared/jobs/contract.js';
import type { EvidenceDocument } from '../../shared/schemas/evidence.js';
import { createSearch, type Search } from '../enumeration/search.js';
import { createEvaluator, type Evaluator } from '../ranking/evaluator.js';

let last: { readonly text: string; readonly search: Search } | null = null;

/**
 * The search of an evidence document. A worker mostly gets shards of the same run in a row, so the last one is kept;
 * a search is never changed by running it.
 */
export function searchFor(evidence: EvidenceDocument, mode: RunSettings['mode']): Search {
  const text = JSON.stringify([evidence, mode]);
  if (last === null || last.text !== text) last = { text, search: createSearch(resolveOptions(evidence, mode)) };
  return last.search;
}

let lastEvaluator: { readonly text: string; readonly evaluator: Evaluator } | null = null;

/**
 * The filter and score of a run, kept like its search: making one takes longer than many a shard. It carries nothing
 * from one constitution to the next.
 */
export function evaluatorFor(evidence: EvidenceDocument, settings: RunSettings): Evaluator {
  const text = JSON.stringify([evidence, settings]);
  if (lastEvaluator === null || lastEvaluator.text !== text)
    lastEvaluator = { text, evaluator: createEvaluator(resolveOptions(evidence, settings.mode), settings) };
  return lastEvaluator.evaluator;
}
