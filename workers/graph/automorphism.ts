import type { StructureAnalysis } from './analysis.js';
import { NEIGHBOUR_STRIDE } from './analysis.js';

/** A constitution with its resonance forms taken together; colours are the finest stable partition found without search. */
export interface NormalisedGraph {
  readonly analysis: StructureAnalysis;
  readonly atomCount: number;
  /** n × n: 0 no bond, 1–3 plain, 4 aromatic, 5 the two N–O bonds of a nitro group. */
  readonly bondTypes: Uint8Array;
  /** Equal colours are necessary for equivalence, not sufficient. Independent of atom numbering. */
  readonly colours: Int32Array;
  /** Heavy-atom neighbours of each atom. */
  readonly neighbourLists: readonly (readonly number[])[];
}

const AROMATIC = 4;
const NITRO = 5;

/**
 * Lays the resonance forms of aromatic rings and nitro groups over each other and refines atom colours from
 * element, hydrogens, charge and, again and again, the neighbours' colours (Morgan, J. Chem. Doc. 1965, 5, 107).
 *
 * @param analysis - read only, kept by the result.
 */
export function normaliseGraph(analysis: StructureAnalysis): NormalisedGraph {
  const { graph, aromaticBonds, aromaticAtoms } = analysis;
  const { atomCount: n, atomicNumbers, hydrogens, charges, bondOrders } = graph;
  const bondTypes = new Uint8Array(n * n);
  for (let i = 0; i < n * n; i++) bondTypes[i] = aromaticBonds[i] === 1 ? AROMATIC : bondOrders[i];
  const neighbourLists = Array.from({ length: n }, (_, a) => neighboursOf(analysis, a));
  const chargeOf = Int8Array.from(charges.subarray(0, n));
  for (let a = 0; a < n; a++) {
    if (atomicNumbers[a] !== 7 || charges[a] !== 1) continue;
    const oxygens = neighbourLists[a].filter((b) => atomicNumbers[b] === 8 && analysis.degrees[b] === 1 && hydrogens[b] === 0);
    if (oxygens.length !== 2 || analysis.degrees[a] !== 3) continue;
    for (const oxygen of oxygens) {
      bondTypes[a * n + oxygen] = bondTypes[oxygen * n + a] = NITRO;
      chargeOf[oxygen] = 0;
    }
  }
  let keys = Array.from({ length: n }, (_, a) => `${atomicNumbers[a]},${hydrogens[a]},${chargeOf[a]},${aromaticAtoms[a]}`);
  let colours = rank(keys);
  for (;;) {
    keys = Array.from({ length: n }, (_, a) => {
      const around = neighbourLists[a].map((b) => bondTypes[a * n + b] * n + colours[b]);
      return `${String(colours[a]).padStart(3, '0')}|${around.sort((x, y) => x - y).join(',')}`;
    });
    const next = rank(keys);
    if (countDistinct(next) === countDistinct(colours)) return { analysis, atomCount: n, bondTypes, colours, neighbourLists };
    colours = next;
  }
}

/** Heavy-atom neighbours of an atom as a list. */
export function neighboursOf(analysis: StructureAnalysis, atom: number): number[] {
  return Array.from(analysis.neighbours.subarray(atom * NEIGHBOUR_STRIDE, atom * NEIGHBOUR_STRIDE + analysis.degrees[atom]));
}

function rank(keys: readonly string[]): Int32Array {
  const position = new Map([...new Set(keys)].sort().map((key, index) => [key, index]));
  return Int32Array.from(keys, (key) => position.get(key)!);
}

function countDistinct(values: Int32Array): number {
  return new Set(values).size;
}

/** A demand on an automorphism that can be judged once the images of a few atoms are known. */
export interface AutomorphismCheck {
  /** Atoms whose images the test reads. */
  readonly atoms: readonly number[];
  readonly accepts: (image: Int16Array) => boolean;
}

/** Search steps after which a question counts as answered with no; far beyond what 40 atoms of a molecule take. */
const STEP_LIMIT = 200_000;

/**
 * Looks for an automorphism of a connected graph that sends given atoms to given images and passes all checks.
 * Backtracking over atoms in an order in which each touches an earlier one, so that images are found among neighbours.
 *
 * @param forced - pairs [atom, image], at least one.
 * @returns image per atom, or null if there is none (or the step limit was hit, which only ever splits classes).
 */
export function findAutomorphism(
  normalised: NormalisedGraph,
  forced: ReadonlyArray<readonly [number, number]>,
  checks: readonly AutomorphismCheck[] = [],
): Int16Array | null {
  const { atomCount: n, colours, bondTypes, neighbourLists } = normalised;
  const wanted = new Int16Array(n).fill(-1);
  for (const [atom, target] of forced) {
    if (colours[atom] !== colours[target]) return null;
    wanted[atom] = target;
  }
  const { order, parent } = searchOrder(normalised, forced[0][0]);
  const position = new Int16Array(n);
  order.forEach((atom, index) => (position[atom] = index));
  const dueChecks: AutomorphismCheck[][] = order.map(() => []);
  for (const check of checks) dueChecks[Math.max(...check.atoms.map((atom) => position[atom]))].push(check);

  const image = new Int16Array(n).fill(-1);
  const used = new Uint8Array(n);
  let steps = 0;

  const fits = (atom: number, target: number): boolean => {
    if (used[target] === 1 || colours[target] !== colours[atom]) return false;
    for (const b of neighbourLists[atom]) {
      if (image[b] !== -1 && bondTypes[target * n + image[b]] !== bondTypes[atom * n + b]) return false;
    }
    return true;
  };
  const place = (index: number): boolean => {
    if (index === n) return true;
    if (++steps > STEP_LIMIT) return false;
    const atom = order[index];
    const targets = wanted[atom] !== -1 ? [wanted[atom]] : neighbourLists[image[parent[atom]]];
    for (const target of targets) {
      if (!fits(atom, target)) continue;
      image[atom] = target;
      used[target] = 1;
      if (dueChecks[index].every((check) => check.accepts(image)) && place(index + 1)) return true;
      image[atom] = -1;
      used[target] = 0;
    }
    return false;
  };
  return place(0) ? image : null;
}

function searchOrder(normalised: NormalisedGraph, start: number): { order: number[]; parent: Int16Array } {
  const parent = new Int16Array(normalised.atomCount).fill(-1);
  const order = [start];
  for (let head = 0; head < order.length; head++) {
    for (const next of normalised.neighbourLists[order[head]]) {
      if (next === start || parent[next] !== -1) continue;
      parent[next] = order[head];
      order.push(next);
    }
  }
  return { order, parent };
}
