import type { RunSettings } from '../jobs/contract.js';
import { type EvidenceDocument, VALENCE_GROUPS } from '../schemas/evidence.js';
import { attachedHydrogensFrom2D } from './correlations.js';

/** A document in which the options that depend on what is asked for are settled, and attached hydrogens that HSQC tells are filled in. */
export type ResolvedEvidence = EvidenceDocument & {
  readonly options: EvidenceDocument['options'] & Required<Pick<EvidenceDocument['options'], 'valenceGroups' | 'shiftWindows'>>;
};

/**
 * Settles the options that are left open. A ranking looks for the true structure and so takes in groups of higher valence
 * and what shifts say of their carbons; a count or a list is of exactly what the document says.
 */
export function resolveOptions(evidence: EvidenceDocument, mode: RunSettings['mode']): ResolvedEvidence {
  const isRanking = mode === 'rank';
  const { options } = evidence;
  return {
    ...evidence,
    carbonSignals: attachedHydrogensFrom2D(evidence),
    options: {
      ...options,
      valenceGroups: options.valenceGroups ?? (isRanking ? [...VALENCE_GROUPS] : []),
      shiftWindows: options.shiftWindows ?? isRanking,
    },
  };
}
