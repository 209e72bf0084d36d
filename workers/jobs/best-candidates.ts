import type { ScoreTerms, ShardCandidate } from '../../shared/jobs/contract.js';
import type { MolecularGraph } from '../../shared/types/molecular-graph.js';
import { constitutionKey } from '../graph/constitution-key.js';
import { packGraph } from '../graph/pack.js';

/**
 * Keeps the best K constitutions of a shard: a binary heap with the worst on top. Equal scores are ordered by key, so
 * that what is kept does not depend on the order of arrival.
 */
export class BestCandidates {
  readonly #heap: ShardCandidate[] = [];

  /** @param capacity - K ≥ 1. @param mergeResonanceForms - how keys are made. */
  constructor(
    readonly capacity: number,
    readonly mergeResonanceForms: boolean,
  ) {}

  /** Offers a constitution; graph and terms are read at once and not kept. */
  offer(graph: MolecularGraph, score: number, terms: ScoreTerms): void {
    const heap = this.#heap;
    if (heap.length >= this.capacity && score < heap[0].score) return;
    const candidate: ShardCandidate = {
      key: constitutionKey(graph, this.mergeResonanceForms),
      packed: packGraph(graph),
      score,
      terms: { ...terms },
    };
    if (heap.length < this.capacity) {
      heap.push(candidate);
      this.#rise(heap.length - 1);
      return;
    }
    if (!isWorse(heap[0], candidate)) return;
    heap[0] = candidate;
    this.#sink(0);
  }

  /** Best first. */
  list(): ShardCandidate[] {
    return [...this.#heap].sort((a, b) => (isWorse(a, b) ? 1 : -1));
  }

  #rise(child: number): void {
    const heap = this.#heap;
    while (child > 0) {
      const parent = (child - 1) >> 1;
      if (!isWorse(heap[child], heap[parent])) return;
      [heap[child], heap[parent]] = [heap[parent], heap[child]];
      child = parent;
    }
  }

  #sink(parent: number): void {
    const heap = this.#heap;
    for (;;) {
      let worst = parent;
      for (let child = 2 * parent + 1; child <= 2 * parent + 2 && child < heap.length; child++)
        if (isWorse(heap[child], heap[worst])) worst = child;
      if (worst === parent) return;
      [heap[parent], heap[worst]] = [heap[worst], heap[parent]];
      parent = worst;
    }
  }
}

function isWorse(a: ShardCandidate, b: ShardCandidate): boolean {
  return a.score < b.score || (a.score === b.score && a.key > b.key);
}
