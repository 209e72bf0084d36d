import type { z } from 'zod';
import type { scoreTerms } from '../../../shared/schemas/runs';

export type ScoreTerms = z.infer<typeof scoreTerms>;
export type ScoreTermName = keyof ScoreTerms;

export const SCORE_TERM_NAMES: Readonly<Record<ScoreTermName, string>> = {
  carbon13: '¹³C shifts',
  proton1: '¹H shifts',
  multiplicity: 'Multiplicities',
  integral: 'Integrals',
  plausibility: 'Plausibility',
};
const ORDER: readonly ScoreTermName[] = ['carbon13', 'proton1', 'multiplicity', 'integral', 'plausibility'];

/** The terms that the evidence gave, in a fixed order. */
export function listScoreTerms(
  terms: ScoreTerms,
): ReadonlyArray<{ readonly term: ScoreTermName; readonly name: string; readonly value: number }> {
  return ORDER.flatMap((term) => {
    const value = terms[term];
    return value === undefined ? [] : [{ term, name: SCORE_TERM_NAMES[term], value }];
  });
}
