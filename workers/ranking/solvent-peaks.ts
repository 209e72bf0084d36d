import type { CarbonSignal, ProtonSignal } from '../../shared/schemas/evidence.js';

interface Solvent {
  /** As people should read it. */
  readonly name: string;
  /** Spellings under which it is given. */
  readonly pattern: RegExp;
  readonly carbons: readonly number[];
  /** Residual protons, then water in it. */
  readonly protons: readonly number[];
}

/**
 * Lines of the common solvents, ppm. 1H and water: Gottlieb et al., J. Org. Chem. 1997, 62, 7512; Fulmer et al.,
 * Organometallics 2010, 29, 2176 through SCIENCE.md 8.4; 13C: the latter, from memory.
 */
const SOLVENTS: readonly Solvent[] = [
  { name: 'CDCl₃', pattern: /cdcl3|chloroform/i, carbons: [77.16], protons: [7.26, 1.56] },
  { name: 'acetone-d₆', pattern: /acetone|\(cd3\)2co/i, carbons: [29.84, 206.26], protons: [2.05, 2.84] },
  { name: 'DMSO-d₆', pattern: /dmso|dimethyl ?sul(f|ph)oxide/i, carbons: [39.52], protons: [2.5, 3.33] },
  { name: 'CD₃CN', pattern: /cd3cn|acetonitrile/i, carbons: [1.32, 118.26], protons: [1.94, 2.13] },
  { name: 'CD₃OD', pattern: /cd3od|methanol/i, carbons: [49.0], protons: [3.31, 4.87] },
  { name: 'D₂O', pattern: /d2o|water|deuterium oxide/i, carbons: [], protons: [4.79] },
  { name: 'C₆D₆', pattern: /c6d6|benzene/i, carbons: [128.06], protons: [7.16, 0.4] },
];

/** How near a signal lies to a table value to be taken for it, ppm (SCIENCE.md 8.4, common practice). */
const CARBON_TOLERANCE = 0.3;
const PROTON_TOLERANCE = 0.03;

const findSolvent = (text: string): Solvent | undefined => SOLVENTS.find(({ pattern }) => pattern.test(text));
const isNear = (shift: number, lines: readonly number[], tolerance: number): boolean =>
  lines.some((line) => Math.abs(shift - line) <= tolerance);

/** Readable name of the solvent whose line a 13C signal may be, null if none. Signals known to carry hydrogen are none. */
export function solventOfCarbonSignal({ shift, hydrogens }: CarbonSignal, solventText: string): string | null {
  const solvent = findSolvent(solventText);
  if (solvent === undefined || (hydrogens ?? 0) > 0 || !isNear(shift, solvent.carbons, CARBON_TOLERANCE)) return null;
  return solvent.name;
}

/** The same for 1H, residual protons and water. Signals with a count or a splitting are taken for the compound's own. */
export function solventOfProtonSignal({ shift, count, multiplicity }: ProtonSignal, solventText: string): string | null {
  const solvent = findSolvent(solventText);
  const isPlain = count === undefined && (multiplicity === undefined || /^(br )?s$|^br$/.test(multiplicity));
  return solvent !== undefined && isPlain && isNear(shift, solvent.protons, PROTON_TOLERANCE) ? solvent.name : null;
}
