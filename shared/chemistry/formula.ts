import type { InputIssue } from '../schemas/problem.js';
import { ADDUCT_ELEMENTS, ELEMENTS, findElement, SUPPORTED_SYMBOLS, type Element } from './elements.js';

/** Element symbol → number of atoms, in Hill order, no zeros. */
export type FormulaCounts = ReadonlyMap<string, number>;

export type FormulaResult =
  | { readonly ok: true; readonly counts: FormulaCounts }
  /** `position`: offset in the text, from 0. The message names the cure. */
  | { readonly ok: false; readonly message: string; readonly position: number };

/** Most heavy atoms of a formula that is enumerated (the evidence schema says the same). */
export const MAX_HEAVY_ATOMS = 40;
const MAX_COUNT = 999;
const EXAMPLE = 'C9H10O2';

const weightOf = new Map<string, Element>([...ELEMENTS, ...ADDUCT_ELEMENTS].map((entry) => [entry.symbol, entry]));

function massElement(symbol: string): Element {
  const found = weightOf.get(symbol);
  if (found === undefined) throw new RangeError(`No mass known for element ${symbol}`);
  return found;
}

/** Hill order: C, H, then the alphabet; the alphabet throughout when there is no carbon. */
function hillOrder(symbols: Iterable<string>): string[] {
  const all = [...symbols].sort();
  if (!all.includes('C')) return all;
  return ['C', ...(all.includes('H') ? ['H'] : []), ...all.filter((symbol) => symbol !== 'C' && symbol !== 'H')];
}

/** Sorts counts into Hill order and drops zeros. */
export function formulaCounts(entries: Iterable<readonly [string, number]>): FormulaCounts {
  const raw = new Map(entries);
  return new Map(hillOrder(raw.keys()).flatMap((symbol) => (raw.get(symbol) === 0 ? [] : [[symbol, raw.get(symbol)!] as const])));
}

export function countOf(counts: FormulaCounts, symbol: string): number {
  return counts.get(symbol) ?? 0;
}

const normaliseDigits = (text: string): string => text.replace(/[₀-₉]/g, (digit) => String(digit.charCodeAt(0) - 0x2080));

/**
 * Reads a molecular formula: element symbols with counts, subscript digits, nested parentheses and spaces allowed.
 * Neutral molecules of the supported elements only; chemistry (parity, unsaturation) is `checkFormula`.
 */
export function parseFormula(text: string): FormulaResult {
  const source = normaliseDigits(text);
  const fault = (message: string, position: number): FormulaResult => ({ ok: false, message, position });
  const groups: { counts: Map<string, number>; position: number; bracket: string }[] = [{ counts: new Map(), position: 0, bracket: '' }];
  let at = 0;
  const readCount = (): number | null => {
    const digits = /^\d+/.exec(source.slice(at))?.[0];
    if (digits === undefined) return 1;
    const count = Number(digits);
    if (count < 1 || count > MAX_COUNT) return null;
    at += digits.length;
    return count;
  };
  const wrongCount = (): FormulaResult => fault(`expected a count between 1 and ${MAX_COUNT} at position ${at + 1}`, at);

  while (at < source.length) {
    const character = source.charAt(at);
    const group = groups[groups.length - 1]!;
    if (/\s/.test(character)) {
      at++;
    } else if (character === '(' || character === '[') {
      groups.push({ counts: new Map(), position: at, bracket: character === '(' ? ')' : ']' });
      at++;
    } else if (character === ')' || character === ']') {
      if (groups.length === 1 || group.bracket !== character)
        return fault(`"${character}" at position ${at + 1} closes nothing; remove it or add the opening bracket`, at);
      if (group.counts.size === 0) return fault(`the brackets at position ${group.position + 1} are empty; remove them`, group.position);
      groups.pop();
      at++;
      const factor = readCount();
      if (factor === null) return wrongCount();
      const outer = groups[groups.length - 1]!.counts;
      for (const [symbol, count] of group.counts) outer.set(symbol, (outer.get(symbol) ?? 0) + count * factor);
    } else if (/[A-Z]/.test(character)) {
      const symbol = /^[A-Z][a-z]?/.exec(source.slice(at))![0];
      if (symbol === 'D' || symbol === 'T') return fault(`isotopes are not supported; write H for "${symbol}" at position ${at + 1}`, at);
      if (findElement(symbol) === null) return fault(`element "${symbol}" is not supported; use ${SUPPORTED_SYMBOLS.join(' ')}`, at);
      at += symbol.length;
      const count = readCount();
      if (count === null) return wrongCount();
      group.counts.set(symbol, (group.counts.get(symbol) ?? 0) + count);
    } else if (/[+\-−–⁺⁻]/.test(character)) {
      return fault('charges are not supported; expected the formula of the neutral molecule', at);
    } else if (/[a-z]/.test(character)) {
      return fault(
        `element symbols begin with a capital letter; "${character}" at position ${at + 1} does not, expected a formula such as ${EXAMPLE}`,
        at,
      );
    } else if (/[.·•*]/.test(character)) {
      return fault('several components are not supported; expected the formula of one molecule, without solvent or salt', at);
    } else return fault(`"${character}" at position ${at + 1} is not part of a formula; expected a formula such as ${EXAMPLE}`, at);
  }
  const open = groups[1];
  if (open !== undefined) return fault(`the bracket at position ${open.position + 1} is not closed; add ${open.bracket}`, open.position);
  const counts = formulaCounts(groups[0]!.counts);
  if (counts.size === 0) return fault(`expected a molecular formula such as ${EXAMPLE}`, 0);
  const tooMany = [...counts].find(([, count]) => count > MAX_COUNT);
  if (tooMany !== undefined) return fault(`${tooMany[1]} ${tooMany[0]} atoms; expected at most ${MAX_COUNT} of an element`, 0);
  return { ok: true, counts };
}

/** Formula in Hill order, plain text: C9H10O2. */
export function formatHill(counts: FormulaCounts): string {
  return formulaParts(counts)
    .map(({ symbol, count }) => (count === 1 ? symbol : `${symbol}${count}`))
    .join('');
}

/** Parts in Hill order, so that counts can be set as real subscripts. */
export function formulaParts(counts: FormulaCounts): { symbol: string; count: number }[] {
  return [...formulaCounts(counts)].map(([symbol, count]) => ({ symbol, count }));
}

/** Number of atoms other than hydrogen. */
export function heavyAtomCount(counts: FormulaCounts): number {
  let total = 0;
  for (const [symbol, count] of counts) if (symbol !== 'H') total += count;
  return total;
}

/**
 * Rings plus double bonds (a triple bond counts twice) with default valences: 1 + ½ Σ nᵢ(vᵢ − 2), hydrogen included.
 * S=O and P=O of higher valence states do not count. Half-integer for radicals and ions.
 *
 * @see SCIENCE.md 1.2; Senior, Am. J. Math. 1951, 73, 663.
 */
export function degreeOfUnsaturation(counts: FormulaCounts): number {
  let twice = 2;
  for (const [symbol, count] of counts) twice += count * (massElement(symbol).defaultValence - 2);
  return twice / 2;
}

/** Mass of the molecule made of the main isotopes, u. */
export function monoisotopicMass(counts: FormulaCounts): number {
  let mass = 0;
  for (const [symbol, count] of counts) mass += count * massElement(symbol).monoisotopicMass;
  return mass;
}

/** Molar mass from standard atomic weights, g/mol. */
export function averageMass(counts: FormulaCounts): number {
  let mass = 0;
  for (const [symbol, count] of counts) mass += count * massElement(symbol).standardWeight;
  return mass;
}

/** Sum of the mass numbers of the main isotopes. */
export function nominalMass(counts: FormulaCounts): number {
  let mass = 0;
  for (const [symbol, count] of counts) mass += count * Math.round(massElement(symbol).monoisotopicMass);
  return mass;
}

/**
 * Isotope pattern at nominal resolution: heights of M, M+1, … relative to M (all main isotopes) = 100. Exact
 * convolution of the element distributions, truncated behind the last asked peak; isotopes lighter than the main one
 * (¹⁰B) are left out.
 *
 * @param peakCount - number of peaks, M included.
 */
export function isotopePattern(counts: FormulaCounts, peakCount = 5): number[] {
  const multiply = (a: readonly number[], b: readonly number[]): number[] => {
    const product = new Array<number>(peakCount).fill(0);
    for (let i = 0; i < peakCount; i++) for (let j = 0; i + j < peakCount; j++) product[i + j]! += a[i]! * b[j]!;
    return product;
  };
  let pattern = new Array<number>(peakCount).fill(0);
  pattern[0] = 1;
  for (const [symbol, count] of counts) {
    const single = new Array<number>(peakCount).fill(0);
    single[0] = 1;
    for (const { massDifference, relativeAbundance } of massElement(symbol).minorIsotopes) {
      const shift = Math.round(massDifference);
      if (shift > 0 && shift < peakCount) single[shift]! += relativeAbundance / 100;
    }
    // Binary powers: counts reach 999.
    let power = single;
    for (let left = count; left > 0; left >>= 1) {
      if ((left & 1) === 1) pattern = multiply(pattern, power);
      power = multiply(power, power);
    }
  }
  return pattern.map((height) => height * 100);
}

/** One line on the nitrogen rule: parity of the nominal mass against that of the nitrogen count (SCIENCE.md 1.2). */
export function nitrogenRuleHint(counts: FormulaCounts): string {
  const mass = nominalMass(counts);
  const nitrogens = countOf(counts, 'N');
  const parity = (value: number): string => (value % 2 === 0 ? 'even' : 'odd');
  const agree = mass % 2 === nitrogens % 2;
  return agree
    ? `Nominal mass ${mass} is ${parity(mass)} and so is the number of nitrogens (${nitrogens}): nitrogen rule obeyed`
    : `Nominal mass ${mass} is ${parity(mass)}, the number of nitrogens (${nitrogens}) is ${parity(nitrogens)}: not a closed-shell molecule`;
}

/** Most hydrogens that the heavy atoms of a formula can carry as one molecule; negative when even none is too many. */
export function maxHydrogens(counts: FormulaCounts): number {
  return countOf(counts, 'H') + 2 * degreeOfUnsaturation(counts);
}

/**
 * Everything that keeps a parsed formula from being a molecule that can be enumerated.
 *
 * @param extraUnsaturation - unsaturation that higher valence states of fragments add (½ Σ (v − default valence)).
 */
export function checkFormulaCounts(counts: FormulaCounts, extraUnsaturation = 0): InputIssue[] {
  const issues: InputIssue[] = [];
  const report = (message: string): void => {
    issues.push({ path: 'formula', message });
  };
  const heavy = heavyAtomCount(counts);
  if (heavy === 0) {
    report(`no heavy atom; expected at least one atom besides hydrogen, as in ${EXAMPLE}`);
    return issues;
  }
  if (heavy > MAX_HEAVY_ATOMS) report(`${heavy} heavy atoms; expected at most ${MAX_HEAVY_ATOMS}`);
  const unsaturation = degreeOfUnsaturation(counts) + extraUnsaturation;
  const hydrogens = countOf(counts, 'H');
  const most = maxHydrogens(counts) + 2 * extraUnsaturation;
  if (unsaturation < 0) {
    const cure = most >= 0 ? `expected at most H${most} with these atoms; lower the hydrogens` : 'lower the halogens, or add carbon';
    report(
      `too many ${hydrogens > 0 ? 'hydrogens' : 'halogens'}: degree of unsaturation ${String(unsaturation).replace('-', '−')} is negative; ${cure}`,
    );
  } else if (!Number.isInteger(unsaturation)) {
    const lower = hydrogens > 0 ? [`H${hydrogens - 1}`] : [];
    const upper = hydrogens + 1 <= most ? [`H${hydrogens + 1}`] : [];
    report(
      `degree of unsaturation ${unsaturation} is not a whole number, so this would be a radical or an ion; expected ${[...lower, ...upper].join(' or ')} with these atoms`,
    );
  }
  return issues;
}

/** Issues of a formula as typed; empty when it can be enumerated. Paths are `formula`. */
export function checkFormula(text: string): InputIssue[] {
  const parsed = parseFormula(text);
  return parsed.ok ? checkFormulaCounts(parsed.counts) : [{ path: 'formula', message: parsed.message }];
}
