import type { SearchLayout } from './distributions.js';
import { createPartialCorrelationCheck } from './partial-correlation-check.js';
import { createPartialPatternChecks } from './partial-pattern-check.js';
import { createPartialWindowCheck } from './partial-window-check.js';
import type { SearchProblem } from './problem.js';

/**
 * A constraint tested while a matrix is being filled. It may cut a branch only when no completion can meet it, and it
 * must not depend on how like vertices are numbered: then shards stay independent and no wanted constitution is lost.
 */
export interface PartialCheck {
  /** Counted under this in the funnel. */
  readonly reason: string;
  /** One sentence for people. */
  readonly text: string;
  /**
   * @param filled - bond orders between open vertices, row-major with FILL_STRIDE. Read only. Bonds inside units are in
   *   the layout's `base` graph instead.
   * @param molecule - the same with the bonds inside units, n × n in the order of the layout's graph. Read only.
   * @param known - rows [0, known) are complete: those vertices get no further bond.
   * @returns false when no completion can be kept.
   */
  test(filled: Uint8Array, known: number, molecule: Uint8Array): boolean;
}

/** The checks of a layout, cheapest first. */
export function createPartialChecks(problem: SearchProblem, layout: SearchLayout): PartialCheck[] {
  const { correlations, structure } = problem;
  const checks = createPartialPatternChecks(structure.patterns, layout);
  const windows = createPartialWindowCheck(problem, layout);
  if (windows !== null) checks.push(windows);
  if (correlations !== null) checks.push(createPartialCorrelationCheck(correlations, layout));
  return checks;
}
