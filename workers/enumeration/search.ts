import type { EvidenceDocument } from '../../shared/schemas/evidence.js';
import type { SearchNode, ShardSpec } from '../../shared/jobs/contract.js';
import type { MolecularGraph } from '../../shared/types/molecular-graph.js';
import { createLayout, listDistributions, type Distribution, type SearchLayout } from './distributions.js';
import { fill, type FillEvents } from './fill.js';
import { createLeafJudge } from './leaf-judge.js';
import { createPartialChecks, type PartialCheck } from './partial-checks.js';
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
  /** A branch was cut by a constraint while structures were being built. */
  onCut?(check: PartialCheck): void;
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
  return shard.nodes.every((node) => enumerateNode(search, node, sink));
}

function enumerateNode(search: Search, node: SearchNode, sink: ConstitutionSink): boolean {
  for (let d = node.firstDistribution; d < node.endDistribution; d++) {
    const layout = createLayout(search.problem, search.distributions[d]);
    const judge = createLeafJudge(search.problem, layout);
    const complete = fill(layout, node.prefix, 0, {
      ...rowEvents(createPartialChecks(search.problem, layout), sink),
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

/** The checks of a layout as an event of the fill; none at all without checks, so that plain searches pay nothing. */
export function rowEvents(checks: readonly PartialCheck[], sink: Pick<ConstitutionSink, 'onCut'>): Pick<FillEvents, 'onRow'> {
  if (checks.length === 0) return {};
  return {
    onRow(filled, known) {
      for (const check of checks) {
        if (check.test(filled, known)) continue;
        sink.onCut?.(check);
        return false;
      }
      return true;
    },
  };
}

/** Rows that a plan splits at most: deeper prefixes cost more to make than they spread. */
const MAX_PREFIX_ROWS = 4;

/**
 * Splits a search into at most `target` shards, deterministically. Where there are few distributions they are cut into
 * prefixes of growing depth; nodes are then dealt out in turn, so that neighbours of like size end in different shards.
 */
export function planShards(search: Search, target: number): ShardSpec[] {
  let nodes: SearchNode[] = search.distributions.map((_, d) => ({ firstDistribution: d, endDistribution: d + 1, prefix: [] }));
  if (nodes.length >= target) {
    return Array.from({ length: target }, (_, index) => ({
      index,
      nodes: [
        {
          firstDistribution: Math.floor((index * nodes.length) / target),
          endDistribution: Math.floor(((index + 1) * nodes.length) / target),
          prefix: [],
        },
      ],
    }));
  }
  for (let rows = 1; rows <= MAX_PREFIX_ROWS && nodes.length < target; rows++) {
    nodes = nodes.flatMap((node) => (node.prefix.length > 0 && node.prefix[0] !== rows - 1 ? [node] : expandNode(search, node, rows)));
  }
  const shards: SearchNode[][] = Array.from({ length: Math.min(target, nodes.length) }, () => []);
  nodes.forEach((node, k) => shards[k % shards.length].push(node));
  return shards.map((list, index) => ({ index, nodes: list }));
}

/**
 * Prefixes one row deeper than a node; the node itself when a leaf lies above that depth (leaves stay with it), and an
 * empty list when nothing is below.
 */
function expandNode(search: Search, node: SearchNode, rows: number): SearchNode[] {
  const layout: SearchLayout = createLayout(search.problem, search.distributions[node.firstDistribution]);
  const prefixes: number[][] = [];
  let leaves = 0;
  fill(layout, node.prefix, rows, {
    ...rowEvents(createPartialChecks(search.problem, layout), {}),
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
