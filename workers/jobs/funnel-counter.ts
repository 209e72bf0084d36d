import { FUNNEL_STAGES, type Funnel, type FunnelStage } from '../../shared/jobs/contract.js';
import { describeReason } from '../ranking/evaluator.js';

/** Counts how many constitutions each stage let through and why it rejected the rest. */
export class FunnelCounter {
  #constitutions = 0;
  readonly #rejected = new Map<FunnelStage, Map<string, number>>(FUNNEL_STAGES.map((stage) => [stage, new Map()]));

  arrive(): void {
    this.#constitutions++;
  }

  reject(stage: FunnelStage, reason: string): void {
    const reasons = this.#rejected.get(stage)!;
    reasons.set(reason, (reasons.get(reason) ?? 0) + 1);
  }

  funnel(): Funnel {
    let entered = this.#constitutions;
    return FUNNEL_STAGES.map((stage) => {
      const rejections = [...this.#rejected.get(stage)!].map(([reason, count]) => ({ reason, text: describeReason(reason), count }));
      rejections.sort((a, b) => b.count - a.count || (a.reason < b.reason ? -1 : 1));
      const passed = entered - rejections.reduce((sum, rejection) => sum + rejection.count, 0);
      const step = { stage, entered, passed, rejections };
      entered = passed;
      return step;
    });
  }
}
