import { createLayout, type SearchLayout } from './distributions.js';
import type { FillEvents } from './fill.js';
import { createLeafJudge, type LeafVerdict } from './leaf-judge.js';
import { createPartialChecks, type PartialCheck } from './partial-checks.js';
import type { SearchBranch } from './search.js';
import { createPartnerTest } from './valence-groups.js';

/** Branches were cut by a constraint while structures were being built. */
export type CutListener = (constraint: Pick<PartialCheck, 'reason' | 'text'>, branches: number) => void;

/** One branch of a search laid out, ready to be walked again and again. */
export interface OpenBranch {
  readonly layout: SearchLayout;
  /** The checks as an event of the fill; none at all without checks, so that plain searches pay nothing. */
  readonly events: Pick<FillEvents, 'onRow'>;
  /** What a filled matrix stands for; its graphs are reused. */
  readonly judge: (filled: Uint8Array, molecule: Uint8Array, mayHaveOtherForms: boolean) => LeafVerdict;
}

const NOTHING: LeafVerdict = { multigraphs: 0, graphs: [] };

/** @throws TooSymmetricError when the units' group is too large. */
export function openBranch({ problem, distribution }: SearchBranch, onCut?: CutListener): OpenBranch {
  const layout = createLayout(problem, distribution);
  const judge = createLeafJudge(problem, layout);
  const checks = createPartialChecks(problem, layout);
  // What it refuses is built in another sub-search, so it is not reported as cut.
  const keepsPartners = createPartnerTest(problem, layout);
  const onRow: NonNullable<FillEvents['onRow']> = (filled, known, molecule) => {
    if (keepsPartners !== null && !keepsPartners(filled)) return false;
    for (const check of checks) {
      if (check.test(filled, known, molecule)) continue;
      onCut?.(check, 1);
      return false;
    }
    return true;
  };
  return {
    layout,
    events: checks.length === 0 && keepsPartners === null ? {} : { onRow },
    judge:
      keepsPartners === null
        ? (_filled, molecule, mayHaveOtherForms) => judge(molecule, mayHaveOtherForms)
        : (filled, molecule, mayHaveOtherForms) => (keepsPartners(filled) ? judge(molecule, mayHaveOtherForms) : NOTHING),
  };
}
