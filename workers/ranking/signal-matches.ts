import type { PredictedSpectra, SignalMatch } from '../../shared/jobs/contract.js';
import type { EvidenceDocument } from '../../shared/schemas/evidence.js';
import { NOT_SEEN, OWN_SIGNAL, type CarbonLikelihood } from './carbon-likelihood.js';
import type { ProtonLikelihood } from './proton-likelihood.js';
import { solventOfCarbonSignal, solventOfProtonSignal } from './solvent-peaks.js';

/** What is said of a signal that nothing in the structure gives. */
const unexplained = (solvent: string | null): string =>
  solvent === null
    ? 'Nothing in this structure gives this signal.'
    : `Nothing in this structure gives this signal; ${solvent} has a line here.`;

/** Indexes of the predicted signals that hold an atom. */
function indexesOf(predicted: readonly { readonly atoms: readonly number[] }[], atom: number): number[] {
  return predicted.flatMap(({ atoms }, index) => (atoms.includes(atom) ? [index] : []));
}

function deviationOf(observed: number, predicted: readonly { readonly shift: number }[], indexes: readonly number[]): number | null {
  if (indexes.length === 0) return null;
  return observed - indexes.reduce((sum, index) => sum + predicted[index].shift, 0) / indexes.length;
}

/**
 * The best assignment of the structure scored last, signal by signal: one entry for each observed 13C signal in the
 * order of the evidence, then one for each predicted carbon that no signal shows.
 *
 * @param temperature - of the score, so that the terms add up to it.
 */
export function listCarbonMatches(
  carbon: CarbonLikelihood,
  evidence: EvidenceDocument,
  spectra: PredictedSpectra,
  temperature: number,
): SignalMatch[] {
  const matches: SignalMatch[] = evidence.carbonSignals.map((observed, signal) => {
    const own: number[] = [];
    const under: number[] = [];
    let cost = carbon.signalCost[signal];
    for (let row = 0; row < carbon.rowCount; row++) {
      if (carbon.rowSignal[row] !== signal) continue;
      const indexes = indexesOf(spectra.carbons, carbon.rowAtom[row]);
      (carbon.rowFate[row] === OWN_SIGNAL ? own : under).push(...indexes);
      cost += carbon.rowCost[row];
    }
    const remark =
      own.length === 0
        ? unexplained(solventOfCarbonSignal(observed, evidence.options.solvent))
        : under.some((index) => !own.includes(index))
          ? 'Several environments lie under this signal.'
          : null;
    return {
      nucleus: '13C',
      observedIndex: signal,
      predictedIndexes: [...new Set([...own, ...under])],
      deviation: deviationOf(observed.shift, spectra.carbons, own),
      term: -cost / temperature,
      remark,
    };
  });
  for (let row = 0; row < carbon.rowCount; row++) {
    if (carbon.rowFate[row] !== NOT_SEEN) continue;
    const isQuaternary = spectra.carbons[indexesOf(spectra.carbons, carbon.rowAtom[row])[0]]?.hydrogens === 0;
    matches.push({
      nucleus: '13C',
      observedIndex: null,
      predictedIndexes: indexesOf(spectra.carbons, carbon.rowAtom[row]),
      deviation: null,
      term: -carbon.rowCost[row] / temperature,
      remark: isQuaternary ? 'No signal found; quaternary carbons are weak and can be missing.' : 'No signal found.',
    });
  }
  return matches;
}

/** The same for 1H; exchangeable hydrogens without a signal are listed too. */
export function listProtonMatches(
  proton: ProtonLikelihood,
  evidence: EvidenceDocument,
  spectra: PredictedSpectra,
  temperature: number,
): SignalMatch[] {
  const bySignal = evidence.protonSignals.map(() => new Set<number>());
  const unseen: number[] = [];
  for (let row = 0; row < proton.rowCount; row++) {
    const indexes = indexesOf(spectra.protons, proton.rowAtom[row]).sort((a, b) => spectra.protons[a].shift - spectra.protons[b].shift);
    const signals = evidence.protonSignals.map((_, i) => i).filter((i) => proton.laidOn(row, i) > 0);
    if (proton.rowUnder[row] !== -1) signals.push(proton.rowUnder[row]);
    signals.sort((a, b) => evidence.protonSignals[a].shift - evidence.protonSignals[b].shift);
    // The hydrogens of a CH2 that show apart: predicted and observed halves pair up by shift.
    const isPaired = signals.length > 1 && signals.length === indexes.length;
    signals.forEach((signal, k) => {
      for (const index of isPaired ? [indexes[k]] : indexes) bySignal[signal].add(index);
    });
    if (signals.length === 0) unseen.push(row);
  }
  const matches: SignalMatch[] = evidence.protonSignals.map((observed, signal) => {
    const indexes = [...bySignal[signal]].sort((a, b) => a - b);
    const cost = proton.signalCost(signal);
    const remark =
      indexes.length === 0
        ? unexplained(solventOfProtonSignal(observed, evidence.options.solvent))
        : cost.pattern >= 2
          ? 'The splitting does not fit the neighbours.'
          : null;
    return {
      nucleus: '1H',
      observedIndex: signal,
      predictedIndexes: indexes,
      deviation: deviationOf(observed.shift, spectra.protons, indexes),
      term: -(cost.shift + cost.pattern) / temperature,
      remark,
    };
  });
  for (const row of unseen) {
    matches.push({
      nucleus: '1H',
      observedIndex: null,
      predictedIndexes: indexesOf(spectra.protons, proton.rowAtom[row]),
      deviation: null,
      term: -proton.missingCost(row) / temperature,
      remark: proton.rowIsExchangeable[row] === 1 ? 'No signal found; exchangeable hydrogens can be missing.' : 'No signal found.',
    });
  }
  return matches;
}
