import { elementOf, findElement } from '../../shared/chemistry/elements.js';
import { parseFormula } from '../../shared/chemistry/formula.js';
import { parseSmiles } from '../../shared/chemistry/smiles.js';
import type { EvidenceDocument } from '../../shared/schemas/evidence.js';
import type { InputIssue } from '../../shared/schemas/problem.js';
import { createCorrelationModel, type CorrelationModel } from '../correlations/correlation-model.js';
import { SHIFT_RANGES } from '../../shared/chemistry/shift-window-table.js';
import { carbonCensus, type CarbonCensus } from './carbon-census.js';
import { FILL_STRIDE } from './fill.js';
import { structureLimits, type StructureLimits } from './structure-limits.js';
import { groupShiftRanges } from './group-shift-ranges.js';
import { createUnitKind, type UnitKind } from './units.js';

/** Heavy atoms outside units, of one element. */
export interface FreeElement {
  readonly atomicNumber: number;
  readonly valence: number;
  readonly count: number;
}

/**
 * A required fragment of a single atom in its default valence: a demand on the molecule, not a unit. At least `count`
 * free atoms must have these hydrogens and exactly these bonds, each to another heavy atom.
 */
export interface AtomDemand {
  readonly smiles: string;
  readonly atomicNumber: number;
  readonly hydrogens: number;
  /** Orders of its bonds, falling. */
  readonly orders: readonly number[];
  readonly count: number;
}

/** Groups that arise when an atom takes the double bond of an N-oxide unit (nitro: O) or of a diazo unit (azide: N, diazo: C). */
export type PartnerGroup = 'nitro' | 'azide' | 'diazo' | 'otherDiazo';
/** At most so many double bonds that units leave open may make this group. */
export interface PartnerLimit {
  readonly group: PartnerGroup;
  readonly most: number;
}

/** What is to be enumerated: the molecule taken apart into units, free atoms and hydrogens to share out. */
export interface SearchProblem {
  readonly units: readonly UnitKind[];
  readonly demands: readonly AtomDemand[];
  readonly free: readonly FreeElement[];
  /** Hydrogens left for the free atoms. */
  readonly hydrogens: number;
  readonly heavyAtomCount: number;
  readonly census: CarbonCensus;
  readonly mergeResonanceForms: boolean;
  readonly structure: StructureLimits;
  /** COSY and HMBC pairs to meet; null = none. */
  readonly correlations: CorrelationModel | null;
  /**
   * True when the structure alone tells where each unit lies: no units, or only groups of higher valence that the search
   * forms. Then no two placements have to be compared.
   */
  readonly hasForcedPlacements: boolean;
  /** What may stand at the double bond of an N-oxide or diazo unit; empty = anything. */
  readonly partnerLimits: readonly PartnerLimit[];
}

/** Bad input found while the problem was set up: every issue with its field. */
export class ProblemError extends Error {
  constructor(readonly issues: readonly InputIssue[]) {
    super(issues.map((issue) => `${issue.path}: ${issue.message}`).join('; '));
    this.name = 'ProblemError';
  }
}

/**
 * Sets up the search for an evidence document.
 *
 * @param evidence - parsed document; its signals narrow the carbon census (attached hydrogens).
 * @returns units, demands and what is left of the formula.
 * @throws ProblemError when formula or fragments cannot be read or exceed one another.
 */
export function createProblem(evidence: EvidenceDocument): SearchProblem {
  const parsed = parseFormula(evidence.formula);
  if (!parsed.ok) throw new ProblemError([{ path: 'formula', message: parsed.message }]);
  const remaining = new Map(parsed.counts);
  const heavyAtomCount = [...remaining].reduce((sum, [symbol, count]) => sum + (symbol === 'H' ? 0 : count), 0);
  if (heavyAtomCount > FILL_STRIDE) {
    throw new ProblemError([{ path: 'formula', message: `${heavyAtomCount} heavy atoms; expected at most ${FILL_STRIDE}` }]);
  }
  const units: UnitKind[] = [];
  const demands: AtomDemand[] = [];
  const issues: InputIssue[] = [];

  const take = (symbol: string, amount: number, path: string): void => {
    const rest = (remaining.get(symbol) ?? 0) - amount;
    remaining.set(symbol, rest);
    if (rest < 0) issues.push({ path, message: `needs more ${symbol} than ${evidence.formula} has` });
  };
  evidence.fragments.required.forEach((required, index) => {
    const path = `fragments.required[${index}].smiles`;
    const read = parseSmiles(required.smiles);
    if (!read.ok) {
      issues.push({ path, message: read.message });
      return;
    }
    const { graph, attachments } = read;
    const orders = attachments.map((attachment) => attachment.order as number).sort((a, b) => b - a);
    const isDefaultValence =
      graph.atomCount === 1 &&
      graph.charges[0] === 0 &&
      orders.length > 0 &&
      graph.hydrogens[0] + orders.reduce((sum, order) => sum + order, 0) === elementOf(graph.atomicNumbers[0]).valences[0];
    if (isDefaultValence) {
      demands.push({
        smiles: required.smiles,
        atomicNumber: graph.atomicNumbers[0],
        hydrogens: graph.hydrogens[0],
        orders,
        count: required.count,
      });
      return;
    }
    units.push(createUnitKind(required.smiles, required.count, graph, attachments));
    for (let atom = 0; atom < graph.atomCount; atom++) {
      take(elementOf(graph.atomicNumbers[atom]).symbol, required.count, path);
      take('H', graph.hydrogens[atom] * required.count, path);
    }
  });
  if (issues.length > 0) throw new ProblemError(issues);
  const free: FreeElement[] = [];
  for (const [symbol, count] of remaining) {
    if (symbol === 'H' || count === 0) continue;
    const element = findElement(symbol)!;
    free.push({ atomicNumber: element.atomicNumber, valence: element.valences[0], count });
  }
  free.sort((a, b) => b.valence - a.valence || a.atomicNumber - b.atomicNumber);
  return {
    units: mergeEqualKinds(units),
    demands: mergeEqualDemands(demands),
    free,
    hydrogens: remaining.get('H') ?? 0,
    heavyAtomCount,
    census: carbonCensus(evidence, parsed.counts, [...SHIFT_RANGES, ...units.flatMap(groupShiftRanges)]),
    mergeResonanceForms: evidence.options.mergeResonanceForms,
    structure: structureLimits(evidence),
    correlations: createCorrelationModel(evidence),
    hasForcedPlacements: units.length === 0,
    partnerLimits: [],
  };
}

/** The same fragment listed twice is one kind with both counts. */
export function mergeEqualKinds(units: readonly UnitKind[]): UnitKind[] {
  const merged = new Map<string, UnitKind>();
  for (const unit of units) {
    const known = merged.get(unit.canonicalKey);
    merged.set(unit.canonicalKey, known === undefined ? unit : { ...known, count: known.count + unit.count });
  }
  return [...merged.values()];
}

function mergeEqualDemands(demands: readonly AtomDemand[]): AtomDemand[] {
  const merged = new Map<string, AtomDemand>();
  for (const demand of demands) {
    const key = `${demand.atomicNumber}/${demand.hydrogens}/${demand.orders.join()}`;
    const known = merged.get(key);
    merged.set(key, known === undefined ? demand : { ...known, count: known.count + demand.count });
  }
  return [...merged.values()];
}
