/**
 * Every number of the likelihood in one place. Costs are −ln probability; shifts in ppm.
 *
 * The shapes are those of SCIENCE.md 8.1–8.4. What is fitted says so; the rest is common practice or judgement, and is
 * marked so.
 */
export interface ScoreModel {
  readonly carbon: {
    /** ν of the error distribution. */
    readonly degreesOfFreedom: number;
    /** Scale of the distribution over the predictor's standard deviation. */
    readonly scale: number;
    /** Width within which two signals are seen as one, ppm: an environment without a signal of its own lies under another one. */
    readonly resolution: number;
    /** A quaternary carbon does not show. */
    readonly missingQuaternary: number;
    /** A protonated carbon does not show in a list that is not said to be complete. */
    readonly missingProtonated: number;
    /** Groups that only stereochemistry tells apart show one signal. */
    readonly twinsTogether: number;
    /** A signal belongs to nothing in the structure: ln ε − ln range of SCIENCE.md 8.4. */
    readonly outlier: number;
    /** The same at the place of a solvent line. */
    readonly solventOutlier: number;
    /** A signal is laid on a carbon with another number of hydrogens. */
    readonly wrongType: number;
    /** For each carbon by which a stated count is missed. */
    readonly countMismatch: number;
  };
  readonly proton: {
    readonly degreesOfFreedom: number;
    readonly scale: number;
    readonly resolution: number;
    /** Hydrogens on carbon do not show. */
    readonly missing: number;
    readonly outlier: number;
    readonly solventOutlier: number;
    /** An exchangeable hydrogen does not show; SCIENCE.md 3.1: its count only, and only as "at most". */
    readonly exchangeableMissing: number;
    /** Least spread of exchangeable hydrogens, ppm. */
    readonly exchangeableSpread: number;
    /** A signal marked as exchangeable is laid on a hydrogen on carbon, or the reverse. */
    readonly wrongExchange: number;
    /** The two hydrogens of a CH2, or equivalent groups, show apart. */
    readonly split: number;
    /** Hydrogens of one environment are shared out unevenly. */
    readonly unevenSplit: number;
  };
  /** Log-likelihoods are divided by this: atoms of one molecule share their errors (SCIENCE.md 8.2). */
  readonly temperature: { readonly carbon: number; readonly proton: number };
  /** Prior probability that the right structure is not in the list (SCIENCE.md 8.3). */
  readonly noneOfThesePrior: number;
}

/**
 * ν and scales: maximum likelihood over the deviations of 1,366 true structures (9,837 carbons, 1,101 sets of hydrogens)
 * that the predictor was not fitted on; width of overlap and splitting from the same assignments (nmrshiftdb2, fold 0).
 * Temperatures: conditional likelihood of the true structure among the survivors of 479 of these cases
 * (tests/bench/fit-ranking.ts).
 */
export const SCORE_MODEL: ScoreModel = {
  carbon: {
    degreesOfFreedom: 3,
    scale: 0.83,
    resolution: 0.06,
    missingQuaternary: 3.5,
    missingProtonated: 1.6,
    twinsTogether: 0.7,
    outlier: -Math.log(0.02) + Math.log(220),
    solventOutlier: 1,
    wrongType: 6,
    countMismatch: 2,
  },
  proton: {
    degreesOfFreedom: 3,
    scale: 0.65,
    resolution: 0.1,
    missing: 4,
    outlier: -Math.log(0.02) + Math.log(12),
    solventOutlier: 1,
    exchangeableMissing: 1,
    exchangeableSpread: 1.5,
    wrongExchange: 6,
    split: 1.5,
    unevenSplit: 3,
  },
  temperature: { carbon: 1.4, proton: 2.2 },
  noneOfThesePrior: 0.1,
};
