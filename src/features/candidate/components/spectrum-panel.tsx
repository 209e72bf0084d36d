import { useMemo } from 'react';
import { Nucleus as NucleusName } from '../../../components/chemistry-text';
import { Panel } from '../../../components/panel';
import { StickPlot } from '../../../components/plots/stick-plot';
import { shiftText } from '../../../components/plots/signal-text';
import type { Nucleus } from '../../../components/plots/stick-plot-layout';
import { plotSticks, sortRows, worstRow, type RowOrder, type SignalRow } from './signal-rows';
import { SignalTable } from './signal-table';
import type { Highlight } from './use-highlight';

interface SpectrumPanelProps {
  nucleus: Nucleus;
  rows: readonly SignalRow[];
  order: RowOrder;
  meanDeviation: number | null;
  highlight: Highlight;
}

/** Plot and table of one nucleus. */
export function SpectrumPanel({ nucleus, rows, order, meanDeviation, highlight }: SpectrumPanelProps) {
  const sticks = useMemo(() => plotSticks(rows), [rows]);
  const sorted = useMemo(() => sortRows(rows, order), [rows, order]);
  const worst = worstRow(rows);
  const digits = nucleus === '13C' ? 1 : 2;
  return (
    <Panel
      title={<NucleusName nucleus={nucleus} />}
      actions={
        meanDeviation === null ? null : (
          <p className="tabular text-table text-faded">
            mean misfit{' '}
            <span className="text-ink">
              {meanDeviation.toFixed(digits)}
              {'\u2009'}ppm
            </span>
            {worst === null || worst.deviation === null || worst.observed === null ? null : (
              <>
                , worst{' '}
                <span className="text-ink">
                  {Math.abs(worst.deviation).toFixed(digits)}
                  {'\u2009'}ppm
                </span>{' '}
                at δ {shiftText(worst.observed.shift, nucleus)}
              </>
            )}
          </p>
        )
      }
    >
      {rows.length === 0 ? (
        <p className="text-faded">This molecule gives no such signals, and none were observed.</p>
      ) : (
        <>
          <StickPlot
            nucleus={nucleus}
            label={`${nucleus} signals, observed above and predicted below the axis`}
            observed={sticks.observed}
            predicted={sticks.predicted}
            links={sticks.links}
            activeKeys={highlight.stickKeys}
            onActive={highlight.pointAtStick}
          />
          <div className="mt-2">
            <SignalTable nucleus={nucleus} rows={sorted} litKeys={highlight.rowKeys} onPoint={highlight.pointAtRow} />
          </div>
        </>
      )}
    </Panel>
  );
}
