import type { Explanation, FunnelStage, RunSettings, ScoreTerms } from '../../shared/jobs/contract.js';
import type { EvidenceDocument } from '../../shared/schemas/evidence.js';
import type { MolecularGraph } from '../../shared/types/molecular-graph.js';
import { AnalysisScratch, analyseStructure } from '../graph/analysis.js';
import { CorrelationCheck } from './correlation-check.js';
import { Environments } from './environments.js';
import { compileExcludedFragments } from './excluded-fragments.js';
import { selectRules } from './plausibility/active-rules.js';
import { describeReason } from './reasons.js';
import { checkRingSizes } from './ring-sizes.js';
import { Scorer } from './scorer.js';
import { SignalBounds } from './signal-bounds.js';
import { SignalCensus } from './signal-census.js';

export { describeReason } from './reasons.js';

/** What becomes of one constitution. Valid until the next call: copy what you keep. */
export type Evaluation =
  | { readonly kind: 'rejected'; readonly stage: FunnelStage; readonly reason: string }
  | { readonly kind: 'scored'; readonly score: number; readonly terms: ScoreTerms };

export interface Evaluator {
  /** @param graph - read only, not kept. */
  evaluate(graph: MolecularGraph): Evaluation;
}

/**
 * Makes the filter and score of a run: excluded fragments, ring sizes, hard plausibility rules, numbers of signals, then
 * the score. Deterministic, the same in any worker; not re-entrant.
 *
 * @param settings - in the modes `count` and `list` nothing is predicted and every survivor scores 0.
 * @throws ProblemError on an unreadable excluded fragment.
 */
export function createEvaluator(evidence: EvidenceDocument, settings: RunSettings): Evaluator {
  const scratch = new AnalysisScratch();
  const environments = new Environments();
  const bounds = new SignalBounds();
  const excluded = compileExcludedFragments(evidence);
  const { hard, soft } = selectRules(evidence);
  const census = new SignalCensus(evidence);
  const correlations = CorrelationCheck.of(evidence);
  const hasSignals = evidence.carbonSignals.length > 0 || evidence.protonSignals.length > 0;
  const { ringSizes } = evidence.options;
  const limitsRings = ringSizes.min > 3 || ringSizes.max !== null;
  const scorer = settings.mode === 'rank' ? new Scorer(evidence, soft) : null;

  const rejection: { kind: 'rejected'; stage: FunnelStage; reason: string } = { kind: 'rejected', stage: 'constitutions', reason: '' };
  const unscored: Evaluation = { kind: 'scored', score: 0, terms: {} };
  const scored: { kind: 'scored'; score: number; terms: ScoreTerms } = { kind: 'scored', score: 0, terms: {} };
  const reject = (stage: FunnelStage, reason: string): Evaluation => {
    rejection.stage = stage;
    rejection.reason = reason;
    return rejection;
  };

  return {
    evaluate(graph) {
      if (excluded.length === 0 && !limitsRings && hard.length === 0 && !hasSignals && scorer === null) return unscored;
      const structure = analyseStructure(graph, scratch);
      for (let k = 0; k < excluded.length; k++) if (excluded[k].occursIn(structure)) return reject('excludedFragments', excluded[k].reason);
      if (limitsRings) {
        const reason = checkRingSizes(structure, ringSizes);
        if (reason !== null) return reject('ringSizes', reason);
      }
      for (let k = 0; k < hard.length; k++) if (hard[k].test(structure, null) > 0) return reject('plausibility', hard[k].reason);
      if (hasSignals) {
        environments.find(structure);
        bounds.find(structure, environments);
        const reason = census.check(structure, environments, bounds) ?? correlations?.check(structure, environments, bounds) ?? null;
        if (reason !== null) return reject('signals', reason);
      }
      if (scorer === null) return unscored;
      scored.score = scorer.score(structure, environments, bounds);
      scored.terms = scorer.terms;
      return scored;
    },
  };
}

/** Everything that speaks against a structure, or its score. */
export type EvaluationExplanation =
  | { readonly kind: 'rejected'; readonly stage: FunnelStage; readonly reasons: Extract<Explanation, { kind: 'rejected' }>['reasons'] }
  | { readonly kind: 'survives'; readonly score: number; readonly terms: ScoreTerms };

/**
 * Explains what a run with this evidence does with a structure: all reasons for which it would be rejected, of every
 * stage, with their atoms; the stage is the first that rejects it.
 *
 * @param graph - a structure of the right formula that holds the required fragments. Read only.
 */
export function explainEvaluation(evidence: EvidenceDocument, settings: RunSettings, graph: MolecularGraph): EvaluationExplanation {
  const structure = analyseStructure(graph);
  const environments = new Environments(Math.max(graph.atomCount, 1));
  environments.find(structure);
  const bounds = new SignalBounds();
  bounds.find(structure, environments);
  const reasons: { stage: FunnelStage; reason: string; text: string; atoms: readonly number[] }[] = [];
  const add = (stage: FunnelStage, reason: string, atoms: readonly number[]): void => {
    reasons.push({ stage, reason, text: describeReason(reason), atoms });
  };
  for (const fragment of compileExcludedFragments(evidence)) {
    const atoms = fragment.findIn(structure);
    if (atoms !== null) add('excludedFragments', fragment.reason, atoms);
  }
  const ringReason = checkRingSizes(structure, evidence.options.ringSizes);
  if (ringReason !== null) {
    const { min, max } = evidence.options.ringSizes;
    const misfits = structure.rings.filter((ring) => ring.length < min || (max !== null && ring.length > max));
    add('ringSizes', ringReason, [...new Set(misfits.flat())]);
  }
  for (const { test, reason } of selectRules(evidence).hard) {
    const atoms = new Set<number>();
    test(structure, (found) => found.forEach((atom) => atoms.add(atom)));
    if (atoms.size > 0) add('plausibility', reason, [...atoms]);
  }
  for (const { reason, atoms } of new SignalCensus(evidence).checkAll(structure, environments, bounds)) add('signals', reason, atoms);
  for (const { reason, text, atoms } of CorrelationCheck.of(evidence)?.explain(structure, environments, bounds) ?? []) {
    reasons.push({ stage: 'signals', reason, text, atoms });
  }
  if (reasons.length > 0) {
    return { kind: 'rejected', stage: reasons[0].stage, reasons: reasons.map(({ reason, text, atoms }) => ({ reason, text, atoms })) };
  }
  const evaluation = createEvaluator(evidence, settings).evaluate(graph);
  if (evaluation.kind === 'rejected') throw new Error(`explainEvaluation: rejected for ${evaluation.reason}, but without a reason found`);
  return { kind: 'survives', score: evaluation.score, terms: { ...evaluation.terms } };
}
