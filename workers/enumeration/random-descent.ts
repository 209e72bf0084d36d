import type { MolecularGraph } from '../../shared/types/molecular-graph.js';
import { fill } from './fill.js';
import type { OpenBranch } from './open-branch.js';

/** A node of the tree with the way to it. */
interface Node {
  readonly prefix: readonly number[];
  readonly parent: Node | null;
}

/** What one descent found. */
export interface Descent {
  /** Unbiased estimate of the constitutions below the root. */
  readonly weight: number;
  /** Nodes and leaves looked at: the cost of the descent. */
  readonly visited: number;
  /** The largest weight a single leaf had, or would have had where every walk died. */
  readonly leafWeight: number;
  /** A leaf drawn in proportion to the leaves' weights, copied; null without any. */
  readonly leaf: MolecularGraph | null;
  /** Prefixes from the root down to the one above that leaf; empty when it hangs on the root. */
  readonly path: ReadonlyArray<readonly number[]>;
}

/**
 * Walks down a branch with several walkers side by side: of all children of a level at most `walkers` are kept, drawn at
 * random, and whatever is reached below counts as many times as children were passed over. With one walker this is Knuth's
 * random probing (Math. Comp. 1975, 29, 121); with several their chances even out, and a dead end costs one walker only
 * (stochastic enumeration; Vaisman & Kroese, Methodol. Comput. Appl. Probab. 2017, 19, 31, cited from memory).
 *
 * @param random - uniform in [0, 1). @param shouldStop - asked every few thousand rows.
 * @returns null when `shouldStop` ended it: half a descent says nothing.
 */
export function descend(branch: OpenBranch, walkers: number, random: () => number, shouldStop: () => boolean): Descent | null {
  let nodes: Node[] = [{ prefix: [], parent: null }];
  let factor = 1;
  let weight = 0;
  let visited = 0;
  const drawn: { leaf: MolecularGraph | null; above: Node | null } = { leaf: null, above: null };
  for (let rows = 1; nodes.length > 0; rows++) {
    const kept: Node[] = [];
    let children = 0;
    for (const node of nodes) {
      const isComplete = fill(branch.layout, node.prefix, rows, {
        ...branch.events,
        onLeaf(filled, molecule, mayHaveOtherForms) {
          visited++;
          // Leaves above the next level are met in full at this one: they count with its factor.
          for (const graph of branch.judge(filled, molecule, mayHaveOtherForms).graphs) {
            weight += factor;
            if (random() * weight >= factor) continue;
            drawn.leaf = copyGraph(graph);
            drawn.above = node;
          }
          return false;
        },
        onPrefix(prefix) {
          visited++;
          children++;
          const child = { prefix, parent: node };
          if (kept.length < walkers) {
            kept.push(child);
            return;
          }
          // Reservoir: each child stays with equal chance, without a list of all.
          const place = Math.floor(random() * children);
          if (place < walkers) kept[place] = child;
        },
        shouldStop,
      });
      if (!isComplete) return null;
    }
    if (kept.length > 0) factor *= children / kept.length;
    nodes = kept;
  }
  const path: (readonly number[])[] = [];
  for (let node = drawn.above; node !== null && node.prefix.length > 0; node = node.parent) path.unshift(node.prefix);
  return { weight, visited, leafWeight: factor, leaf: drawn.leaf, path };
}

function copyGraph(graph: MolecularGraph): MolecularGraph {
  return {
    ...graph,
    atomicNumbers: graph.atomicNumbers.slice(),
    hydrogens: graph.hydrogens.slice(),
    charges: graph.charges.slice(),
    bondOrders: graph.bondOrders.slice(),
  };
}

/** Mulberry32, a small seeded generator; uniform in [0, 1). */
export function createRandom(seed: number): () => number {
  let state = seed >>> 0;
  return () => {
    state = (state + 0x6d2b79f5) >>> 0;
    let t = Math.imul(state ^ (state >>> 15), state | 1);
    t ^= t + Math.imul(t ^ (t >>> 7), t | 61);
    return ((t ^ (t >>> 14)) >>> 0) / 4294967296;
  };
}
