import type { InputIssue } from '../schemas/problem.js';
import { mzOf, neutralMassOf, parseAdduct, type Adduct } from './adducts.js';
import { findElement, SUPPORTED_SYMBOLS } from './elements.js';
import { degreeOfUnsaturation, formatHill, formulaCounts, isotopePattern, monoisotopicMass, type FormulaCounts } from './formula.js';

export interface FormulaCandidate {
  /** Hill order. */
  readonly formula: string;
  /** 10⁶ · (observed − calculated) / calculated, signed, of the m/z. */
  readonly ppm: number;
  readonly unsaturation: number;
  /** Natural logarithm, at most 0: mass deviation + element prior + ratio limits + isotope fit. Higher is better. */
  readonly score: number;
  /** Limits that the formula breaks, for people. */
  readonly remarks: readonly string[];
}

export interface FormulaQuery {
  /** Observed m/z, Th (u for a neutral mass). */
  readonly mz: number;
  /** [M+H]+ and so on; M = neutral mass. */
  readonly adduct: string;
  /** Half width of the window in ppm. */
  readonly ppm: number;
  /** Heights of M, M+1, M+2 …; the first is the reference. */
  readonly isotopes?: readonly number[];
  /** Elements to try; default all that structures may contain. */
  readonly elements?: readonly string[];
  /** How many of the best to return. */
  readonly limit?: number;
}
export type FormulaSearchResult =
  { readonly ok: true; readonly candidates: readonly FormulaCandidate[] } | { readonly ok: false; readonly issues: readonly InputIssue[] };

export const FORMULA_SEARCH_LIMITS = { mz: 2000, ppm: 100, isotopes: 8, candidates: 1000 } as const;
const DEFAULT_LIMIT = 100;

/**
 * Cost of rarer elements as negative log prior: for the first atom, and for each further one. Common practice, not
 * fitted: it orders formulas of equal mass, data overrule it.
 */
const RARITY: ReadonlyArray<readonly [symbol: string, first: number, further: number, most: number]> = [
  ['I', 3, 2, 5],
  ['Br', 2, 2, 5],
  ['Si', 3, 2, 8],
  ['Cl', 2, 1, 10],
  ['P', 3, 2, 9],
  ['F', 2, 1, 16],
  ['S', 1, 1, 10],
];
const MAX_NITROGENS = 20;
const MAX_OXYGENS = 30;
const NITROGEN_COST = 0.15;
const OXYGEN_COST = 0.05;

/** Ratios to carbon: common range (99.7 % of known formulas) and extended range (99.99 %). */
const RATIO_LIMITS: ReadonlyArray<
  readonly [symbol: string, commonLow: number, commonHigh: number, extendedLow: number, extendedHigh: number]
> = [
  // H/C: Kind & Fiehn, BMC Bioinformatics 2007, 8:105; the others the same article from memory.
  ['H', 0.2, 3.1, 0.1, 6],
  ['N', 0, 1.3, 0, 4],
  ['O', 0, 1.2, 0, 3],
  ['S', 0, 0.8, 0, 3],
  ['P', 0, 0.3, 0, 2],
  ['Si', 0, 0.5, 0, 1],
  ['F', 0, 1.5, 0, 6],
  ['Cl', 0, 0.8, 0, 2],
  ['Br', 0, 0.8, 0, 2],
];
/** Joint limits of the same article, from memory: when every count is above the bound, each must stay below its limit. */
const JOINT_LIMITS: ReadonlyArray<readonly [above: number, limits: Readonly<Record<string, number>>]> = [
  [1, { N: 10, O: 20, P: 4, S: 3 }],
  [3, { N: 11, O: 22, P: 6 }],
  [1, { O: 14, P: 3, S: 3 }],
  [1, { P: 3, S: 3, N: 4 }],
  [6, { N: 19, O: 14, S: 8 }],
];
const OUTSIDE_COMMON = 2;
const OUTSIDE_EXTENDED = 5;
const NO_CARBON = 4;
const JOINT_BROKEN = 2;

/** Ratio and joint limits that a formula breaks, and what they cost. */
function heuristicPenalty(counts: FormulaCounts): { cost: number; remarks: string[] } {
  const remarks: string[] = [];
  let cost = 0;
  const carbons = counts.get('C') ?? 0;
  if (carbons === 0) {
    cost += NO_CARBON;
    remarks.push('no carbon');
  } else {
    for (const [symbol, low, high, extendedLow, extendedHigh] of RATIO_LIMITS) {
      const ratio = (counts.get(symbol) ?? 0) / carbons;
      if (ratio >= low && ratio <= high) continue;
      const isRare = ratio < extendedLow || ratio > extendedHigh;
      cost += isRare ? OUTSIDE_EXTENDED : OUTSIDE_COMMON;
      remarks.push(
        `${symbol}/C ${ratio.toFixed(2)} outside the ${isRare ? 'extended' : 'common'} range ${isRare ? `${extendedLow}–${extendedHigh}` : `${low}–${high}`}`,
      );
    }
  }
  for (const [above, limits] of JOINT_LIMITS) {
    const symbols = Object.keys(limits);
    if (!symbols.every((symbol) => (counts.get(symbol) ?? 0) > above)) continue;
    if (symbols.some((symbol) => (counts.get(symbol) ?? 0) >= limits[symbol]!)) {
      cost += JOINT_BROKEN;
      remarks.push(`unusually many ${symbols.join(', ')} together`);
    }
  }
  return { cost, remarks };
}

/**
 * Log-likelihood of an isotope pattern: Student t with 4 degrees of freedom, σ = 5 % of the peak but at least 0.7 % of
 * M (measured patterns deviate by 2–5 %, SCIENCE.md 1.3). Taken relative to a perfect fit, so at most 0.
 */
function isotopeTerm(counts: FormulaCounts, adduct: Adduct, isotopes: readonly number[]): number {
  const ion = new Map<string, number>();
  for (const [symbol, count] of counts) ion.set(symbol, count * adduct.moleculeCount);
  for (const [symbol, count] of adduct.atoms) ion.set(symbol, Math.max((ion.get(symbol) ?? 0) + count, 0));
  const expected = isotopePattern(formulaCounts(ion), isotopes.length);
  let term = 0;
  for (let peak = 1; peak < isotopes.length; peak++) {
    const observed = (100 * isotopes[peak]!) / isotopes[0]!;
    const deviation = (observed - expected[peak]!) / Math.max(0.05 * expected[peak]!, 0.7);
    term -= 2.5 * Math.log1p((deviation * deviation) / 4);
  }
  return term;
}

function checkQuery(query: FormulaQuery): InputIssue[] {
  const issues: InputIssue[] = [];
  const { mz, ppm, isotopes, elements } = query;
  if (!(mz > 1 && mz <= FORMULA_SEARCH_LIMITS.mz))
    issues.push({ path: 'mz', message: `expected a number between 1 and ${FORMULA_SEARCH_LIMITS.mz} Th` });
  if (!(ppm >= 0.01 && ppm <= FORMULA_SEARCH_LIMITS.ppm))
    issues.push({ path: 'ppm', message: `expected a number between 0.01 and ${FORMULA_SEARCH_LIMITS.ppm} ppm` });
  if (isotopes !== undefined) {
    const areHeights =
      isotopes.length >= 1 &&
      isotopes.length <= FORMULA_SEARCH_LIMITS.isotopes &&
      isotopes.every((height) => height >= 0 && Number.isFinite(height)) &&
      isotopes[0]! > 0;
    if (!areHeights)
      issues.push({
        path: 'isotopes',
        message: `expected heights of M, M+1, M+2 … such as 100,9.9,0.8; at most ${FORMULA_SEARCH_LIMITS.isotopes}, the first above 0`,
      });
  }
  for (const symbol of elements ?? []) {
    if (findElement(symbol) === null)
      issues.push({ path: 'elements', message: `element "${symbol}" is not supported; use ${SUPPORTED_SYMBOLS.join(' ')}` });
  }
  return issues;
}

/**
 * Finds the best formulas of neutral closed-shell molecules (unsaturation a whole number ≥ 0 with default valences)
 * whose ion lies in a mass window, best score first.
 *
 * Sets of rarer elements are tried in order of their prior cost, so that the search can stop, exactly, as soon as
 * nothing that is left could enter the best `limit`.
 *
 * @returns issues with the paths mz, adduct, ppm, isotopes, elements when the query itself is wrong.
 */
export function findFormulas(query: FormulaQuery): FormulaSearchResult {
  const issues = checkQuery(query);
  const read = parseAdduct(query.adduct);
  if (!read.ok) issues.push({ path: 'adduct', message: read.message });
  if (!read.ok || issues.length > 0) return { ok: false, issues };
  const { adduct } = read;
  const target = neutralMassOf(query.mz, adduct);
  if (target < 1)
    return {
      ok: false,
      issues: [{ path: 'mz', message: `too small for ${adduct.name}; expected an m/z above ${mzOf(1, adduct).toFixed(1)}` }],
    };
  const tolerance = (query.ppm * 1e-6 * query.mz * Math.max(Math.abs(adduct.charge), 1)) / adduct.moleculeCount;
  const limit = Math.min(query.limit ?? DEFAULT_LIMIT, FORMULA_SEARCH_LIMITS.candidates);
  const allowed = new Set(query.elements ?? SUPPORTED_SYMBOLS);
  const found: FormulaCandidate[] = [];
  // Window = 2.5 standard deviations.
  const sigma = query.ppm / 2.5;

  const consider = (counts: FormulaCounts, priorCost: number): void => {
    const calculated = mzOf(monoisotopicMass(counts), adduct);
    const ppm = (1e6 * (query.mz - calculated)) / calculated;
    if (Math.abs(ppm) > query.ppm) return;
    const { cost, remarks } = heuristicPenalty(counts);
    const isotopeScore = query.isotopes === undefined ? 0 : isotopeTerm(counts, adduct, query.isotopes);
    const score = -0.5 * (ppm / sigma) ** 2 - priorCost - cost + isotopeScore;
    found.push({ formula: formatHill(counts), ppm, unsaturation: degreeOfUnsaturation(counts), score, remarks });
  };
  const rarer = RARITY.filter(([symbol]) => allowed.has(symbol));
  const chosen = new Map<string, number>();
  /** Walks through all sets of rarer elements whose cost is exactly `budget`. */
  const chooseRarer = (place: number, budget: number, mass: number, level: number): void => {
    if (place === rarer.length) {
      if (budget === 0) fillCommonElements(allowed, chosen, mass, tolerance, (counts, cost) => consider(counts, level + cost));
      return;
    }
    const [symbol, first, further, most] = rarer[place]!;
    const atomMass = findElement(symbol)!.monoisotopicMass;
    for (
      let count = 0, cost = 0;
      count <= most && cost <= budget && mass - count * atomMass > -tolerance;
      count++, cost = first + (count - 1) * further
    ) {
      chosen.set(symbol, count);
      chooseRarer(place + 1, budget - cost, mass - count * atomMass, level);
    }
    chosen.set(symbol, 0);
  };
  const mostExpensive = rarer.reduce((sum, [, first, further, most]) => sum + first + (most - 1) * further, 0);
  for (let level = 0; level <= mostExpensive; level++) {
    found.sort(compareCandidates);
    if (found.length > 4 * limit) found.length = limit;
    if (found.length >= limit && found[limit - 1]!.score > -level) break;
    chooseRarer(0, level, target, level);
  }
  return { ok: true, candidates: found.sort(compareCandidates).slice(0, limit) };
}

function compareCandidates(a: FormulaCandidate, b: FormulaCandidate): number {
  return b.score - a.score || (a.formula < b.formula ? -1 : 1);
}

/**
 * Completes a set of rarer elements with N, O, C and H to a mass.
 *
 * Bounds of C for given N and O: the rest r = 12·C + 1.00783·H with 0 ≤ H ≤ 2·C + 2 + (sum of v − 2 of the other
 * atoms), the upper one being unsaturation ≥ 0.
 */
function fillCommonElements(
  allowed: ReadonlySet<string>,
  rarer: ReadonlyMap<string, number>,
  mass: number,
  tolerance: number,
  report: (counts: FormulaCounts, cost: number) => void,
): void {
  const nitrogen = findElement('N')!;
  const oxygen = findElement('O')!;
  const hydrogen = findElement('H')!;
  let spare = 2;
  for (const [symbol, count] of rarer) spare += count * (findElement(symbol)!.defaultValence - 2);
  const mostNitrogens = allowed.has('N') ? MAX_NITROGENS : 0;
  const mostOxygens = allowed.has('O') ? MAX_OXYGENS : 0;
  for (let n = 0; n <= mostNitrogens && mass - n * nitrogen.monoisotopicMass > -tolerance; n++) {
    const afterNitrogen = mass - n * nitrogen.monoisotopicMass;
    for (let o = 0; o <= mostOxygens && afterNitrogen - o * oxygen.monoisotopicMass > -tolerance; o++) {
      const rest = afterNitrogen - o * oxygen.monoisotopicMass;
      const valence = spare + n;
      const fewest = Math.max(
        Math.ceil((rest - tolerance - valence * hydrogen.monoisotopicMass) / (12 + 2 * hydrogen.monoisotopicMass)),
        0,
      );
      const most = allowed.has('C') ? Math.floor((rest + tolerance) / 12) : 0;
      for (let c = fewest; c <= most; c++) {
        const h = Math.round((rest - 12 * c) / hydrogen.monoisotopicMass);
        if (h < 0 || (h > 0 && !allowed.has('H')) || Math.abs(rest - 12 * c - h * hydrogen.monoisotopicMass) > tolerance) continue;
        // 2 × unsaturation, which has to be even and not negative.
        const doubled = 2 * c + valence - h;
        if (doubled < 0 || doubled % 2 !== 0) continue;
        const counts = formulaCounts([['C', c], ['H', h], ['N', n], ['O', o], ...rarer]);
        if (counts.size === 0 || (counts.size === 1 && h > 0)) continue;
        report(counts, n * NITROGEN_COST + o * OXYGEN_COST);
      }
    }
  }
}
