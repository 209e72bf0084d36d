/** Survivors of a run and the alternative to all of them, as logarithms. */
export interface PosteriorInput {
  /** ln Σ exp(score) over all survivors, kept or not; null without any. */
  readonly logSumExp: number | null;
  /** Number of survivors; their prior is shared out evenly (plausibility is part of the scores). */
  readonly survivorCount: number;
  /** Log-likelihood of the observation when none of the survivors is right. */
  readonly noneOfTheseLogLikelihood: number;
  /** Prior of that, in (0, 1). */
  readonly noneOfThesePrior: number;
}

/** Turns scores into probabilities. */
export interface Posterior {
  readonly noneOfTheseProbability: number;
  /** @param score - log posterior of a candidate up to a constant. @returns its probability. */
  probabilityOf(score: number): number;
}

/**
 * Bayes over all survivors and "none of these": P(c) ∝ (1 − p₀)/N · exp(score), P(none) ∝ p₀ · exp(ℓ₀), normalised
 * through the log of the sum, so that nothing overflows. SCIENCE.md 8.3.
 */
export function createPosterior(input: PosteriorInput): Posterior {
  const { logSumExp, survivorCount, noneOfTheseLogLikelihood, noneOfThesePrior } = input;
  if (logSumExp === null || survivorCount === 0) return { noneOfTheseProbability: 1, probabilityOf: () => 0 };
  const share = Math.log(1 - noneOfThesePrior) - Math.log(survivorCount);
  const none = Math.log(noneOfThesePrior) + noneOfTheseLogLikelihood;
  const some = share + logSumExp;
  const highest = Math.max(none, some);
  const total = highest + Math.log(Math.exp(none - highest) + Math.exp(some - highest));
  return {
    noneOfTheseProbability: Math.exp(none - total),
    probabilityOf: (score) => Math.exp(share + score - total),
  };
}
