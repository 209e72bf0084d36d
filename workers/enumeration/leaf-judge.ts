import type { MolecularGraph } from '../../shared/types/molecular-graph.js';
import { perceiveAromaticity } from '../graph/aromaticity.js';
import { canonicalForm, compareCodes } from '../graph/canonical.js';
import { atomColour } from '../graph/atom-colour.js';
import { placeForm, type SearchLayout } from './distributions.js';
import { forEachKekuleForm } from './kekule.js';
import { constitutionCode, listPlacementSets, meetsDemands, placementCode } from './placements.js';
import type { SearchProblem } from './problem.js';

/** What a filled matrix stands for. */
export interface LeafVerdict {
  /** Valence multigraphs it contributes, Kekulé forms counted apart. */
  readonly multigraphs: number;
  /** Constitutions to hand on: none when another matrix stands for the same one. */
  readonly graphs: readonly MolecularGraph[];
}

/** @param molecule - bond orders as the fill hands them over; the verdict's first graph holds this very buffer. */
export type LeafJudge = (molecule: Uint8Array, mayHaveOtherForms: boolean) => LeafVerdict;

const NOTHING: LeafVerdict = { multigraphs: 0, graphs: [] };

/**
 * Decides which filled matrices stand for a constitution, without remembering any.
 *
 * A matrix is a molecule with its units in place. The same constitution can come up with other placements of the units
 * and in other Kekulé forms; of all these pairs the one with the greatest canonical code stands for it, so each leaf can
 * decide alone, in any shard and any order.
 */
export function createLeafJudge(problem: SearchProblem, layout: SearchLayout): LeafJudge {
  const { units, demands } = problem;
  const n = problem.heavyAtomCount;
  const { base, freeVertices } = layout;
  let graph: MolecularGraph = base;
  let own: LeafVerdict = NOTHING;
  const beatenByForm: LeafVerdict = { multigraphs: 1, graphs: [] };
  const usedByUnits = new Uint8Array(n).fill(1);
  for (const vertex of freeVertices) usedByUnits[vertex] = 0;
  const formChoices = listFormChoices(problem, layout);
  const colours = Uint16Array.from({ length: n }, (_, atom) => atomColour(base, atom));

  /** The structure tells where its units lie: it stands for its class when no other Kekulé form has a greater code. */
  const judgeForced = (mayHaveOtherForms: boolean): LeafVerdict => {
    if (!mayHaveOtherForms) return own;
    const aromaticity = perceiveAromaticity(graph);
    if (!aromaticity.hasAromaticRing) return own;
    const code = canonicalForm(n, colours, graph.bondOrders).code;
    const beaten = forEachKekuleForm(graph, aromaticity, (form) => compareCodes(constitutionCode(graph, form), code) > 0);
    return beaten ? beatenByForm : own;
  };

  /** Is the own placement the greatest one of the molecule in the Kekulé form that `molecule` holds? */
  const isGreatestIn = (molecule: MolecularGraph, code: () => Uint16Array, holdsOwnPlacement: boolean): boolean => {
    const sets = listPlacementSets(molecule, units, demands);
    // A lone set can only be the own one: no code is needed.
    if (holdsOwnPlacement && sets.length === 1) return true;
    return !sets.some((placements) => compareCodes(placementCode(molecule, units, placements), code()) > 0);
  };

  const judgePlacements = (mayHaveOtherForms: boolean): LeafVerdict => {
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
    if (!problem.mergeResonanceForms) return { multigraphs, graphs: distinct };
    if (!mayHaveOtherForms) return greatestHere ? { multigraphs, graphs: [graph] } : { multigraphs, graphs: [] };
    const aromaticity = perceiveAromaticity(graph);
    const form: MolecularGraph = { ...graph };
    const beaten = forEachKekuleForm(graph, aromaticity, (bondOrders) => !isGreatestIn({ ...form, bondOrders }, code, false));
    return { multigraphs, graphs: beaten ? [] : [graph] };
  };

  return (molecule, mayHaveOtherForms) => {
    if (graph.bondOrders !== molecule) {
      graph = { ...base, bondOrders: molecule };
      own = { multigraphs: 1, graphs: [graph] };
    }
    if (demands.length > 0 && !meetsDemands(graph, demands, usedByUnits)) return NOTHING;
    return problem.hasForcedPlacements ? judgeForced(mayHaveOtherForms) : judgePlacements(mayHaveOtherForms);
  };
}

/** Every combination of Kekulé forms over the placed units, the layout's own first. */
function listFormChoices(problem: SearchProblem, layout: SearchLayout): Uint8Array[][] {
  let choices: Uint8Array[][] = [[]];
  for (const { kind } of layout.placedUnits) choices = choices.flatMap((head) => problem.units[kind].forms.map((form) => [...head, form]));
  return choices;
}
