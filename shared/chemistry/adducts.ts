import { ADDUCT_ELEMENTS, ELECTRON_MASS, ELEMENTS } from './elements.js';

/** How an ion is made from neutral molecules: k·M plus and minus atoms, with a charge. */
export interface Adduct {
  /** As people write it, with plain signs: [M+H]+. */
  readonly name: string;
  /** k, number of molecules in the ion. */
  readonly moleculeCount: number;
  /** Atoms added (positive) and taken away (negative). */
  readonly atoms: ReadonlyMap<string, number>;
  /** Signed; 0 = the mass is that of the neutral molecule. */
  readonly charge: number;
}
export type AdductResult = { readonly ok: true; readonly adduct: Adduct } | { readonly ok: false; readonly message: string };

/** Ions to offer in a list; anything of the same form can be typed. */
export const COMMON_ADDUCTS: readonly string[] = [
  '[M+H]+',
  '[M+NH4]+',
  '[M+Na]+',
  '[M+K]+',
  '[M]+.',
  '[M-H]-',
  '[M+Cl]-',
  '[M+HCOO]-',
  '[M+CH3COO]-',
  '[M+H-H2O]+',
  '[M+2H]2+',
  '[2M+H]+',
  '[2M+Na]+',
  '[2M-H]-',
];

const MASSES = new Map([...ELEMENTS, ...ADDUCT_ELEMENTS].map(({ symbol, monoisotopicMass }) => [symbol, monoisotopicMass]));
const MAX_CHARGE = 6;
const MAX_MOLECULES = 6;
const EXPECTED = 'expected an ion such as [M+H]+, [M+Na]+, [M-H]-, [M+2H]2+, [M]+. or M for the neutral mass';

/** Atoms of one term such as NH4 or H2O, times the number before it; null when it is no formula. */
function readTerm(text: string): Map<string, number> | null {
  const parts = /^(\d*)((?:[A-Z][a-z]?\d*)+)$/.exec(text);
  if (parts === null) return null;
  const factor = parts[1] === '' ? 1 : Number(parts[1]);
  const atoms = new Map<string, number>();
  for (const [, symbol, count] of parts[2]!.matchAll(/([A-Z][a-z]?)(\d*)/g)) {
    if (!MASSES.has(symbol!)) return null;
    atoms.set(symbol!, (atoms.get(symbol!) ?? 0) + factor * (count === '' ? 1 : Number(count)));
  }
  return atoms;
}

/** Reads an ion in the usual bracket notation. */
export function parseAdduct(text: string): AdductResult {
  const plain = text
    .trim()
    .replace(/[−–]/g, '-')
    .replace(/⁺/g, '+')
    .replace(/⁻/g, '-')
    .replace(/[•·]/g, '.')
    .replace(/\s/g, '')
    .replace(/\.([+-])$/, '$1.')
    .replace(/^M([+-]\.?)$/, '[M]$1');
  if (plain === 'M' || plain === '[M]') return { ok: true, adduct: { name: 'M', moleculeCount: 1, atoms: new Map(), charge: 0 } };
  const parts = /^\[(\d*)M((?:[+-]\d*[A-Za-z0-9]+)*)\](\d*)([+-])(\.?)$/.exec(plain);
  if (parts === null) return { ok: false, message: EXPECTED };
  const moleculeCount = parts[1] === '' ? 1 : Number(parts[1]);
  const charge = (parts[3] === '' ? 1 : Number(parts[3])) * (parts[4] === '+' ? 1 : -1);
  if (moleculeCount < 1 || moleculeCount > MAX_MOLECULES) return { ok: false, message: `expected between 1 and ${MAX_MOLECULES} M` };
  if (charge === 0 || Math.abs(charge) > MAX_CHARGE) return { ok: false, message: `expected a charge between 1 and ${MAX_CHARGE}` };
  const atoms = new Map<string, number>();
  for (const [, sign, term] of parts[2]!.matchAll(/([+-])(\d*[A-Za-z0-9]+)/g)) {
    const found = readTerm(term!);
    if (found === null) return { ok: false, message: `"${term}" is not a formula of known elements; ${EXPECTED}` };
    for (const [symbol, count] of found) atoms.set(symbol, (atoms.get(symbol) ?? 0) + (sign === '+' ? count : -count));
  }
  return { ok: true, adduct: { name: plain, moleculeCount, atoms, charge } };
}

/** Mass of the adduct's atoms without its electrons' change, u. */
function adductMass(adduct: Adduct): number {
  let mass = 0;
  for (const [symbol, count] of adduct.atoms) mass += count * MASSES.get(symbol)!;
  return mass;
}

/** m/z of the ion of a molecule: (k·M + Σ adduct atoms − z·mₑ) / |z|. */
export function mzOf(neutralMass: number, adduct: Adduct): number {
  return (adduct.moleculeCount * neutralMass + adductMass(adduct) - adduct.charge * ELECTRON_MASS) / Math.max(Math.abs(adduct.charge), 1);
}

/** Monoisotopic mass of the molecule behind an ion, u. */
export function neutralMassOf(mz: number, adduct: Adduct): number {
  return (mz * Math.max(Math.abs(adduct.charge), 1) - adductMass(adduct) + adduct.charge * ELECTRON_MASS) / adduct.moleculeCount;
}
