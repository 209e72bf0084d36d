import type { EvidenceDocument } from '../../shared/schemas/evidence.js';
import type { ShardSpec } from '../../shared/jobs/contract.js';
import type { MolecularGraph } from '../../shared/types/molecular-graph.js';
import { createLayout, listDistributions, type Distribution, type SearchLayout } from './distributions.js';
import { createFiller } from './fill.js';
import { createLeafJudge } from './leaf-judge.js';
import { createProblem, type SearchProblem } from './problem.js';

/** A search that is set up: everything that all shards of a run share. Made anew, and equal, in each worker. */
export interface Search {
  readonly problem: SearchProblem;
  readonly distributions: readonly Distribution[];
}

/** @throws ProblemError on unreadable or exceeding fragments. */
export function createSearch(evidence: EvidenceDocument): Search {
  const problem = createProblem(evidence);
  return { problem, distributions: listDistributions(problem) };
}

/** What a shard reports while it runs. Graph arrays are reused: copy what you keep. */
export interface ConstitutionSink {
  onConstitution(graph: MolecularGraph): void;
  onMultigraphs(count: number): void;
  /** Called every few thousand rows; true ends the shard early. */
  shouldStop(): boolean;
  /** Asked after each constitution; cheap. True ends the shard early. */
  stopRequested(): boolean;
}

/**
 * Enumerates one shard.
 * @returns false when the sink ended it early.
 * @throws TooSymmetricError when the units' group is too large.
 */
export function enumerateShard(search: Search, shard: ShardSpec, sink: ConstitutionSink): boolean {
  for (let d = shard.firstDistribution; d < shard.endDistribution; d++) {
    const layout = createLayout(search.problem, search.distributions[d]);
    const judge = createLeafJudge(search.problem, layout);
    const complete = createFiller(layout).run(shard.prefix, 0, {
      onLeaf(filled) {
        const verdict = judge(filled);
        if (verdict.multigraphs !== 0) sink.onMultigraphs(verdict.multigraphs);
        for (const graph of verdict.graphs) sink.onConstitution(graph);
        return sink.stopRequested();
      },
      shouldStop: () => sink.shouldStop(),
    });
    if (!complete) return false;
  }
  return true;
}

/** Rows that a plan splits at most: deeper prefixes cost more to make than they spread. */
const MAX_PREFIX_ROWS = 4;

/**
 * Splits a search into about `target` shards, deterministically: a few distributions a shard where there are many, else
 * prefixes of growing depth.
 */
export function planShards(search: Search, target: number): ShardSpec[] {
  const total = search.distributions.length;
  if (total >= target) {
    return Array.from({ length: target }, (_, index) => ({
      index,
      firstDistribution: Math.floor((index * total) / target),
      endDistribution: Math.floor(((index + 1) * total) / target),
      prefix: [],
    }));
  }
  let nodes: Omit<ShardSpec, 'index'>[] = search.distributions.map((_, d) => ({
    firstDistribution: d,
    endDistribution: d + 1,
    prefix: [],
  }));
  for (let rows = 1; rows <= MAX_PREFIX_ROWS && nodes.length < target; rows++) {
    nodes = nodes.flatMap((node) => {
      if (node.prefix.length > 0 && node.prefix[0] !== rows - 1) return [node];
      const children = expandNode(search, node, rows);
      return children.length === 0 ? [] : children;
    });
  }
  return nodes.map((node, index) => ({ index, ...node }));
}

/**
 * Prefixes one row deeper than a node; the node itself when a leaf lies above that depth (leaves stay with it), and an
 * empty list when nothing is below.
 */
function expandNode(search: Search, node: Omit<ShardSpec, 'index'>, rows: number): Omit<ShardSpec, 'index'>[] {
  const layout: SearchLayout = createLayout(search.problem, search.distributions[node.firstDistribution]);
  const prefixes: number[][] = [];
  let leaves = 0;
  createFiller(layout).run(node.prefix, rows, {
    onLeaf: () => {
      leaves++;
      return false;
    },
    onPrefix: (prefix) => prefixes.push(prefix),
    shouldStop: () => false,
  });
  if (leaves > 0) return [node];
  return prefixes.map((prefix) => ({ ...node, prefix }));
}
