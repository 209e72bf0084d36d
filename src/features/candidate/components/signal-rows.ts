import type { EvidenceDocument } from '../../../../shared/schemas/evidence';
import { atomNumbersText, carbonCountText, carbonTypeText, protonCountText, shiftText } from '../../../components/plots/signal-text';
import type { Nucleus, Stick, StickLink } from '../../../components/plots/stick-plot-layout';
import type { CandidateDetail } from '../../../lib/queries/candidate-queries';

type PredictedCarbon = CandidateDetail['spectra']['carbons'][number];
type PredictedProton = CandidateDetail['spectra']['protons'][number];
type Evidence = Pick<EvidenceDocument, 'carbonSignals' | 'protonSignals'>;

/** Predicted side of a signal, of either nucleus. */
export interface PredictedSignal {
  readonly index: number;
  readonly shift: number;
  readonly sd: number;
  readonly atoms: readonly number[];
  /** Carbons, or hydrogens, under the signal. */
  readonly nuclei: number;
  /** CH₃ for a carbon; multiplicity for a proton. */
  readonly kind: string;
  readonly couplings: readonly number[];
  readonly isExchangeable: boolean;
  readonly basis: string;
}
export interface ObservedSignal {
  readonly index: number;
  readonly shift: number;
  /** Count of the evidence; null when people did not say. */
  readonly nuclei: number | null;
  readonly kind: string;
  readonly couplings: readonly number[];
}
/** One line of the comparison: an observed signal, what is laid on it, and how well it fits. */
export interface SignalRow {
  readonly key: string;
  readonly nucleus: Nucleus;
  readonly observed: ObservedSignal | null;
  readonly predicted: readonly PredictedSignal[];
  /** observed − predicted, ppm. */
  readonly deviation: number | null;
  /** |deviation| in standard deviations of the prediction; null when one side is missing. */
  readonly misfit: number | null;
  readonly term: number;
  readonly remark: string | null;
  /** Every atom under the predicted side, for highlighting. */
  readonly atoms: readonly number[];
}
export type RowOrder = 'misfit' | 'shift';

const fromCarbon = (carbon: PredictedCarbon, index: number): PredictedSignal => ({
  index,
  shift: carbon.shift,
  sd: carbon.sd,
  atoms: carbon.atoms,
  nuclei: carbon.atoms.length,
  kind: carbonTypeText(carbon.hydrogens),
  couplings: [],
  isExchangeable: false,
  basis: carbon.basis,
});
const fromProton = (proton: PredictedProton, index: number): PredictedSignal => ({
  index,
  shift: proton.shift,
  sd: proton.sd,
  atoms: proton.atoms,
  nuclei: proton.count,
  kind: proton.multiplicity,
  couplings: proton.couplings,
  isExchangeable: proton.exchangeable,
  basis: proton.basis,
});

/** Predicted signals of one nucleus in the order of the response, so that indexes of matches fit. */
export function predictedSignals(spectra: CandidateDetail['spectra'], nucleus: Nucleus): PredictedSignal[] {
  return nucleus === '13C' ? spectra.carbons.map(fromCarbon) : spectra.protons.map(fromProton);
}

export function observedSignals(evidence: Evidence, nucleus: Nucleus): ObservedSignal[] {
  if (nucleus === '13C') {
    return evidence.carbonSignals.map((signal, index) => ({
      index,
      shift: signal.shift,
      nuclei: signal.count ?? null,
      kind: signal.hydrogens === undefined ? '' : carbonTypeText(signal.hydrogens),
      couplings: [],
    }));
  }
  return evidence.protonSignals.map((signal, index) => ({
    index,
    shift: signal.shift,
    nuclei: signal.count ?? null,
    kind: signal.multiplicity ?? '',
    couplings: signal.couplings ?? [],
  }));
}

/** The root mean square of standard deviations: that of the one prediction in the usual case. */
const pooledSd = (signals: readonly PredictedSignal[]) => Math.sqrt(signals.reduce((sum, { sd }) => sum + sd * sd, 0) / signals.length);

/** Rows of one nucleus from the matches of a candidate. */
export function signalRows(candidate: Pick<CandidateDetail, 'spectra' | 'matches'>, evidence: Evidence, nucleus: Nucleus): SignalRow[] {
  const predictedByIndex = predictedSignals(candidate.spectra, nucleus);
  const observedByIndex = observedSignals(evidence, nucleus);
  return candidate.matches
    .filter((match) => match.nucleus === nucleus)
    .map((match, position) => {
      const predicted = match.predictedIndexes.flatMap((index) => predictedByIndex[index] ?? []);
      const observed = match.observedIndex === null ? null : (observedByIndex[match.observedIndex] ?? null);
      const sd = predicted.length === 0 ? 0 : pooledSd(predicted);
      return {
        key: `${nucleus}-${position}`,
        nucleus,
        observed,
        predicted,
        deviation: match.deviation,
        misfit: match.deviation === null || sd === 0 ? null : Math.abs(match.deviation) / sd,
        term: match.term,
        remark: match.remark,
        atoms: predicted.flatMap((signal) => signal.atoms),
      };
    });
}

const shiftOf = (row: SignalRow) => row.observed?.shift ?? row.predicted[0]?.shift ?? 0;

/**
 * How badly a row fits, in units of log-likelihood, so that misfits and missing signals compare. The term of a matched
 * signal is not asked: its density also falls with the width of the prediction, which is no misfit.
 */
const badness = (row: SignalRow) => (row.misfit === null ? -row.term : row.misfit ** 2 / 2);

/** Rows in reading order: what fits worst first, or from high to low shift. */
export function sortRows(rows: readonly SignalRow[], order: RowOrder): SignalRow[] {
  return [...rows].sort((a, b) => (order === 'misfit' ? badness(b) - badness(a) : 0) || shiftOf(b) - shiftOf(a));
}

/** The matched signal with the largest misfit, or null. */
export function worstRow(rows: readonly SignalRow[]): SignalRow | null {
  return rows.reduce<SignalRow | null>((worst, row) => (row.misfit !== null && row.misfit > (worst?.misfit ?? 0) ? row : worst), null);
}

export const observedKey = (nucleus: Nucleus, index: number) => `${nucleus}-observed-${index}`;
export const predictedKey = (nucleus: Nucleus, index: number) => `${nucleus}-predicted-${index}`;

/** Sticks and links of the plot from the rows of the table, so that both speak of the same signals. */
export function plotSticks(rows: readonly SignalRow[]): { observed: Stick[]; predicted: Stick[]; links: StickLink[] } {
  const observed = new Map<string, Stick>();
  const predicted = new Map<string, Stick>();
  const links: StickLink[] = [];
  for (const row of rows) {
    const { nucleus } = row;
    if (row.observed !== null) {
      const key = observedKey(nucleus, row.observed.index);
      const nuclei =
        row.observed.nuclei ??
        Math.max(
          1,
          row.predicted.reduce((sum, signal) => sum + signal.nuclei, 0),
        );
      const kind =
        nucleus === '13C'
          ? carbonCountText(row.observed.nuclei, row.observed.kind)
          : protonCountText(row.observed.nuclei, row.observed.kind);
      observed.set(key, {
        key,
        shift: row.observed.shift,
        nuclei,
        text: `observed δ ${shiftText(row.observed.shift, nucleus)}${kind === '' ? '' : ` (${kind})`}`,
      });
    }
    for (const signal of row.predicted) {
      const key = predictedKey(nucleus, signal.index);
      predicted.set(key, {
        key,
        shift: signal.shift,
        sd: signal.sd,
        nuclei: signal.nuclei,
        text: `predicted δ ${shiftText(signal.shift, nucleus)} ± ${signal.sd.toFixed(nucleus === '13C' ? 1 : 2)} (${signal.kind}, atom ${atomNumbersText(signal.atoms)})`,
      });
      if (row.observed !== null)
        links.push({
          key: `${row.key}-${signal.index}`,
          observedKey: observedKey(nucleus, row.observed.index),
          predictedKey: key,
          misfit: row.misfit ?? 0,
        });
    }
  }
  return { observed: [...observed.values()], predicted: [...predicted.values()], links };
}

/** Keys of the sticks that belong to a row. */
export function stickKeys(row: SignalRow): string[] {
  return [
    ...(row.observed === null ? [] : [observedKey(row.nucleus, row.observed.index)]),
    ...row.predicted.map((signal) => predictedKey(row.nucleus, signal.index)),
  ];
}
