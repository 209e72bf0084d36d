import type { EvidenceDocument } from '../../shared/schemas/evidence.js';
import { createSearch, type Search } from '../enumeration/search.js';

let last: { readonly text: string; readonly search: Search } | null = null;

/**
 * The search of an evidence document. A worker mostly gets shards of the same run in a row, so the last one is kept;
 * a search is never changed by running it.
 */
export function searchFor(evidence: EvidenceDocument): Search {
  const text = JSON.stringify(evidence);
  if (last === null || last.text !== text) last = { text, search: createSearch(evidence) };
  return last.search;
}
