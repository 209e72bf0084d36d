import type { ProtonClass } from './shift-classes.js';

/** What a solvent does to hydrogens on O, N and S. */
export interface ExchangeBehaviour {
  /** OH and NH become OD and ND: no signal. */
  readonly isDeuterating: boolean;
  /** Exchange is slow enough for OH and NH to couple with their neighbours (SCIENCE.md 3.4). */
  readonly isSlow: boolean;
  /** Middle of the usual range where it differs from the one in CDCl3, ppm. */
  readonly shifts: Partial<Record<ProtonClass, number>>;
}

const FAST: ExchangeBehaviour = { isDeuterating: false, isSlow: false, shifts: {} };
const DEUTERATING: ExchangeBehaviour = { isDeuterating: true, isSlow: false, shifts: {} };
/** Common practice: OH and NH bound to the solvent stand well downfield of CDCl3. */
const DIMETHYL_SULFOXIDE: ExchangeBehaviour = {
  isDeuterating: false,
  isSlow: true,
  shifts: { 'OH:alkyl': 4.6, 'OH:sp2': 9.4, 'OH:acyl': 12.3, 'OH:other': 10.8, 'NH:sp2': 5.6, 'NH:acyl': 8, nH: 11.5, 'NH:other': 8 },
};
const ACETONE: ExchangeBehaviour = {
  isDeuterating: false,
  isSlow: true,
  shifts: { 'OH:alkyl': 3.6, 'OH:sp2': 8.3, 'OH:acyl': 10.8, 'NH:acyl': 7.4, nH: 10.2 },
};

/**
 * Looks a solvent up by the names in common use (`CDCl3`, `DMSO-d6`, `acetone-d6`, `CD3OD`, `D2O` …); unknown names
 * behave as CDCl3.
 */
export function exchangeBehaviourOf(solvent: string): ExchangeBehaviour {
  const name = solvent.toLowerCase().replace(/[^a-z0-9]/g, '');
  if (/dmso|dimethylsulfoxide|c2d6os|cd32so/.test(name)) return DIMETHYL_SULFOXIDE;
  if (/acetone|cd32co|c3d6o/.test(name)) return ACETONE;
  if (/^d2o$|deuteriumoxide|water|cd3od|methanol|meod/.test(name)) return DEUTERATING;
  return FAST;
}
