import type { z } from 'zod';
import type { funnelSchema } from '../../../shared/schemas/runs';

export type Funnel = z.infer<typeof funnelSchema>;
export type FunnelStep = Funnel[number];
export type FunnelStage = FunnelStep['stage'];

/** Name of each stage, and what its gate asks of a constitution. */
export const FUNNEL_STAGE_TEXT: Readonly<Record<FunnelStage, { readonly name: string; readonly asks: string }>> = {
  constitutions: {
    name: 'Formula, fragments, hydrogens',
    asks: 'Woven from the formula with the required fragments and attached hydrogens',
  },
  excludedFragments: { name: 'Excluded fragments', asks: 'Contains none of the excluded fragments' },
  ringSizes: { name: 'Ring sizes', asks: 'Has only rings of the sizes that are allowed' },
  plausibility: { name: 'Plausibility', asks: 'Breaks no plausibility rule that rejects' },
  signals: { name: 'Signals', asks: 'Can explain number and kind of the observed signals' },
  ranked: { name: 'Ranked', asks: 'Is among the best that the run keeps' },
};

/** One gate of the band: what is left behind it and what was cut. */
export interface BandGate {
  readonly stage: FunnelStage;
  readonly name: string;
  readonly asks: string;
  /** Constitutions behind the gate; null while a run has not reported it yet. */
  readonly left: number | null;
  /** Constitutions cut at the gate; 0 while unknown. */
  readonly cut: number;
  readonly reasons: FunnelStep['rejections'];
}

/** A band: how many constitutions were woven, then the gates they passed. */
export interface Band {
  /** Constitutions that entered the first gate; null before the first report. */
  readonly woven: number | null;
  readonly gates: readonly BandGate[];
}

const FILTER_STAGES: readonly FunnelStage[] = ['excludedFragments', 'ringSizes', 'plausibility', 'signals', 'ranked'];

function gateOf(stage: FunnelStage, step: FunnelStep | undefined, arriving: number | null): BandGate {
  const { name, asks } = FUNNEL_STAGE_TEXT[stage];
  if (step === undefined) return { stage, name, asks, left: arriving, cut: 0, reasons: [] };
  return { stage, name, asks, left: step.passed, cut: Math.max(0, step.entered - step.passed), reasons: step.rejections };
}

/**
 * Turns the funnel of a run into a band. A stage that the run left out lets everything through. The first
 * stage is the warp itself; it becomes a gate only when the engine cut something there.
 *
 * @param keptCount - candidates that the run keeps; the funnel itself ends with what was ranked. Absent = not known.
 */
export function bandFromFunnel(funnel: Funnel, keptCount?: number): Band {
  const byStage = new Map(funnel.map((step) => [step.stage, step]));
  const start = byStage.get('constitutions');
  const woven = start?.entered ?? funnel[0]?.entered ?? 0;
  const gates: BandGate[] = [];
  if (start !== undefined && start.entered > start.passed) gates.push(gateOf('constitutions', start, woven));
  let arriving = start?.passed ?? woven;
  for (const stage of FILTER_STAGES) {
    const gate = gateOf(stage, byStage.get(stage), arriving);
    gates.push(gate);
    arriving = gate.left ?? arriving;
  }
  const last = gates.at(-1);
  if (keptCount !== undefined && last !== undefined && last.left !== null && last.left > keptCount) {
    const count = last.left - keptCount;
    const reason = { reason: 'keepLimit', text: `Ranked below the ${keptCount} that are kept`, count };
    gates[gates.length - 1] = { ...last, left: keptCount, cut: last.cut + count, reasons: [...last.reasons, reason] };
  }
  return { woven, gates };
}

/** The band while a run is going on: seen and surviving constitutions are known, the gates between are not. */
export function bandFromProgress(progress: { readonly constitutionsSeen: number; readonly survivors: number } | null): Band {
  const seen = progress?.constitutionsSeen ?? null;
  return {
    woven: seen,
    gates: FILTER_STAGES.map((stage) => {
      const { name, asks } = FUNNEL_STAGE_TEXT[stage];
      const isSignals = stage === 'signals';
      return {
        stage,
        name,
        asks,
        left: isSignals && progress !== null ? progress.survivors : null,
        cut: 0,
        reasons: [],
      };
    }),
  };
}

/** The band in one sentence, for people who do not see the picture. */
export function describeBand(band: Band, formatNumber: (value: number) => string): string {
  if (band.woven === null) return 'No constitutions yet.';
  const known = band.gates.filter((gate) => gate.left !== null);
  const parts = known.map((gate) =>
    gate.cut > 0
      ? `${gate.name}: ${formatNumber(gate.cut)} cut, ${formatNumber(gate.left ?? 0)} left`
      : `${gate.name}: ${formatNumber(gate.left ?? 0)} left`,
  );
  return `${formatNumber(band.woven)} ${band.woven === 1 ? 'constitution' : 'constitutions'} from formula, fragments and attached hydrogens. ${parts.join('; ')}.`;
}
