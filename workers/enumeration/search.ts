import { elementOf } from '../../shared/chemistry/elements.js';
import type { EvidenceDocument } from '../../shared/schemas/evidence.js';
import type { SearchNode, ShardSpec } from '../../shared/jobs/contract.js';
import type { MolecularGraph } from '../../shared/types/molecular-graph.js';
import { listDistributions, type Distribution } from './distributions.js';
import { fill, ringCuts } from './fill.js';
import { openBranch, type CutListener } from './open-branch.js';
import { createProblem, type SearchProblem } from './problem.js';
import { formableGroups, withFormedUnits, type FormableGroups, type FormedUnit } from './valence-groups.js';

/** One hydrogen distribution of one sub-search. */
export interface SearchBranch {
  readonly problem: SearchProblem;
  readonly distribution: Distribution;
}

/** A search that is set up: everything that all shards of a run share. Made anew, and equal, in each worker. */
export interface Search {
  /** What formula and fragments ask for, without groups of higher valence that the search forms by itself. */
  readonly required: SearchProblem;
  readonly groups: FormableGroups;
  /**
   * Sub-searches, one for each combination of copies of the formed groups, and their distributions in a row. No
   * constitution belongs to two of them.
   */
  readonly branches: readonly SearchBranch[];
  /** True when combinations with many formed groups were left out because there were too many. */
  readonly isCurtailed: boolean;
  /** What was left out and why, for people. */
  readonly notes: readonly string[];
}

/** Branches and sub-searches that are held in memory; formulas with more are beyond any computer, but must not exhaust it. */
const MAX_BRANCHES = 100_000;
const MAX_SUB_SEARCHES = 3_000;

/**
 * @param evidence - with options settled; without `options.valenceGroups` no group of higher valence is formed.
 * @throws ProblemError on unreadable or exceeding fragments.
 */
export function createSearch(evidence: EvidenceDocument): Search {
  const required = createProblem(evidence);
  const available = new Map(required.free.map(({ atomicNumber, count }) => [elementOf(atomicNumber).symbol, count]));
  available.set('H', required.hydrogens);
  const groups = formableGroups(evidence, available);
  const notes = [...groups.notes];
  const branches: SearchBranch[] = [];
  const add = (problem: SearchProblem): void => {
    for (const distribution of listDistributions(problem)) branches.push({ problem, distribution });
  };
  add(required);
  let isCurtailed = false;
  let subSearches = 0;
  // An odd number of open bonds stays odd whatever groups are formed.
  for (let total = 1; !isCurtailed && openBondsOf(required) % 2 === 0; total++) {
    const problems = listCopies(groups.units, available, total).map((copies) => withFormedUnits(required, groups, copies));
    if (problems.length === 0) break;
    for (const problem of problems) {
      isCurtailed ||= branches.length > MAX_BRANCHES || ++subSearches > MAX_SUB_SEARCHES;
      if (!isCurtailed) add(problem);
    }
    if (isCurtailed)
      notes.push(
        `This formula has room for very many groups of higher valence; structures with ${total} or more of them are not all built. Allow fewer groups or add fragments.`,
      );
  }
  return { required, groups, branches, isCurtailed, notes };
}

function openBondsOf({ free, units, hydrogens }: SearchProblem): number {
  const ofUnits = units.reduce(
    (sum, { freeValence, count }) => sum + count * freeValence.reduce((total, valence) => total + valence, 0),
    0,
  );
  return free.reduce((sum, { valence, count }) => sum + valence * count, ofUnits) - hydrogens;
}

/** All ways to share `total` copies out among units for which the atoms suffice, in a fixed order. */
function listCopies(units: readonly FormedUnit[], available: ReadonlyMap<string, number>, total: number): number[][] {
  const atoms = new Map(available);
  const copies: number[] = [];
  const found: number[][] = [];
  const take = ({ composition }: FormedUnit, times: number): void => {
    for (const [symbol, count] of composition) atoms.set(symbol, (atoms.get(symbol) ?? 0) - times * count);
  };
  const choose = (left: number): void => {
    const unit = units[copies.length];
    if (unit === undefined) {
      if (left === 0) found.push([...copies]);
      return;
    }
    const room = Math.min(left, ...[...unit.composition].map(([symbol, count]) => Math.floor((atoms.get(symbol) ?? 0) / count)));
    for (let times = room; times >= 0; times--) {
      take(unit, times);
      copies.push(times);
      choose(left - times);
      copies.pop();
      take(unit, -times);
    }
  };
  choose(total);
  return found;
}

/** What a shard reports while it runs. Graph arrays are reused: copy what you keep. */
export interface ConstitutionSink {
  readonly onCut?: CutListener;
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

/** Limits on rings that the fill keeps by itself. */
const RING_CONSTRAINTS = [
  { limit: 'smallest', reason: 'ringTooSmall', text: 'A ring smaller than allowed would have closed.' },
  { limit: 'largest', reason: 'ringTooLarge', text: 'A bond lay in no ring as small as allowed, and no bond to come could close one.' },
  { limit: 'alkyne', reason: 'plausibility:alkyneInSmallRing', text: 'A triple bond lay in a ring of fewer than 8 atoms.' },
  { limit: 'allene', reason: 'plausibility:alleneInSmallRing', text: 'Cumulated double bonds C=C=C lay in a ring of fewer than 9 atoms.' },
] as const;

function enumerateNode(search: Search, node: SearchNode, sink: ConstitutionSink): boolean {
  for (let d = node.firstDistribution; d < node.endDistribution; d++) {
    const { layout, events, judge } = openBranch(search.branches[d], sink.onCut);
    const complete = fill(layout, node.prefix, 0, {
      ...events,
      onLeaf(filled, molecule, mayHaveOtherForms) {
        const verdict = judge(filled, molecule, mayHaveOtherForms);
        if (verdict.multigraphs !== 0) sink.onMultigraphs(verdict.multigraphs);
        for (let k = 0; k < verdict.graphs.length; k++) sink.onConstitution(verdict.graphs[k]);
        return sink.stopRequested();
      },
      shouldStop: () => sink.shouldStop(),
    });
    if (sink.onCut !== undefined) for (const { limit, ...constraint } of RING_CONSTRAINTS) sink.onCut(constraint, ringCuts()[limit]);
    if (!complete) return false;
  }
  return true;
}

/** Rows that a plan splits at most: deeper prefixes cost more to make than they spread. */
const MAX_PREFIX_ROWS = 4;

/**
 * Splits a search into at most `target` shards, deterministically. Where there are few distributions they are cut into
 * prefixes of growing depth; nodes are then dealt out in turn, so that neighbours of like size end in different shards.
 */
export function planShards(search: Search, target: number): ShardSpec[] {
  let nodes: SearchNode[] = search.branches.map((_, d) => ({ firstDistribution: d, endDistribution: d + 1, prefix: [] }));
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
  const { layout, events } = openBranch(search.branches[node.firstDistribution]);
  const prefixes: number[][] = [];
  let leaves = 0;
  fill(layout, node.prefix, rows, {
    ...events,
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
