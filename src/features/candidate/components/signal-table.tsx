import { CircleAlert, TriangleAlert } from 'lucide-react';
import { useState, type KeyboardEvent, type ReactNode } from 'react';
import { Coupling } from '../../../components/chemistry-text';
import { atomNumbersText, carbonCountText, protonCountText, shiftText } from '../../../components/plots/signal-text';
import type { Nucleus } from '../../../components/plots/stick-plot-layout';
import { classNames } from '../../../lib/class-names';
import { formatSigned } from '../../../lib/numbers';
import type { PredictedSignal, SignalRow } from './signal-rows';

/** From two standard deviations a misfit is called doubtful, from three a conflict. */
const DOUBTFUL = 2;
const CONFLICT = 3;

function Deviation({ row }: { row: SignalRow }) {
  if (row.deviation === null) return <span className="text-faded">–</span>;
  const misfit = row.misfit ?? 0;
  const text = formatSigned(row.deviation, row.nucleus === '13C' ? 1 : 2);
  if (misfit < DOUBTFUL) return text;
  const isConflict = misfit >= CONFLICT;
  const Icon = isConflict ? CircleAlert : TriangleAlert;
  return (
    <span
      className={classNames('inline-flex items-center gap-1 font-semibold', isConflict ? 'text-madder' : 'text-weld')}
      title={`${misfit.toFixed(1)} standard deviations`}
    >
      <Icon aria-hidden="true" className="size-3.5" />
      <span className="sr-only">{isConflict ? 'conflict: ' : 'doubtful: '}</span>
      {text}
    </span>
  );
}

/** What is under a signal: "2 × CH", "2 H, d, J = 8.1 Hz". */
function Count({
  nucleus,
  signal,
}: {
  nucleus: Nucleus;
  signal: Pick<PredictedSignal, 'kind' | 'couplings'> & { readonly nuclei: number | null; readonly isExchangeable?: boolean };
}) {
  const text = nucleus === '13C' ? carbonCountText(signal.nuclei, signal.kind) : protonCountText(signal.nuclei, signal.kind);
  return (
    <span className="block whitespace-nowrap">
      {text === '' && signal.couplings.length === 0 ? '–' : text}
      {signal.couplings.length === 0 ? null : (
        <span className="text-faded">
          {text === '' ? '' : ', '}
          <Coupling values={signal.couplings} />
        </span>
      )}
      {signal.isExchangeable === true ? <span className="text-faded">, exchanges</span> : null}
    </span>
  );
}

function PredictedShift({ signals, nucleus }: { signals: readonly PredictedSignal[]; nucleus: Nucleus }) {
  return signals.map((signal) => (
    <span key={signal.index} className="block whitespace-nowrap">
      {shiftText(signal.shift, nucleus)} <span className="text-faded">± {signal.sd.toFixed(nucleus === '13C' ? 1 : 2)}</span>
    </span>
  ));
}

const Head = ({ children, className }: { children: ReactNode; className?: string }) => (
  <th scope="col" className={classNames('h-7 px-2 font-semibold whitespace-nowrap', className)}>
    {children}
  </th>
);

interface SignalTableProps {
  nucleus: Nucleus;
  rows: readonly SignalRow[];
  litKeys: ReadonlySet<string>;
  onPoint: (key: string | null) => void;
}

/** Predicted against observed, signal by signal. Pointing at a line, or moving to it with the arrow keys, lights up its atoms. */
export function SignalTable({ nucleus, rows, litKeys, onPoint }: SignalTableProps) {
  const [stop, setStop] = useState(0);
  const isProton = nucleus === '1H';
  const tabStop = Math.min(stop, rows.length - 1);
  const onKeyDown = (event: KeyboardEvent<HTMLTableRowElement>) => {
    const target =
      event.key === 'ArrowDown'
        ? event.currentTarget.nextElementSibling
        : event.key === 'ArrowUp'
          ? event.currentTarget.previousElementSibling
          : null;
    if (!(target instanceof HTMLElement)) return;
    event.preventDefault();
    target.focus();
  };
  return (
    <div className="overflow-x-auto">
      <table className="w-full border-collapse text-left text-table" onPointerLeave={() => onPoint(null)}>
        <caption className="sr-only">
          {isProton ? '1H' : '13C'} signals, observed and predicted. Arrow keys move between lines and mark their atoms.
        </caption>
        <thead className="text-faded">
          <tr className="border-b border-seam">
            <Head className="text-right">
              <span className="text-indigo">Observed δ</span>
            </Head>
            <Head className="text-right">Predicted δ</Head>
            <Head className="text-right">Δ</Head>
            <Head>{isProton ? 'Observed shape' : 'Observed type'}</Head>
            <Head>{isProton ? 'Predicted shape' : 'Predicted type'}</Head>
            <Head>Atoms</Head>
            <Head className="hidden tablet:table-cell">Remark</Head>
            <Head className="hidden wide:table-cell">Basis</Head>
          </tr>
        </thead>
        <tbody>
          {rows.map((row, index) => (
            <tr
              key={row.key}
              tabIndex={index === tabStop ? 0 : -1}
              onPointerEnter={() => onPoint(row.key)}
              onFocus={() => {
                setStop(index);
                onPoint(row.key);
              }}
              onBlur={() => onPoint(null)}
              onKeyDown={onKeyDown}
              className={classNames('border-b border-seam outline-offset-[-2px] last:border-b-0', litKeys.has(row.key) && 'bg-indigo-wash')}
            >
              <td className="h-7 px-2 text-right font-semibold text-indigo">
                {row.observed === null ? <span className="font-normal text-faded">none</span> : shiftText(row.observed.shift, nucleus)}
              </td>
              <td className="px-2 text-right">
                {row.predicted.length === 0 ? (
                  <span className="text-faded">none</span>
                ) : (
                  <PredictedShift signals={row.predicted} nucleus={nucleus} />
                )}
              </td>
              <td className="px-2 text-right">
                <Deviation row={row} />
              </td>
              <td className="px-2 whitespace-nowrap">{row.observed === null ? null : <Count nucleus={nucleus} signal={row.observed} />}</td>
              <td className="px-2 text-faded">
                {row.predicted.map((signal) => (
                  <Count key={signal.index} nucleus={nucleus} signal={signal} />
                ))}
              </td>
              <td className="px-2 whitespace-nowrap">{atomNumbersText(row.atoms)}</td>
              <td className="hidden px-2 tablet:table-cell">{row.remark}</td>
              <td className="hidden px-2 text-small text-faded wide:table-cell">
                {[...new Set(row.predicted.map((signal) => signal.basis))].join('; ')}
              </td>
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  );
}
