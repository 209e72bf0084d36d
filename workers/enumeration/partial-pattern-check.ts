import type { QueryAtom, QueryGraph } from '../../shared/chemistry/excluded-pattern.js';
import type { MolecularGraph } from '../../shared/types/molecular-graph.js';
import { MAX_ATOMS, NEIGHBOUR_STRIDE } from '../graph/analysis.js';
import { SubstructureMatcher, type MatchedStructure } from '../graph/substructure.js';
import type { FillLayout } from './layout.js';
import type { PartialCheck } from './partial-checks.js';
import type { ExcludedPattern } from './structure-limits.js';

const CARBON = 6;
const SILICON = 14;
const FLUORINE = 9;
const SULFUR = 16;

/**
 * Excluded patterns looked for in a matrix that is still being filled: bonds are only added, so what is found stays. An
 * atom counts as possibly aromatic until its complete surroundings rule that out, and between two such atoms no bond is
 * taken for a plain single, double or triple one.
 */
export function createPartialPatternChecks(patterns: readonly ExcludedPattern[], layout: FillLayout): PartialCheck[] {
  if (patterns.length === 0) return [];
  const structure = new PartialStructure(layout);
  return patterns.map(({ smiles, query }, k) => {
    const matcher = new SubstructureMatcher(query);
    return {
      reason: `excludedFragment:${smiles}`,
      text: `The excluded fragment ${smiles} was there already.`,
      test(_filled, known, molecule) {
        // Checks are asked in their order for the same matrix: the first one brings the structure up to date for all.
        if (k === 0) structure.update(molecule, known);
        return !matcher.occursIn(structure);
      },
    };
  });
}

class PartialStructure implements MatchedStructure {
  graph: MolecularGraph;
  readonly neighbours = new Uint8Array(MAX_ATOMS * NEIGHBOUR_STRIDE);
  readonly degrees = new Uint8Array(MAX_ATOMS);
  /** 1 = possibly aromatic. */
  readonly aromaticAtoms = new Uint8Array(MAX_ATOMS);
  readonly aromaticBonds: Uint8Array;
  readonly #open: number;
  /** Atoms that can be aromatic in some completion, as far as the layout tells. */
  readonly #able: Uint8Array;

  constructor(layout: FillLayout) {
    const { base, open } = layout;
    this.graph = base;
    this.#open = open;
    this.#able = Uint8Array.from({ length: base.atomCount }, (_, atom) => (canBeAromatic(layout, atom) ? 1 : 0));
    this.aromaticBonds = new Uint8Array(base.atomCount ** 2);
  }

  update(molecule: Uint8Array, known: number): void {
    if (this.graph.bondOrders !== molecule) this.graph = { ...this.graph, bondOrders: molecule };
    const { atomCount: n, atomicNumbers } = this.graph;
    const { neighbours, degrees, aromaticAtoms, aromaticBonds } = this;
    for (let a = 0; a < n; a++) {
      let degree = 0;
      let isUnsaturated = false;
      for (let b = 0; b < n; b++) {
        const order = molecule[a * n + b];
        if (order === 0) continue;
        neighbours[a * NEIGHBOUR_STRIDE + degree++] = b;
        if (order > 1) isUnsaturated = true;
      }
      degrees[a] = degree;
      const isComplete = a < known || a >= this.#open;
      const needsDouble = atomicNumbers[a] === CARBON || atomicNumbers[a] === SILICON;
      aromaticAtoms[a] = this.#able[a] === 1 && !(isComplete && needsDouble && !isUnsaturated && this.graph.charges[a] === 0) ? 1 : 0;
    }
    // A complete atom in an aromatic ring has two neighbours in it.
    for (let changed = true; changed;) {
      changed = false;
      for (let a = 0; a < n; a++) {
        if (aromaticAtoms[a] === 0 || (a >= known && a < this.#open)) continue;
        let able = 0;
        for (let k = 0; k < degrees[a]; k++) able += aromaticAtoms[neighbours[a * NEIGHBOUR_STRIDE + k]];
        if (able >= 2) continue;
        aromaticAtoms[a] = 0;
        changed = true;
      }
    }
    for (let a = 0; a < n; a++) {
      for (let k = 0; k < degrees[a]; k++) {
        const b = neighbours[a * NEIGHBOUR_STRIDE + k];
        aromaticBonds[a * n + b] = aromaticAtoms[a] & aromaticAtoms[b];
      }
    }
  }
}

/** False for atoms that no completion of the layout puts into an aromatic ring. */
function canBeAromatic({ base, open, freeValence, bondQuota }: FillLayout, atom: number): boolean {
  const n = base.atomCount;
  const element = base.atomicNumbers[atom];
  if (element === FLUORINE || element > SULFUR) return false;
  let degree = 0;
  let isUnsaturated = base.charges[atom] !== 0 || (element !== CARBON && element !== SILICON);
  for (let other = 0; other < n; other++) {
    const order = base.bondOrders[atom * n + other];
    if (order > 0) degree++;
    if (order > 1) isUnsaturated = true;
  }
  const free = atom < open ? freeValence[atom] : 0;
  if (atom < open && bondQuota[4 * atom] !== 255) {
    if (bondQuota[4 * atom + 2] + bondQuota[4 * atom + 3] > 0) isUnsaturated = true;
    degree += bondQuota[4 * atom + 1] + bondQuota[4 * atom + 2] + bondQuota[4 * atom + 3];
    return isUnsaturated && degree >= 2;
  }
  // Two ring bonds, and for carbon one of them double.
  return degree + free >= (isUnsaturated ? 2 : 3);
}

/**
 * Orders of bonds that excluded patterns of two atoms leave to each pair of vertices, where aromaticity cannot matter.
 *
 * @returns see {@link FillLayout.allowedOrders}; null when everything is left.
 */
export function listAllowedOrders(patterns: readonly ExcludedPattern[], layout: FillLayout, stride: number): Uint8Array | null {
  const pairs = patterns.filter(({ query }) => query.atoms.length === 2 && query.bonds.length === 1);
  if (pairs.length === 0) return null;
  const { base, open } = layout;
  const able = Array.from({ length: open }, (_, atom) => canBeAromatic(layout, atom));
  const allowed = new Uint8Array(stride * stride).fill(0b1110);
  for (let i = 0; i < open; i++) {
    for (let j = i + 1; j < open; j++) {
      let orders = 0b1110;
      for (const { query } of pairs) {
        if (!fitsPair(query, base, i, j) && !fitsPair(query, base, j, i)) continue;
        const { kind } = query.bonds[0];
        if (kind === 'any') orders = 0;
        else if (!able[i] || !able[j]) orders &= ~(kind === 'single' ? 2 : kind === 'double' ? 4 : 8);
      }
      allowed[i * stride + j] = allowed[j * stride + i] = orders;
    }
  }
  return allowed;
}

function fitsPair({ atoms, bonds }: QueryGraph, graph: MolecularGraph, a: number, b: number): boolean {
  return fitsAtom(atoms[bonds[0].from], graph, a) && fitsAtom(atoms[bonds[0].to], graph, b);
}

function fitsAtom({ atomicNumber, hydrogens, minHydrogens, charge }: QueryAtom, graph: MolecularGraph, atom: number): boolean {
  return (
    (atomicNumber === 0 || atomicNumber === graph.atomicNumbers[atom]) &&
    (hydrogens === null || hydrogens === graph.hydrogens[atom]) &&
    graph.hydrogens[atom] >= minHydrogens &&
    (charge === null || charge === graph.charges[atom])
  );
}
