import type { ReactNode } from 'react';
import { classNames } from '../../lib/class-names';
import { formatCount } from '../../lib/numbers';
import { layOutBand, threadCount, type BandFrame } from './band-geometry';
import { BandSvg } from './band-svg';
import { FunnelTable } from './funnel-table';
import type { Band, BandGate } from './funnel-stages';
import { useElementWidth } from './use-element-width';

const THREADS_PER_DECADE = 6;
/** Below this width the stages are explained in a list under the picture. */
const COLUMNS_FROM_PX = 680;
const REASONS_SHOWN = 2;

function CutNote({ gate, isCompact = false, isLive }: { gate: BandGate; isCompact?: boolean; isLive: boolean }) {
  if (gate.left === null || (isLive && gate.cut === 0)) return null;
  if (gate.cut === 0) return <p className="text-faded">{isCompact ? 'none cut' : 'None cut'}</p>;
  const isHard = gate.stage !== 'ranked';
  const shown = gate.reasons.slice(0, REASONS_SHOWN);
  const hidden = gate.reasons.length - shown.length;
  return (
    <>
      <p className={classNames('font-semibold', isHard ? 'text-madder' : 'text-weld')}>
        {formatCount(gate.cut)} {isHard ? 'cut' : 'not kept'}
      </p>
      <ul className="text-faded">
        {shown.map((reason) => (
          <li key={reason.reason} className="line-clamp-3 wrap-break-word" title={reason.text}>
            {gate.reasons.length > 1 ? <span className="text-ink">{formatCount(reason.count)} </span> : null}
            {reason.text}
          </li>
        ))}
        {hidden > 0 ? <li>{hidden === 1 ? '1 more reason' : `${hidden} more reasons`}</li> : null}
      </ul>
    </>
  );
}

const leftText = (left: number | null): ReactNode => (left === null ? <span className="text-faded">–</span> : formatCount(left));

interface FunnelPictureProps {
  band: Band;
  /** The run did not see every constitution. */
  isIncomplete?: boolean;
  /** A run is going on: counts below gates are still to come. */
  isLive?: boolean;
}

/** A run as a band of threads with its counts and reasons in words, and everything as a table behind it. */
export function FunnelPicture({ band, isIncomplete = false, isLive = false }: FunnelPictureProps) {
  const [ref, width] = useElementWidth<HTMLDivElement>();
  const hasColumns = width >= COLUMNS_FROM_PX;
  // Room for eight decades: the picture keeps its height while a run grows.
  const roomThreads = Math.max(threadCount(band.woven ?? 0, THREADS_PER_DECADE), isLive ? threadCount(1e6, THREADS_PER_DECADE) : 8);
  const columnWidth = width / (band.gates.length + 1);
  const pitch = Math.max(1, Math.min(3, (columnWidth * 0.7) / roomThreads));
  const top = hasColumns ? 8 : 24;
  const frame: BandFrame = {
    width,
    left: 1,
    top,
    pitch,
    threadsPerDecade: THREADS_PER_DECADE,
    height: Math.ceil(top + roomThreads * pitch + 34),
  };
  const columns = { gridTemplateColumns: `repeat(${band.gates.length + 1}, minmax(0, 1fr))` };
  const hasReasons = band.gates.some((gate) => gate.reasons.length > 0);

  return (
    <figure ref={ref} aria-label="Funnel" className="min-w-0">
      {width === 0 ? null : hasColumns ? (
        <>
          <ol className="grid text-small" style={columns}>
            <li className="pr-3">
              <p className="text-faded">Formula, fragments, hydrogens</p>
              <p className="tabular text-lead font-semibold">{leftText(band.woven)}</p>
            </li>
            {band.gates.map((gate) => (
              <li key={gate.stage} className="flex flex-col justify-between px-2" title={gate.asks}>
                <p className="text-faded">{gate.name}</p>
                <p className="tabular text-lead font-semibold">{leftText(gate.left)}</p>
              </li>
            ))}
          </ol>
          <BandSvg band={band} geometry={layOutBand(band, frame)} frame={frame} isIncomplete={isIncomplete} />
          <ul className="tabular mt-1 grid text-small" style={columns} aria-label="Cut at each stage">
            <li className="pr-3 text-faded">{band.woven === 1 ? 'constitution' : 'constitutions'}</li>
            {band.gates.map((gate) => (
              <li key={gate.stage} className="px-2">
                <span className="sr-only">{gate.name}: </span>
                <CutNote gate={gate} isLive={isLive} />
              </li>
            ))}
          </ul>
        </>
      ) : (
        <>
          <BandSvg band={band} geometry={layOutBand(band, frame)} frame={frame} isIncomplete={isIncomplete} hasGateNumbers />
          <p className="tabular mt-1 text-small">
            <span className="font-semibold">{leftText(band.woven)}</span>{' '}
            <span className="text-faded">from formula, fragments and hydrogens</span>
          </p>
          <ol className="tabular mt-1 text-small">
            {band.gates.map((gate, index) => (
              <li key={gate.stage} className="grid grid-cols-[20px_minmax(0,1fr)_auto] gap-x-1 border-t border-seam py-1.5">
                <span aria-hidden="true" className="font-semibold text-faded">
                  {index + 1}
                </span>
                <div>
                  <p>{gate.name}</p>
                  <CutNote gate={gate} isCompact isLive={isLive} />
                </div>
                <p className="font-semibold">
                  {leftText(gate.left)} {gate.left === null ? null : <span className="font-normal text-faded">left</span>}
                </p>
              </li>
            ))}
          </ol>
        </>
      )}
      {isLive ? (
        <p className="mt-2 text-small text-faded">
          Grey threads that leave the band have been cut; at which stage and why is counted when their shard is done.
        </p>
      ) : null}
      {hasReasons ? (
        <details className="mt-3 text-small">
          <summary className="w-fit rounded-small text-indigo">Every count and reason as a table</summary>
          <div className="mt-2">
            <FunnelTable band={band} />
          </div>
        </details>
      ) : null}
    </figure>
  );
}
