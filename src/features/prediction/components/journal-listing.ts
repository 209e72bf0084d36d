import { shiftText } from '../../../components/plots/signal-text';
import type { Nucleus } from '../../../components/plots/stick-plot-layout';
import type { Prediction } from '../api/prediction-query';

const carbonType = (hydrogens: number) => ['C', 'CH', 'CH2', 'CH3'][hydrogens] ?? `CH${hydrogens}`;

/**
 * Predicted signals as a line of running text, the way journals list spectra: high to low shift, "δ 7.21 (d, J = 8.1 Hz,
 * 2H)". The head says that the numbers are predicted, so that the line cannot pass for a measurement.
 *
 * @returns plain text with δ and superscripts; an empty string when there are no signals.
 */
export function journalListing(prediction: Pick<Prediction, 'carbons' | 'protons'>, nucleus: Nucleus): string {
  const peaks =
    nucleus === '13C'
      ? [...prediction.carbons]
          .sort((a, b) => b.shift - a.shift)
          .map(
            ({ shift, atoms, hydrogens }) =>
              `${shiftText(shift, '13C')} (${atoms.length > 1 ? `${atoms.length}C, ` : ''}${carbonType(hydrogens)})`,
          )
      : [...prediction.protons]
          .sort((a, b) => b.shift - a.shift)
          .map(({ shift, multiplicity, couplings, count, exchangeable }) => {
            const parts = [
              multiplicity,
              couplings.length === 0 ? '' : `J = ${couplings.map((value) => value.toFixed(1)).join(', ')} Hz`,
              `${count}H`,
              exchangeable ? 'exch.' : '',
            ];
            return `${shiftText(shift, '1H')} (${parts.filter((part) => part !== '').join(', ')})`;
          });
  if (peaks.length === 0) return '';
  return `${nucleus === '13C' ? '¹³C' : '¹H'} NMR (predicted, CDCl₃) δ ${peaks.join(', ')}.`;
}
