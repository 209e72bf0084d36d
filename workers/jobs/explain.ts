import { formatHill, formulaCounts, parseFormula } from '../../shared/chemistry/formula.js';
import { elementOf } from '../../shared/chemistry/elements.js';
import { resolveOptions } from '../../shared/chemistry/resolve-options.js';
import { compositionOf, parseSmiles } from '../../shared/chemistry/smiles.js';
import type { Explanation, JobContract } from '../../shared/jobs/contract.js';
import { VALENCE_GROUP_NAMES } from '../../shared/chemistry/valence-group-names.js';
import type { ValenceGroup } from '../../shared/schemas/evidence.js';
import type { MolecularGraph } from '../../shared/types/molecular-graph.js';
import { perceiveAromaticity } from '../graph/aromaticity.js';
import { constitutionKey } from '../graph/constitution-key.js';
import { forEachKekuleForm } from '../enumeration/kekule.js';
import { findPlacements, listPlacementSets, meetsDemands } from '../enumeration/placements.js';
import { ProblemError, type SearchProblem } from '../enumeration/problem.js';
import { findGroups, type FormableGroups } from '../enumeration/valence-groups.js';
import { explainEvaluation } from '../ranking/evaluator.js';
import { searchFor } from './search-cache.js';

type Reason = Extract<Explanation, { kind: 'rejected' }>['reasons'][number];

/**
 * Tells why a structure is not among the survivors of a run, or that it survives and with which score.
 *
 * @returns atom numbers in the order of the given SMILES.
 * @throws ProblemError when the SMILES cannot be read.
 */
export function explainStructure({ evidence, settings, smiles }: JobContract['explain']['input']): Explanation {
  const read = parseSmiles(smiles);
  if (!read.ok) throw new ProblemError([{ path: 'smiles', message: read.message }]);
  if (read.attachments.length > 0) throw new ProblemError([{ path: 'smiles', message: 'expected a whole structure without *' }]);
  const { graph } = read;
  const expected = parseFormula(evidence.formula);
  const formula = formatHill(formulaCounts(compositionOf(graph)));
  if (expected.ok && formula !== formatHill(expected.counts)) {
    return { kind: 'otherFormula', formula, expected: formatHill(expected.counts), smiles };
  }
  const key = constitutionKey(graph, evidence.options.mergeResonanceForms);
  const { required, groups } = searchFor(evidence, settings.mode);
  const missing = [...fragmentReasons(graph, required), ...valenceReasons(graph, required, groups)];
  if (missing.length > 0) return { kind: 'rejected', stage: 'constitutions', reasons: missing, key, smiles };
  const evaluation = explainEvaluation(resolveOptions(evidence, settings.mode), settings, graph);
  if (evaluation.kind === 'rejected') return { ...evaluation, key, smiles };
  return { ...evaluation, key, smiles };
}

/** Required fragments that the structure lacks, in any Kekulé form. */
function fragmentReasons(graph: MolecularGraph, problem: SearchProblem): Reason[] {
  if (problem.units.length === 0 && problem.demands.length === 0) return [];
  let holdsAll = false;
  const mostPlacements = problem.units.map(() => 0);
  forEachKekuleForm(graph, perceiveAromaticity(graph), (bondOrders) => {
    const form = { ...graph, bondOrders };
    problem.units.forEach((unit, k) => (mostPlacements[k] = Math.max(mostPlacements[k], findPlacements(form, unit).length)));
    holdsAll = listPlacementSets(form, problem.units, problem.demands).length > 0;
    return holdsAll;
  });
  if (holdsAll) return [];
  const reasons: Reason[] = [];
  const lacking = (smiles: string, count: number, found: number): void => {
    const text =
      found === 0
        ? `The required fragment ${smiles} is not in it.`
        : `The required fragment ${smiles} is in it ${found} times, not ${count}.`;
    reasons.push({ reason: 'requiredFragment', text, atoms: [] });
  };
  problem.units.forEach((unit, k) => {
    if (mostPlacements[k] < unit.count) lacking(unit.smiles, unit.count, mostPlacements[k]);
  });
  const none = new Uint8Array(graph.atomCount);
  for (const demand of problem.demands) {
    let found = 0;
    while (found < demand.count && meetsDemands(graph, [{ ...demand, count: found + 1 }], none)) found++;
    if (found < demand.count) lacking(demand.smiles, demand.count, found);
  }
  if (reasons.length === 0) {
    reasons.push({
      reason: 'requiredFragment',
      text: 'Each required fragment is in it, but not all of them on different atoms.',
      atoms: [],
    });
  }
  return reasons;
}

/**
 * Atoms in a higher or charge-separated valence state that neither a required fragment nor a group that the search may
 * form accounts for.
 */
function valenceReasons(graph: MolecularGraph, problem: SearchProblem, groups: FormableGroups): Reason[] {
  const special = specialAtoms(graph);
  if (special.length === 0) return [];
  let fewest: Reason[] | null = null;
  forEachKekuleForm(graph, perceiveAromaticity(graph), (bondOrders) => {
    for (const placed of listPlacementSets({ ...graph, bondOrders }, problem.units, problem.demands)) {
      const inFragments = new Set(placed.flatMap(({ vertices }) => vertices));
      const reasons = uncoveredReasons(
        graph,
        special.filter((atom) => !inFragments.has(atom)),
        groups,
      );
      if (fewest === null || reasons.length < fewest.length) fewest = reasons;
    }
    return fewest !== null && fewest.length === 0;
  });
  return fewest ?? uncoveredReasons(graph, special, groups);
}

/** One reason for each kind of group that the search may not form, and one for what is no such group. */
function uncoveredReasons(graph: MolecularGraph, atoms: readonly number[], groups: FormableGroups): Reason[] {
  const byGroup = new Map<ValenceGroup | null, number[]>();
  for (const { group, kind, atoms: own } of findGroups(graph, atoms)) {
    if (kind !== null && groups.formable.has(kind)) continue;
    byGroup.set(group, [...(byGroup.get(group) ?? []), ...own]);
  }
  return [...byGroup].map(([group, own]) => ({ reason: 'valenceState', text: describeValence(group, groups), atoms: own }));
}

function describeValence(group: ValenceGroup | null, groups: FormableGroups): string {
  if (group === null)
    return 'It has a higher or charge-separated valence state that the search forms only inside a required fragment. Add this part as a required fragment.';
  const { name } = VALENCE_GROUP_NAMES[group];
  const ruledOut = groups.notes.find((note) => note.startsWith(`${name} `));
  return ruledOut === undefined
    ? `It holds a group that this run does not form (${name}). Allow it under groups of higher valence, or add it as a required fragment.`
    : `It holds a group that this run does not form. ${ruledOut}`;
}

/** Charged atoms and atoms with more bonds than their default valence. */
function specialAtoms(graph: MolecularGraph): number[] {
  const n = graph.atomCount;
  const special: number[] = [];
  for (let atom = 0; atom < n; atom++) {
    let orders = graph.hydrogens[atom];
    for (let other = 0; other < n; other++) orders += graph.bondOrders[atom * n + other];
    if (graph.charges[atom] !== 0 || orders > elementOf(graph.atomicNumbers[atom]).defaultValence) special.push(atom);
  }
  return special;
}
