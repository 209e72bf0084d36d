/** Corrections to the published increments of one nucleus, with the scatter that was left. */
export interface FittedIncrements {
  /** See applyCorrections. */
  readonly corrections: string;
  /** Spread left per class when all terms are well known, ppm. */
  readonly floors: Readonly<Record<string, number>>;
  /** For classes without enough data. */
  readonly floorElsewhere: number;
  readonly termWeight: number;
}
export const FITTED_CARBON: FittedIncrements = { corrections: '', floors: {}, floorElsewhere: 5, termWeight: 1 };
export const FITTED_PROTON: FittedIncrements = { corrections: '', floors: {}, floorElsewhere: 0.5, termWeight: 1 };
