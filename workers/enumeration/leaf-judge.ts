import type { MolecularGraph } from '../../shared/types/molecular-graph.js';
import { perceiveAromaticity } from '../graph/aromaticity.js';
import { canonicalForm, compareCodes } from '../graph/canonical.js';
import { atomColour } from '../graph/atom-colour.js';
import { placeForm, type SearchLayout } from './distributions.js';
import { FILL_STRIDE } from './fill.js';
import { forEachKekuleForm, hasAlternatingCycle } from './kekule.js';
import { constitutionCode, listPlacementSets, meetsDemands, placementCode } from './placements.js';
import type { SearchProblem } from './problem.js';
import { RESONANT_BOND } from './units.js';

/** What a filled matrix stands for. */
export interface LeafVerdict {
  /** Valence multigraphs it contributes, Kekulé forms counted apart. */
  readonly multigraphs: number;
  /** Constitutions to hand on: none when another matrix stands for the same one. */
  readonly graphs: readonly MolecularGraph[];
}

const NOTHING: LeafVerdict = { multigraphs: 0, graphs: [] };

/**
 * Decides which filled matrices stand for a constitution, without remembering any.
 *
 * A matrix is a molecule with its units in place. The same constitution can come up with other placements of the units
 * and in other Kekulé forms; of all these pairs the one with the greatest canonical code stands for it, so each leaf can
 * decide alone, in any shard and any order.
 */
export function createLeafJudge(problem: SearchProblem, layout: SearchLayout): (filled: Uint8Array) => LeafVerdict {
  const { units, demands } = problem;
  const n = problem.heavyAtomCount;
  const { open, base, freeVertices } = layout;
  const graph: MolecularGraph = { ...base, bondOrders: new Uint8Array(n * n) };
  const own = { multigraphs: 1, graphs: [graph] };
  const usedByUnits = new Uint8Array(n).fill(1);
  for (const vertex of freeVertices) usedByUnits[vertex] = 0;
  /** Bonds inside units whose order varies between Kekulé forms: a placement matches all of them. */
  const inner = new Uint8Array(n * n);
  for (const { kind, vertices } of layout.placedUnits) {
    const { labels, graph: unitGraph } = units[kind];
    const size = unitGraph.atomCount;
    for (let i = 0; i < size; i++)
      for (let j = 0; j < size; j++) if (labels[i * size + j] === RESONANT_BOND) inner[vertices[i] * n + vertices[j]] = 1;
  }
  const formChoices = listFormChoices(problem, layout);
  const colours = Uint16Array.from({ length: n }, (_, atom) => atomColour(base, atom));
  // Three double bonds and a ring are the least that has a second Kekulé form.
  const merge = problem.mergeResonanceForms && unsaturationOf(layout) >= 4;

  const build = (filled: Uint8Array): void => {
    const { bondOrders } = graph;
    if (!layout.isPlain) bondOrders.set(base.bondOrders);
    for (let i = 0; i < open; i++) {
      const to = i * n;
      const from = i * FILL_STRIDE;
      if (layout.isPlain) for (let j = 0; j < open; j++) bondOrders[to + j] = filled[from + j];
      else for (let j = 0; j < open; j++) if (filled[from + j] !== 0) bondOrders[to + j] = filled[from + j];
    }
  };

  /** No units: the multigraph itself; with merging it stands for its class when no other form has a greater code. */
  const judgePlain = (): LeafVerdict => {
    if (!meetsDemands(graph, demands, usedByUnits)) return NOTHING;
    if (!merge || !hasAlternatingCycle(n, graph.bondOrders, null)) return own;
    const aromaticity = perceiveAromaticity(graph);
    if (!aromaticity.hasAromaticRing) return own;
    const code = canonicalForm(n, colours, graph.bondOrders).code;
    const beaten = forEachKekuleForm(graph, aromaticity, (form) => compareCodes(constitutionCode(graph, form), code) > 0);
    return beaten ? { multigraphs: 1, graphs: [] } : own;
  };

  /** Is the own placement the greatest one of the molecule in the Kekulé form that `molecule` holds? */
  const isGreatestIn = (molecule: MolecularGraph, code: () => Uint16Array, holdsOwnPlacement: boolean): boolean => {
    const sets = listPlacementSets(molecule, units, demands);
    // A lone set can only be the own one: no code is needed.
    if (holdsOwnPlacement && sets.length === 1) return true;
    return !sets.some((placements) => compareCodes(placementCode(molecule, units, placements), code()) > 0);
  };

  const judgeWithUnits = (): LeafVerdict => {
    if (!meetsDemands(graph, demands, usedByUnits)) return NOTHING;
    let cached: Uint16Array | null = null;
    const code = (): Uint16Array => (cached ??= placementCode(graph, units, layout.placedUnits));
    const greatestHere = isGreatestIn(graph, code, true);

    let multigraphs = greatestHere ? 1 : 0;
    let distinct: MolecularGraph[] = greatestHere ? [graph] : [];
    if (formChoices.length > 1) {
      const seen = new Set<string>();
      multigraphs = 0;
      distinct = [];
      for (const choice of formChoices) {
        const variant: MolecularGraph = { ...graph, bondOrders: graph.bondOrders.slice() };
        layout.placedUnits.forEach(({ kind, vertices }, k) => placeForm(variant, units[kind], choice[k], vertices));
        const key = constitutionCode(variant).join();
        if (seen.has(key)) continue;
        seen.add(key);
        if (!isGreatestIn(variant, code, true)) continue;
        multigraphs++;
        distinct.push(variant);
      }
    }
    if (!merge) return { multigraphs, graphs: distinct };
    if (!hasAlternatingCycle(n, graph.bondOrders, inner))
      return greatestHere ? { multigraphs, graphs: [graph] } : { multigraphs, graphs: [] };
    const aromaticity = perceiveAromaticity(graph);
    const form: MolecularGraph = { ...graph };
    const beaten = forEachKekuleForm(graph, aromaticity, (bondOrders) => !isGreatestIn({ ...form, bondOrders }, code, false));
    return { multigraphs, graphs: beaten ? [] : [graph] };
  };

  return (filled) => {
    build(filled);
    return units.length === 0 ? judgePlain() : judgeWithUnits();
  };
}

/** Rings plus double bonds of every molecule of a layout. */
function unsaturationOf(layout: SearchLayout): number {
  const { base, freeValence } = layout;
  const inside = base.bondOrders.reduce((sum, order) => sum + order, 0);
  const outside = freeValence.reduce((sum, valence) => sum + valence, 0);
  return (inside + outside) / 2 - base.atomCount + 1;
}

/** Every combination of Kekulé forms over the placed units, the layout's own first. */
function listFormChoices(problem: SearchProblem, layout: SearchLayout): Uint8Array[][] {
  let choices: Uint8Array[][] = [[]];
  for (const { kind } of layout.placedUnits) choices = choices.flatMap((head) => problem.units[kind].forms.map((form) => [...head, form]));
  return choices;
}
