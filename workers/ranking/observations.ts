import type { EvidenceDocument } from '../../shared/schemas/evidence.js';
import { solventOfCarbonSignal, solventOfProtonSignal } from './solvent-peaks.js';

/** Attached hydrogens of a 13C signal that were not determined. */
export const UNKNOWN_HYDROGENS = -1;
/** Count of a signal that is not known. */
export const UNKNOWN_COUNT = 0;

/** 13C list of a document as columns; element i is `evidence.carbonSignals[i]`. Shifts in ppm. */
export interface CarbonObservations {
  readonly size: number;
  readonly shift: Float64Array;
  /** 0–3, or {@link UNKNOWN_HYDROGENS}. */
  readonly hydrogens: Int8Array;
  /** Carbons under the signal, or {@link UNKNOWN_COUNT}. */
  readonly count: Int32Array;
  /** 1 where the signal may be the solvent's: it proves no carbon. */
  readonly maybeSolvent: Uint8Array;
  /** Every signal has its attached hydrogens. */
  readonly isTyped: boolean;
  /** Every protonated carbon shows: a CHn type without a signal is absent from the molecule. */
  readonly isComplete: boolean;
}

/** 1H list of a document as columns; element i is `evidence.protonSignals[i]`. Shifts in ppm. */
export interface ProtonObservations {
  readonly size: number;
  readonly shift: Float64Array;
  /** Hydrogens under the signal, or {@link UNKNOWN_COUNT}. */
  readonly count: Int32Array;
  /** 1 where the signal may be the solvent's or water: it proves no hydrogen. */
  readonly maybeSolvent: Uint8Array;
  /** 1 = marked as exchangeable, 0 = marked as not, −1 = not said. */
  readonly exchangeable: Int8Array;
  readonly isCounted: boolean;
}

export function readCarbonObservations(evidence: EvidenceDocument): CarbonObservations {
  const signals = evidence.carbonSignals;
  const { solvent, carbonList } = evidence.options;
  const maybeSolvent = Uint8Array.from(signals, (signal) => (solventOfCarbonSignal(signal, solvent) === null ? 0 : 1));
  const own = signals.filter((_, index) => maybeSolvent[index] === 0);
  return {
    size: signals.length,
    shift: Float64Array.from(signals, ({ shift }) => shift),
    hydrogens: Int8Array.from(signals, ({ hydrogens }) => hydrogens ?? UNKNOWN_HYDROGENS),
    count: Int32Array.from(signals, ({ count }) => count ?? UNKNOWN_COUNT),
    maybeSolvent,
    isTyped: signals.every(({ hydrogens }) => hydrogens !== undefined),
    isComplete: own.length > 0 && own.every(({ hydrogens }) => hydrogens !== undefined) && carbonList === 'complete',
  };
}

export function readProtonObservations(evidence: EvidenceDocument): ProtonObservations {
  const signals = evidence.protonSignals;
  return {
    size: signals.length,
    shift: Float64Array.from(signals, ({ shift }) => shift),
    count: Int32Array.from(signals, ({ count }) => count ?? UNKNOWN_COUNT),
    maybeSolvent: Uint8Array.from(signals, (signal) => (solventOfProtonSignal(signal, evidence.options.solvent) === null ? 0 : 1)),
    exchangeable: Int8Array.from(signals, ({ exchangeable }) => (exchangeable === undefined ? -1 : exchangeable ? 1 : 0)),
    isCounted: signals.every(({ count }) => count !== undefined),
  };
}
