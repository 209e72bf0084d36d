import { formatProbability } from '../../../lib/numbers';

/**
 * Usual mean deviation of a good empirical predictor, ppm: 2–3 for 13C, 0.2–0.3 for 1H (common practice, product
 * targets of SCIENCE.md 4.5). A best candidate beyond the upper end fits worse than the model usually errs.
 */
export const USUAL_DEVIATION = { '13C': 3, '1H': 0.3 } as const;

export interface FitFigures {
  /** Whether the run met every constitution. */
  readonly isComplete: boolean;
  readonly noneOfTheseProbability: number | null;
  readonly carbonDeviation: number | null;
  readonly protonDeviation: number | null;
}

/**
 * What to say about the absolute fit: probabilities only compare candidates, so a list of wrong ones can still have a
 * clear winner.
 *
 * @param best - figures of rank 1; deviations in ppm, null without such signals.
 * @returns sentences, gravest first; empty when nothing is suspicious.
 */
export function fitCautions(best: FitFigures): string[] {
  const cautions: string[] = [];
  const none = best.noneOfTheseProbability;
  if (none !== null && none >= 0.5)
    cautions.push(
      `More likely than not (${formatProbability(none)}), none of these structures is the right one. ${best.isComplete ? 'Check' : 'The run did not reach every constitution: run it to the end, and check'} the formula, the required fragments and the signal list.`,
    );
  else if (none !== null && none >= 0.2)
    cautions.push(`With ${formatProbability(none)} probability none of these structures is the right one.`);
  if (best.carbonDeviation !== null && best.carbonDeviation > USUAL_DEVIATION['13C'])
    cautions.push(
      `Even the best candidate misses the ¹³C shifts by ${best.carbonDeviation.toFixed(1)}\u2009ppm on average; a right structure is usually within ${USUAL_DEVIATION['13C']}\u2009ppm.`,
    );
  if (best.protonDeviation !== null && best.protonDeviation > USUAL_DEVIATION['1H'])
    cautions.push(
      `Even the best candidate misses the ¹H shifts by ${best.protonDeviation.toFixed(2)}\u2009ppm on average; a right structure is usually within ${USUAL_DEVIATION['1H']}\u2009ppm.`,
    );
  return cautions;
}
