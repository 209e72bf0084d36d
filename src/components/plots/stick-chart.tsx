import { ChevronLeft, ChevronRight, Maximize2, ZoomIn, ZoomOut } from 'lucide-react';
import { useMemo, useState, type KeyboardEvent } from 'react';
import { ComposedChart, XAxis, YAxis } from 'recharts';
import { useElementWidth } from '../funnel/use-element-width';
import { IconButton } from '../icon-button';
import { STICK_PLOT_HEIGHT, type StickPlotProps } from './stick-plot';
import { axisTicks, panRange, wholeRange, zoomRange, type ShiftRange } from './stick-plot-layout';
import { Sticks } from './sticks';

const MARGIN = { top: 4, right: 10, bottom: 0, left: 10 };
const AXIS_HEIGHT = 40;
const NOTHING_ACTIVE: ReadonlySet<string> = new Set();
const ignore = () => undefined;

/** The plot with its zoom controls. See StickPlot, which loads it. */
export function StickChart({
  nucleus,
  label,
  observed,
  predicted,
  links = [],
  activeKeys = NOTHING_ACTIVE,
  onActive = ignore,
}: StickPlotProps) {
  const [frame, width] = useElementWidth<HTMLDivElement>();
  const whole = useMemo(() => wholeRange([...observed, ...predicted], nucleus), [observed, predicted, nucleus]);
  const [zoomed, setZoomed] = useState<ShiftRange | null>(null);
  const range = zoomed ?? whole;
  const isWhole = range.low <= whole.low && range.high >= whole.high;
  const height = observed.length === 0 ? STICK_PLOT_HEIGHT.predictedOnly : STICK_PLOT_HEIGHT.both;
  const active = [...observed, ...predicted].filter((stick) => activeKeys.has(stick.key));
  const zoom = (factor: number) => setZoomed(zoomRange(range, factor, active[0]?.shift ?? (range.low + range.high) / 2, whole));
  const pan = (share: number) => setZoomed(panRange(range, share, whole));
  const onKeyDown = (event: KeyboardEvent) => {
    // The axis runs from right to left: the left key goes to higher shifts.
    const acts: Readonly<Record<string, () => void>> = {
      ArrowLeft: () => pan(0.25),
      ArrowRight: () => pan(-0.25),
      '+': () => zoom(0.5),
      '-': () => zoom(2),
      Escape: () => setZoomed(null),
    };
    const act = acts[event.key];
    if (act === undefined || (isWhole && event.key !== '+')) return;
    event.preventDefault();
    event.stopPropagation();
    act();
  };
  return (
    <div>
      <div className="flex h-7 items-center justify-between gap-3 text-small">
        <p className="min-w-0 truncate">
          {active.length === 0 ? (
            <span className="flex gap-4 text-faded">
              {observed.length === 0 ? null : (
                <span className="inline-flex items-center gap-1.5">
                  <span aria-hidden="true" className="h-3 w-0.5 bg-indigo" />
                  observed
                </span>
              )}
              <span className="inline-flex items-center gap-1.5">
                <span aria-hidden="true" className="flex h-3 w-2.5 justify-center bg-faded/20">
                  <span className="h-3 w-px bg-faded" />
                </span>
                predicted, ± one standard deviation
              </span>
            </span>
          ) : (
            active.map((stick) => stick.text).join(' · ')
          )}
        </p>
        <div className="flex shrink-0">
          {isWhole ? null : (
            <>
              <IconButton label="Towards higher shifts" icon={<ChevronLeft className="size-4" />} onClick={() => pan(0.25)} />
              <IconButton label="Towards lower shifts" icon={<ChevronRight className="size-4" />} onClick={() => pan(-0.25)} />
              <IconButton label="Whole range" icon={<Maximize2 className="size-4" />} onClick={() => setZoomed(null)} />
              <IconButton label="Zoom out" icon={<ZoomOut className="size-4" />} onClick={() => zoom(2)} />
            </>
          )}
          <IconButton label="Zoom in" icon={<ZoomIn className="size-4" />} onClick={() => zoom(0.5)} />
        </div>
      </div>
      <div
        ref={frame}
        role="group"
        aria-label={`${label}. Plus and minus zoom, arrow keys move, Escape shows the whole range.`}
        tabIndex={0}
        onKeyDown={onKeyDown}
        className="rounded-small"
        style={{ height }}
      >
        {width === 0 ? null : (
          <ComposedChart
            width={width}
            height={height}
            data={[{ shift: range.low }, { shift: range.high }]}
            margin={MARGIN}
            accessibilityLayer={false}
          >
            <XAxis
              dataKey="shift"
              type="number"
              domain={[range.low, range.high]}
              ticks={axisTicks(range, width - MARGIN.left - MARGIN.right)}
              reversed
              allowDataOverflow
              height={AXIS_HEIGHT}
              interval={0}
              tickSize={5}
              tick={{ fill: 'var(--color-faded)', fontSize: 12 }}
              tickLine={{ stroke: 'var(--color-selvage)' }}
              axisLine={{ stroke: 'var(--color-selvage)' }}
              label={{ value: 'δ / ppm', position: 'insideBottomRight', offset: 5, fill: 'var(--color-faded)', fontSize: 12 }}
            />
            <YAxis hide domain={[0, 1]} />
            <Sticks
              nucleus={nucleus}
              observed={observed}
              predicted={predicted}
              links={links}
              range={range}
              activeKeys={activeKeys}
              onActive={onActive}
              onZoomTo={(next) => setZoomed(zoomRange(next, 1, (next.low + next.high) / 2, whole))}
            />
          </ComposedChart>
        )}
      </div>
    </div>
  );
}
