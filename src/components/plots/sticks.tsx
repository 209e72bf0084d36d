import { useState, type PointerEvent } from 'react';
import { usePlotArea, useXAxisInverseScale, useXAxisScale } from 'recharts';
import { spreadLabels, stickHeight, type Nucleus, type ShiftRange, type Stick, type StickLink } from './stick-plot-layout';

const LABEL_ROOM = 46;
const LABEL_DISTANCE = 13;
/** Height of the woven strip between observed and predicted sticks. */
const WEFT = 22;
const HIT_PX = 14;
/** From here on a misfit is drawn as doubtful or as a conflict: two and three standard deviations. */
const DOUBTFUL_MISFIT = 2;
const CONFLICT_MISFIT = 3;

const linkColour = (misfit: number) =>
  misfit >= CONFLICT_MISFIT ? 'var(--color-madder)' : misfit >= DOUBTFUL_MISFIT ? 'var(--color-weld)' : 'var(--color-faded)';

interface SticksProps {
  nucleus: Nucleus;
  observed: readonly Stick[];
  predicted: readonly Stick[];
  links: readonly StickLink[];
  range: ShiftRange;
  activeKeys: ReadonlySet<string>;
  onActive: (key: string | null) => void;
  onZoomTo: (range: ShiftRange) => void;
}

interface PlacedStick {
  readonly stick: Stick;
  readonly x: number;
}

/** The drawing inside the chart's axes; must be a child of a chart. */
export function Sticks({ nucleus, observed, predicted, links, range, activeKeys, onActive, onZoomTo }: SticksProps) {
  const area = usePlotArea();
  const scale = useXAxisScale();
  const inverse = useXAxisInverseScale();
  const [drag, setDrag] = useState<{ from: number; to: number } | null>(null);
  // In its first pass the chart's scale knows nothing but the ends of the range.
  if (area === undefined || scale === undefined || !Number.isFinite(Number(scale((range.low + range.high) / 2)))) return null;

  const isVisible = (shift: number) => shift >= range.low && shift <= range.high;
  const place = (list: readonly Stick[]): PlacedStick[] =>
    list.filter((stick) => isVisible(stick.shift)).map((stick) => ({ stick, x: Number(scale(stick.shift)) }));
  const above = place(observed);
  const below = place(predicted);
  const mostNuclei = Math.max(1, ...observed.map((stick) => stick.nuclei), ...predicted.map((stick) => stick.nuclei));

  const hasObserved = observed.length > 0;
  const labelsTop = area.y;
  const sticksTop = labelsTop + LABEL_ROOM;
  const half = hasObserved ? (area.height - LABEL_ROOM - WEFT) / 2 : 0;
  const upperBase = sticksTop + half;
  const lowerBase = hasObserved ? upperBase + WEFT : sticksTop;
  const lowerHeight = area.y + area.height - lowerBase;

  const labelled = hasObserved ? above : below;
  const labelXs = spreadLabels(
    labelled.map(({ x }) => x),
    LABEL_DISTANCE,
    { from: area.x + 6, to: area.x + area.width - 6 },
  );
  const digits = nucleus === '13C' ? 1 : 2;
  const shiftText = (shift: number) => (shift < 0 ? `\u2212${Math.abs(shift).toFixed(digits)}` : shift.toFixed(digits));
  const xByKey = new Map([...above, ...below].map(({ stick, x }) => [stick.key, x]));

  const localX = (event: PointerEvent<SVGRectElement>) => event.clientX - event.currentTarget.getBoundingClientRect().left + area.x;
  const onPointerMove = (event: PointerEvent<SVGRectElement>) => {
    const x = localX(event);
    if (drag !== null) {
      setDrag({ ...drag, to: x });
      return;
    }
    const y = event.clientY - event.currentTarget.getBoundingClientRect().top + area.y;
    const pool = hasObserved && y < upperBase + WEFT / 2 ? above : below;
    const nearest = pool.reduce<PlacedStick | null>(
      (best, candidate) =>
        Math.abs(candidate.x - x) <= Math.min(HIT_PX, best === null ? HIT_PX : Math.abs(best.x - x)) ? candidate : best,
      null,
    );
    onActive(nearest?.stick.key ?? null);
  };
  const endDrag = () => {
    if (drag !== null && inverse !== undefined && Math.abs(drag.to - drag.from) > 8) {
      const [a, b] = [Number(inverse(drag.from)), Number(inverse(drag.to))];
      onZoomTo({ low: Math.min(a, b), high: Math.max(a, b) });
    }
    setDrag(null);
  };

  return (
    <g>
      {below.map(({ stick, x }) => {
        const height = lowerHeight * stickHeight(stick.nuclei, mostNuclei);
        const isActive = activeKeys.has(stick.key);
        const left = Math.max(area.x, Number(scale(stick.shift + (stick.sd ?? 0))));
        const right = Math.min(area.x + area.width, Number(scale(stick.shift - (stick.sd ?? 0))));
        return (
          <g key={stick.key}>
            {stick.sd === undefined ? null : (
              <rect
                x={left}
                y={lowerBase}
                width={Math.max(0, right - left)}
                height={height}
                fill="var(--color-faded)"
                opacity={isActive ? 0.28 : 0.13}
              />
            )}
            <line x1={x} x2={x} y1={lowerBase} y2={lowerBase + height} stroke="var(--color-faded)" strokeWidth={isActive ? 3 : 1.5} />
          </g>
        );
      })}
      {links.map((link) => {
        const from = xByKey.get(link.observedKey);
        const to = xByKey.get(link.predictedKey);
        if (from === undefined || to === undefined) return null;
        const isActive = activeKeys.has(link.observedKey) || activeKeys.has(link.predictedKey);
        return (
          <line
            key={link.key}
            x1={from}
            x2={to}
            y1={upperBase}
            y2={lowerBase}
            stroke={linkColour(link.misfit)}
            strokeWidth={isActive ? 2.5 : link.misfit >= DOUBTFUL_MISFIT ? 1.75 : 1}
            strokeOpacity={isActive || link.misfit >= DOUBTFUL_MISFIT ? 1 : 0.7}
          />
        );
      })}
      {hasObserved ? <line x1={area.x} x2={area.x + area.width} y1={upperBase} y2={upperBase} stroke="var(--color-seam)" /> : null}
      <line x1={area.x} x2={area.x + area.width} y1={lowerBase} y2={lowerBase} stroke="var(--color-seam)" />
      {above.map(({ stick, x }) => {
        const isActive = activeKeys.has(stick.key);
        return (
          <line
            key={stick.key}
            x1={x}
            x2={x}
            y1={upperBase}
            y2={upperBase - half * stickHeight(stick.nuclei, mostNuclei)}
            stroke="var(--color-indigo)"
            strokeWidth={isActive ? 4 : 2}
          />
        );
      })}
      {labelXs === null
        ? null
        : labelled.map(({ stick, x }, index) => {
            const labelX = labelXs[index] ?? x;
            const isActive = activeKeys.has(stick.key);
            const stickTop = hasObserved ? upperBase - half * stickHeight(stick.nuclei, mostNuclei) : lowerBase;
            const colour = hasObserved ? 'var(--color-indigo)' : 'var(--color-faded)';
            return (
              <g key={stick.key}>
                <path
                  d={`M${labelX} ${sticksTop - 10}L${x} ${sticksTop - 3}V${Math.max(sticksTop - 3, stickTop - 3)}`}
                  fill="none"
                  stroke={colour}
                  strokeOpacity={0.35}
                />
                <text
                  transform={`translate(${labelX + 4} ${sticksTop - 13}) rotate(-90)`}
                  fill={colour}
                  fontSize="12"
                  fontWeight={isActive ? 700 : 400}
                  className="tabular"
                >
                  {shiftText(stick.shift)}
                </text>
              </g>
            );
          })}
      {drag === null ? null : (
        <rect
          x={Math.min(drag.from, drag.to)}
          y={area.y}
          width={Math.abs(drag.to - drag.from)}
          height={area.height}
          fill="var(--color-indigo)"
          opacity={0.12}
        />
      )}
      <rect
        x={area.x}
        y={area.y}
        width={area.width}
        height={area.height}
        fill="transparent"
        className="cursor-crosshair touch-pan-y"
        onPointerDown={(event) => {
          if (event.pointerType !== 'mouse' || event.button !== 0) return;
          event.currentTarget.setPointerCapture(event.pointerId);
          setDrag({ from: localX(event), to: localX(event) });
        }}
        onPointerMove={onPointerMove}
        onPointerUp={endDrag}
        onPointerCancel={() => setDrag(null)}
        onPointerLeave={() => {
          if (drag === null) onActive(null);
        }}
      />
    </g>
  );
}
