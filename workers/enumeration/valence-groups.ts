import { elementOf } from '../../shared/chemistry/elements.js';
import { parseExcludedPattern } from '../../shared/chemistry/excluded-pattern.js';
import { parseFormula } from '../../shared/chemistry/formula.js';
import { parseFragment, type Fragment } from '../../shared/chemistry/fragment.js';
import { SHIFT_RANGES, type ShiftRange } from '../../shared/chemistry/shift-window-table.js';
import { VALENCE_GROUP_NAMES } from '../../shared/chemistry/valence-group-names.js';
import { doesPatternOccurIn } from '../../shared/chemistry/pattern-in-fragment.js';
import type { EvidenceDocument, ValenceGroup } from '../../shared/schemas/evidence.js';
import type { MolecularGraph } from '../../shared/types/molecular-graph.js';
import { carbonCensus, type CarbonCensus } from './carbon-census.js';
import type { SearchLayout } from './distributions.js';
import { FILL_STRIDE } from './fill.js';
import { groupShiftRanges } from './group-shift-ranges.js';
import { missingBandsOf } from './infrared-absence.js';
import { findPlacements } from './placements.js';
import { mergeEqualKinds, type FreeElement, type PartnerGroup, type PartnerLimit, type SearchProblem } from './problem.js';
import { createUnitKind, type UnitKind } from './units.js';

/**
 * The kinds of each group as fragments. Every special atom (N⁺, N⁻, O⁻, C⁻, S 4 and 6, P 5) lies in exactly one of
 * them, with these neighbours; that is what keeps the sub-searches of different copy numbers apart.
 */
const GROUP_KINDS = [
  { id: 'nitro', group: 'nitro', smiles: '*[N+](=O)[O-]' },
  { id: 'oxideOfAmine', group: 'nOxide', smiles: '*[N+](*)(*)[O-]' },
  { id: 'oxideAtDoubleBond', group: 'nOxide', smiles: '*=[N+](*)[O-]' },
  { id: 'oxideOfNitrile', group: 'nOxide', smiles: '*#[N+][O-]' },
  { id: 'azide', group: 'azide', smiles: '*N=[N+]=[N-]' },
  { id: 'diazo', group: 'diazo', smiles: '*=[N+]=[N-]' },
  { id: 'isocyanide', group: 'isocyanide', smiles: '*[N+]#[C-]' },
  { id: 'sulfoxide', group: 'sulfoxide', smiles: '*S(*)=O' },
  { id: 'sulfone', group: 'sulfone', smiles: '*S(*)(=O)=O' },
  { id: 'phosphorylP', group: 'phosphorusOxide', smiles: '*P(*)(*)=O' },
  { id: 'phosphorylPH', group: 'phosphorusOxide', smiles: '*[PH](*)=O' },
  { id: 'phosphorylPH2', group: 'phosphorusOxide', smiles: '*[PH2]=O' },
] as const satisfies ReadonlyArray<{ id: string; group: ValenceGroup; smiles: string }>;
export type ValenceGroupKind = (typeof GROUP_KINDS)[number]['id'];

/** Stands for azide and diazo groups. */
const DIAZO_UNIT = '*=[N+]=[N-]';

const fragmentOf = new Map<string, Fragment>();
function readKind(smiles: string): Fragment {
  const known = fragmentOf.get(smiles);
  if (known !== undefined) return known;
  const read = parseFragment(smiles);
  if (!read.ok) throw new Error(`${smiles}: ${read.message}`);
  fragmentOf.set(smiles, read.fragment);
  return read.fragment;
}

/** A unit that the search places by itself, any number of times. */
export interface FormedUnit {
  /** With count 1. */
  readonly kind: UnitKind;
  /** Element symbol → atoms, hydrogens included. */
  readonly composition: ReadonlyMap<string, number>;
  /** Terminal O with a double bond in it: each meets a required one-atom fragment O=*. */
  readonly doubleBondedOxygens: number;
}

/** What a document lets the search form. */
export interface FormableGroups {
  readonly formable: ReadonlySet<ValenceGroupKind>;
  readonly units: readonly FormedUnit[];
  /** Groups that must not arise at the open double bond of a formed unit. */
  readonly forbiddenPartners: readonly PartnerGroup[];
  /** Bounds from the 13C list with more shift ranges than the fitted ones. */
  censusWith(ranges: readonly ShiftRange[]): CarbonCensus;
  /** Groups that were asked for and that the formula has atoms for, but that the evidence rules out: one sentence each. */
  readonly notes: readonly string[];
}

/**
 * Settles which groups of higher valence the search forms: those of `options.valenceGroups` that neither an excluded
 * fragment nor the infrared list rules out.
 *
 * Nitro is an N-oxide whose double bond goes to oxygen, an azide a diazo unit whose double bond goes to nitrogen. Where
 * both of a pair may be formed, one unit with an open double bond stands for them, because then the number of units
 * follows from the structure whatever fragments are required beside them.
 *
 * @param available - atoms by element symbol that required fragments leave.
 */
export function formableGroups(evidence: EvidenceDocument, available: ReadonlyMap<string, number>): FormableGroups {
  const notes: string[] = [];
  const allowed = new Set<ValenceGroupKind>();
  const excluded = evidence.fragments.excluded.flatMap(({ smiles }) => {
    const read = parseExcludedPattern(smiles);
    return read.kind === 'query' ? [{ smiles, query: read.query }] : [];
  });
  for (const group of evidence.options.valenceGroups ?? []) {
    // The nitrogen beside the N₂ of an azide may lie in a required fragment.
    const kinds = GROUP_KINDS.filter(
      (kind) => kind.group === group && fits(readKind(kind.id === 'azide' ? DIAZO_UNIT : kind.smiles), available),
    );
    if (kinds.length === 0) continue;
    const { name } = VALENCE_GROUP_NAMES[group];
    const missing = missingBandsOf(group, evidence.infraredBands);
    if (missing !== null) {
      notes.push(`${name} groups were left out: ${missing}.`);
      continue;
    }
    const matched = new Set<string>();
    let left = 0;
    for (const { id, smiles } of kinds) {
      const pattern = excluded.find(({ query }) => doesPatternOccurIn(query, readKind(smiles)));
      if (pattern !== undefined) {
        matched.add(pattern.smiles);
        continue;
      }
      allowed.add(id);
      left++;
    }
    if (left === 0) notes.push(`${name} groups were left out: the excluded fragment ${[...matched].join(' or ')} is part of them.`);
  }

  const forbiddenPartners: PartnerGroup[] = ['otherDiazo'];
  const smiles: string[] = [];
  for (const kind of GROUP_KINDS) {
    if (!allowed.has(kind.id) || kind.id === 'azide' || kind.id === 'diazo') continue;
    if (kind.id === 'nitro' && allowed.has('oxideAtDoubleBond')) continue;
    smiles.push(kind.smiles);
  }
  if (!allowed.has('nitro')) forbiddenPartners.push('nitro');
  if (allowed.has('azide') || allowed.has('diazo')) {
    smiles.push(DIAZO_UNIT);
    if (!allowed.has('azide')) forbiddenPartners.push('azide');
    if (!allowed.has('diazo')) forbiddenPartners.push('diazo');
  }
  return { formable: allowed, units: smiles.map(createFormedUnit), forbiddenPartners, notes, censusWith: censuses(evidence) };
}

function fits(fragment: Fragment, available: ReadonlyMap<string, number>): boolean {
  return [...fragment.composition].every(([symbol, count]) => (available.get(symbol) ?? 0) >= count);
}

function createFormedUnit(smiles: string): FormedUnit {
  const { graph, attachments, composition } = readKind(smiles);
  let doubleBondedOxygens = 0;
  for (let atom = 0; atom < graph.atomCount; atom++) {
    const bonds = graph.bondOrders.subarray(atom * graph.atomCount, (atom + 1) * graph.atomCount);
    if (graph.atomicNumbers[atom] === 8 && graph.charges[atom] === 0 && bonds.includes(2)) doubleBondedOxygens++;
  }
  return {
    kind: createUnitKind(smiles, 1, graph, attachments),
    composition,
    doubleBondedOxygens,
  };
}

/** Censuses of a document by what is added to the fitted shift ranges, each made once. */
function censuses(evidence: EvidenceDocument): FormableGroups['censusWith'] {
  const made = new Map<string, CarbonCensus>();
  return (ranges) => {
    const key = JSON.stringify(ranges);
    const formula = parseFormula(evidence.formula);
    if (!formula.ok) throw new Error(`formula checked before: ${formula.message}`);
    const census = made.get(key) ?? carbonCensus(evidence, formula.counts, [...SHIFT_RANGES, ...ranges]);
    made.set(key, census);
    return census;
  };
}

/**
 * Adds copies of formed units to what fragments and formula give.
 *
 * @param base - without formed units. @param copies - of each formed unit; the atoms must suffice.
 */
export function withFormedUnits(base: SearchProblem, groups: FormableGroups, copies: readonly number[]): SearchProblem {
  const needed = new Map<string, number>();
  let oxygens = 0;
  const formed: UnitKind[] = [];
  groups.units.forEach(({ kind, composition, doubleBondedOxygens }, k) => {
    if (copies[k] === 0) return;
    formed.push({ ...kind, count: copies[k] });
    oxygens += copies[k] * doubleBondedOxygens;
    for (const [symbol, count] of composition) needed.set(symbol, (needed.get(symbol) ?? 0) + copies[k] * count);
  });
  const free: FreeElement[] = base.free.map((element) => ({
    ...element,
    count: element.count - (needed.get(elementOf(element.atomicNumber).symbol) ?? 0),
  }));
  const demands = base.demands.flatMap((demand) => {
    // The S=O and P=O oxygens of formed units meet a required O=*, whichever structure comes out.
    const isDoubleBondedOxygen = demand.atomicNumber === 8 && demand.hydrogens === 0 && demand.orders.join() === '2';
    const count = isDoubleBondedOxygen ? demand.count - oxygens : demand.count;
    return count > 0 ? [{ ...demand, count }] : [];
  });
  const ranges = formed.flatMap(groupShiftRanges);
  return {
    ...base,
    units: mergeEqualKinds([...base.units, ...formed]),
    demands,
    free: free.filter(({ count }) => count > 0),
    hydrogens: base.hydrogens - (needed.get('H') ?? 0),
    census: ranges.length === 0 ? base.census : groups.censusWith([...base.units.flatMap(groupShiftRanges), ...ranges]),
    partnerLimits: partnerLimits(base, groups, formed),
  };
}

/** Limits on what becomes of open double bonds; as many as required fragments leave open may become anything. */
function partnerLimits(base: SearchProblem, groups: FormableGroups, formed: readonly UnitKind[]): PartnerLimit[] {
  const opens = (unit: UnitKind): { oxides: number; diazos: number } => {
    let oxides = 0;
    let diazos = 0;
    for (let atom = 0; atom < unit.graph.atomCount; atom++) {
      const centre = unit.bondQuota[4 * atom + 2] > 0 ? centreOf(unit.graph, atom) : null;
      if (centre === 'oxide') oxides += unit.count;
      if (centre === 'diazo') diazos += unit.count;
    }
    return { oxides, diazos };
  };
  const brought = base.units.map(opens);
  const formedOpen = formed.map(opens);
  const limits: PartnerLimit[] = [];
  for (const group of groups.forbiddenPartners) {
    const side = group === 'nitro' ? 'oxides' : 'diazos';
    if (!formedOpen.some((open) => open[side] > 0)) continue;
    limits.push({ group, most: brought.reduce((sum, open) => sum + open[side], 0) });
  }
  return limits;
}

/** A group of higher valence in a molecule; null for an atom that belongs to none that the search forms. */
export interface FoundGroup {
  readonly group: ValenceGroup | null;
  readonly kind: ValenceGroupKind | null;
  /** Its atoms among those asked for. */
  readonly atoms: readonly number[];
}

/**
 * Sorts special atoms of a molecule into groups.
 *
 * @param atoms - charged, or with more bonds than their default valence.
 */
export function findGroups(graph: MolecularGraph, atoms: readonly number[]): FoundGroup[] {
  const left = new Set(atoms);
  const found: FoundGroup[] = [];
  // Nitro and azide stand before the N-oxides and diazo units that they are as well.
  for (const { id, group, smiles } of GROUP_KINDS) {
    const { graph: written, attachments } = readKind(smiles);
    for (const vertices of findPlacements(graph, createUnitKind(smiles, 1, written, attachments))) {
      const inIt = vertices.filter((vertex) => left.has(vertex));
      if (inIt.length === 0 || (id === 'diazo' && !hasDoubleBondToCarbon(graph, vertices))) continue;
      for (const vertex of inIt) left.delete(vertex);
      found.push({ group, kind: id, atoms: inIt });
    }
  }
  if (left.size > 0) found.push({ group: null, kind: null, atoms: [...left] });
  return found;
}

function hasDoubleBondToCarbon({ atomCount: n, atomicNumbers, bondOrders }: MolecularGraph, vertices: readonly number[]): boolean {
  return vertices.some((vertex) =>
    bondOrders.subarray(vertex * n, (vertex + 1) * n).some((order, v) => order === 2 && atomicNumbers[v] === 6),
  );
}

/** Is an atom the N⁺ of an N-oxide (bonded to O⁻) or of a diazo unit (doubly bonded to N⁻)? */
function centreOf(graph: MolecularGraph, atom: number): 'oxide' | 'diazo' | null {
  const { atomCount: n, atomicNumbers, charges, bondOrders } = graph;
  if (atomicNumbers[atom] !== 7 || charges[atom] !== 1) return null;
  for (let other = 0; other < n; other++) {
    const order = bondOrders[atom * n + other];
    if (order === 0 || charges[other] !== -1) continue;
    if (order === 1 && atomicNumbers[other] === 8) return 'oxide';
    if (order === 2 && atomicNumbers[other] === 7) return 'diazo';
  }
  return null;
}

/**
 * Test of the partner limits on a matrix, filled in part or in whole: what a double bond has made of a unit stays.
 *
 * @returns null when the layout has none to keep; the test gets bond orders row-major with FILL_STRIDE, and false
 *   means that no completion keeps the limits.
 */
export function createPartnerTest(problem: SearchProblem, layout: SearchLayout): ((filled: Uint8Array) => boolean) | null {
  if (problem.partnerLimits.length === 0) return null;
  const { base, open, bondQuota } = layout;
  const groupIndex: Readonly<Record<PartnerGroup, number>> = { nitro: 0, azide: 1, diazo: 2, otherDiazo: 3 };
  const most = new Int32Array(4).fill(open + 1);
  for (const limit of problem.partnerLimits) most[groupIndex[limit.group]] = limit.most;
  const centres: { row: number; isOxide: boolean }[] = [];
  for (let v = 0; v < open; v++) {
    const centre = bondQuota[4 * v] !== 255 && bondQuota[4 * v + 2] > 0 ? centreOf(base, v) : null;
    if (centre !== null) centres.push({ row: v * FILL_STRIDE, isOxide: centre === 'oxide' });
  }
  /** Group that each vertex makes of a diazo unit; of an oxide only oxygen makes another group. */
  const ofDiazo = Uint8Array.from({ length: open }, (_, v) =>
    base.charges[v] !== 0 ? 3 : base.atomicNumbers[v] === 7 ? 1 : base.atomicNumbers[v] === 6 ? 2 : 3,
  );
  const made = new Int32Array(4);
  return (filled) => {
    made.fill(0);
    for (const { row, isOxide } of centres) {
      for (let v = 0; v < open; v++) {
        if (filled[row + v] !== 2) continue;
        if (!isOxide) made[ofDiazo[v]]++;
        else if (base.atomicNumbers[v] === 8) made[0]++;
      }
    }
    return made[0] <= most[0] && made[1] <= most[1] && made[2] <= most[2] && made[3] <= most[3];
  };
}
