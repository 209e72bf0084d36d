import { formatHill, formulaCounts, parseFormula } from '../../shared/chemistry/formula.js';
import { elementOf } from '../../shared/chemistry/elements.js';
import { resolveOptions } from '../../shared/chemistry/resolve-options.js';
import { compositionOf, parseSmiles } from '../../shared/chemistry/smiles.js';
import type { Explanation, JobContract } from '../../shared/jobs/contract.js';
import type { MolecularGraph } from '../../shared/types/molecular-graph.js';
import { perceiveAromaticity } from '../graph/aromaticity.js';
import { constitutionKey } from '../graph/constitution-key.js';
import { forEachKekuleForm } from '../enumeration/kekule.js';
import { findPlacements, listPlacementSets, meetsDemands } from '../enumeration/placements.js';
import { ProblemError, type SearchProblem } from '../enumeration/problem.js';
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
  const { problem } = searchFor(evidence, settings.mode);
  const missing = [...fragmentReasons(graph, problem), ...valenceReasons(graph, problem)];
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

/** Atoms in a valence state that the search forms only inside required fragments. */
function valenceReasons(graph: MolecularGraph, problem: SearchProblem): Reason[] {
  const n = graph.atomCount;
  const unusual: number[] = [];
  for (let atom = 0; atom < n; atom++) {
    let orders = graph.hydrogens[atom];
    for (let other = 0; other < n; other++) orders += graph.bondOrders[atom * n + other];
    if (graph.charges[atom] !== 0 || orders > elementOf(graph.atomicNumbers[atom]).defaultValence) unusual.push(atom);
  }
  if (unusual.length === 0) return [];
  const sets = listPlacementSets(graph, problem.units, problem.demands);
  const uncovered = (placed: readonly { vertices: readonly number[] }[]): number[] =>
    unusual.filter((atom) => !placed.some(({ vertices }) => vertices.includes(atom)));
  const fewest = sets.map(uncovered).sort((a, b) => a.length - b.length)[0] ?? unusual;
  if (fewest.length === 0) return [];
  return [
    {
      reason: 'valenceState',
      text: 'It has a higher or charge-separated valence state; the search forms these only inside a required fragment. Add the group as a required fragment.',
      atoms: fewest,
    },
  ];
}
