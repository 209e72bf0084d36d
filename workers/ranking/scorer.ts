import type { ScoreTerms } from '../../shared/jobs/contract.js';
import type { EvidenceDocument } from '../../shared/schemas/evidence.js';
import type { StructureAnalysis } from '../graph/analysis.js';
import { createShiftPredictor } from '../prediction/create-shift-predictor.js';
import { createPredictedShifts, type ShiftPredictor } from '../prediction/predicted-shifts.js';
import { CarbonLikelihood } from './carbon-likelihood.js';
import type { Environments } from './environments.js';
import { readCarbonObservations, readProtonObservations } from './observations.js';
import type { ActiveRule } from './plausibility/active-rules.js';
import { ProtonLikelihood } from './proton-likelihood.js';
import { SCORE_MODEL, type ScoreModel } from './score-model.js';
import type { SignalBounds } from './signal-bounds.js';

let predictor: ShiftPredictor | null = null;

/** The predictor of this thread: its tables take longer to read than many a run, and it keeps nothing between calls. */
function sharedPredictor(): ShiftPredictor {
  predictor ??= createShiftPredictor();
  return predictor;
}

/**
 * Log posterior of a structure up to a constant: tempered log-likelihood of each kind of evidence plus the log prior of
 * the soft plausibility rules. The same code scores every candidate of a run and explains the kept ones, so both see the
 * same number. Not re-entrant.
 */
export class Scorer {
  /** Terms of the structure scored last; a term is present when there is evidence for it. Overwritten. */
  readonly terms: ScoreTerms = {};
  readonly carbon: CarbonLikelihood | null;
  readonly proton: ProtonLikelihood | null;
  readonly shifts = createPredictedShifts();
  private readonly hasMultiplicities: boolean;
  private readonly hasCounts: boolean;

  constructor(
    evidence: EvidenceDocument,
    private readonly soft: readonly ActiveRule[],
    private readonly model: ScoreModel = SCORE_MODEL,
  ) {
    this.carbon = evidence.carbonSignals.length === 0 ? null : new CarbonLikelihood(readCarbonObservations(evidence), model.carbon);
    this.proton =
      evidence.protonSignals.length === 0
        ? null
        : new ProtonLikelihood(readProtonObservations(evidence), evidence.protonSignals, model.proton);
    this.hasMultiplicities = evidence.protonSignals.some(({ multiplicity }) => multiplicity !== undefined);
    this.hasCounts = evidence.protonSignals.some(({ count }) => count !== undefined);
  }

  /**
   * @param s - structure. @param environments, bounds - of it, unused without signals. All read only.
   * @returns the score, finite; its parts are in `terms`.
   */
  score(s: StructureAnalysis, environments: Environments, bounds: SignalBounds): number {
    const { terms, carbon, proton, shifts } = this;
    let score = 0;
    if (carbon !== null || proton !== null) sharedPredictor().predictInto(s.graph, s, shifts);
    if (carbon !== null) {
      terms.carbon13 = carbon.score(s, environments, bounds, shifts) / this.model.temperature.carbon;
      score += terms.carbon13;
    }
    if (proton !== null) {
      proton.score(s, environments, bounds, shifts);
      terms.proton1 = proton.shiftTerm / this.model.temperature.proton;
      score += terms.proton1;
      if (this.hasMultiplicities) {
        terms.multiplicity = proton.multiplicityTerm / this.model.temperature.proton;
        score += terms.multiplicity;
      }
      if (this.hasCounts) {
        terms.integral = proton.integralTerm / this.model.temperature.proton;
        score += terms.integral;
      }
    }
    if (this.soft.length > 0) {
      let penalty = 0;
      for (let k = 0; k < this.soft.length; k++) penalty += this.soft[k].rule.penalty * this.soft[k].test(s, null);
      terms.plausibility = -penalty;
      score -= penalty;
    }
    return score;
  }
}
