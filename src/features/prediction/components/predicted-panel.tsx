import { useMemo } from 'react';
import { Coupling, Nucleus as NucleusName } from '../../../components/chemistry-text';
import { CopyButton } from '../../../components/copy-button';
import { Panel } from '../../../components/panel';
import { atomNumbersText, carbonTypeText, shiftText } from '../../../components/plots/signal-text';
import { StickPlot } from '../../../components/plots/stick-plot';
import type { Nucleus, Stick } from '../../../components/plots/stick-plot-layout';
import { classNames } from '../../../lib/class-names';
import type { Prediction } from '../api/prediction-query';
import { journalListing } from './journal-listing';

interface PredictedRow {
  readonly key: string;
  readonly shift: number;
  readonly sd: number;
  readonly nuclei: number;
  readonly kind: string;
  readonly couplings: readonly number[];
  readonly isExchangeable: boolean;
  readonly atoms: readonly number[];
  readonly basis: string;
}

function rowsOf(prediction: Prediction, nucleus: Nucleus): PredictedRow[] {
  const rows =
    nucleus === '13C'
      ? prediction.carbons.map((carbon) => ({
          shift: carbon.shift,
          sd: carbon.sd,
          nuclei: carbon.atoms.length,
          kind: carbonTypeText(carbon.hydrogens),
          couplings: [],
          isExchangeable: false,
          atoms: carbon.atoms,
          basis: carbon.basis,
        }))
      : prediction.protons.map((proton) => ({
          shift: proton.shift,
          sd: proton.sd,
          nuclei: proton.count,
          kind: proton.multiplicity,
          couplings: proton.couplings,
          isExchangeable: proton.exchangeable,
          atoms: proton.atoms,
          basis: proton.basis,
        }));
  return rows.map((row, index) => ({ ...row, key: `${nucleus}-${index}` })).sort((a, b) => b.shift - a.shift);
}

const NO_STICKS: readonly Stick[] = [];

interface PredictedPanelProps {
  nucleus: Nucleus;
  prediction: Prediction;
  /** Atom under the pointer in the drawing. */
  litAtoms: readonly number[];
  onPoint: (atoms: readonly number[]) => void;
}

/** Predicted signals of one nucleus: plot, table with the reason for every number, and the listing to copy. */
export function PredictedPanel({ nucleus, prediction, litAtoms, onPoint }: PredictedPanelProps) {
  const rows = useMemo(() => rowsOf(prediction, nucleus), [prediction, nucleus]);
  const unit = nucleus === '13C' ? 'C' : 'H';
  const digits = nucleus === '13C' ? 1 : 2;
  const sticks = useMemo(
    () =>
      rows.map((row): Stick => ({
        key: row.key,
        shift: row.shift,
        sd: row.sd,
        nuclei: row.nuclei,
        text: `δ ${shiftText(row.shift, nucleus)} ± ${row.sd.toFixed(digits)}, ${row.nuclei}\u2009${unit}, ${row.kind}, atom ${atomNumbersText(row.atoms)}`,
      })),
    [rows, nucleus, unit, digits],
  );
  const litKeys = useMemo(
    () => new Set(rows.filter((row) => row.atoms.some((atom) => litAtoms.includes(atom))).map((row) => row.key)),
    [rows, litAtoms],
  );
  const listing = journalListing(prediction, nucleus);
  return (
    <Panel
      title={<NucleusName nucleus={nucleus} />}
      actions={listing === '' ? null : <CopyButton text={listing} label="Copy as listing" />}
    >
      {rows.length === 0 ? (
        <p className="text-faded">No {nucleus === '13C' ? 'carbon' : 'hydrogen'} in this structure.</p>
      ) : (
        <>
          <StickPlot
            nucleus={nucleus}
            label={`Predicted ${nucleus} signals`}
            observed={NO_STICKS}
            predicted={sticks}
            activeKeys={litKeys}
            onActive={(key) => onPoint(rows.find((row) => row.key === key)?.atoms ?? [])}
          />
          <div className="mt-2 overflow-x-auto" tabIndex={0} role="region" aria-label={`Predicted ${nucleus} signals as a table`}>
            <table className="tabular w-full border-collapse text-left text-table" onPointerLeave={() => onPoint([])}>
              <caption className="sr-only">Predicted {nucleus} signals</caption>
              <thead className="text-faded">
                <tr className="border-b border-seam">
                  {['δ', '± sd', unit, nucleus === '13C' ? 'Type' : 'Shape', 'Atoms', 'Basis'].map((head, index) => (
                    <th
                      key={head}
                      scope="col"
                      className={classNames('h-7 px-2 font-semibold whitespace-nowrap', index < 3 && 'text-right')}
                    >
                      {head}
                    </th>
                  ))}
                </tr>
              </thead>
              <tbody>
                {rows.map((row) => (
                  <tr
                    key={row.key}
                    className={classNames('border-b border-seam last:border-b-0', litKeys.has(row.key) && 'bg-indigo-wash')}
                    onPointerEnter={() => onPoint(row.atoms)}
                  >
                    <td className="h-7 px-2 text-right font-semibold">{shiftText(row.shift, nucleus)}</td>
                    <td className="px-2 text-right text-faded">{row.sd.toFixed(digits)}</td>
                    <td className="px-2 text-right">{row.nuclei}</td>
                    <td className="px-2 whitespace-nowrap">
                      {row.kind}
                      {row.couplings.length === 0 ? null : (
                        <>
                          , <Coupling values={row.couplings} />
                        </>
                      )}
                      {row.isExchangeable ? <span className="text-faded">, exchanges</span> : null}
                    </td>
                    <td className="px-2 whitespace-nowrap">{atomNumbersText(row.atoms)}</td>
                    <td className="px-2 text-small text-faded">{row.basis}</td>
                  </tr>
                ))}
              </tbody>
            </table>
          </div>
          <p className="mt-3 border-t border-seam pt-3 text-table text-faded select-all">{listing}</p>
        </>
      )}
    </Panel>
  );
}
