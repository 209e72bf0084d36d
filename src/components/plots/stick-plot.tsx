import { lazy, Suspense } from 'react';
import type { Nucleus, Stick, StickLink } from './stick-plot-layout';

export interface StickPlotProps {
  nucleus: Nucleus;
  /** Says what is plotted, for screen readers; the numbers stand in the table beside it. */
  label: string;
  observed: readonly Stick[];
  predicted: readonly Stick[];
  links?: readonly StickLink[];
  activeKeys?: ReadonlySet<string>;
  /** Stick under the pointer, null when it leaves. */
  onActive?: (key: string | null) => void;
}

export const STICK_PLOT_HEIGHT = { both: 268, predictedOnly: 176 } as const;
const TOOLBAR_HEIGHT = 28;

const LazyChart = lazy(async () => ({ default: (await import('./stick-chart')).StickChart }));

/**
 * Observed signals upwards in indigo, predicted ones downwards in faded ink with their standard deviation as a light
 * band, on one reversed ppm axis. Matched signals are joined by a thread across the axis, so that a misfit shows as
 * a slant. The chart library comes in its own chunk; the frame has its final size from the start.
 */
export function StickPlot(props: StickPlotProps) {
  const height = (props.observed.length === 0 ? STICK_PLOT_HEIGHT.predictedOnly : STICK_PLOT_HEIGHT.both) + TOOLBAR_HEIGHT;
  return (
    <div style={{ minHeight: height }}>
      <Suspense fallback={<div aria-hidden="true" className="skeleton mt-7 opacity-40" style={{ height: height - TOOLBAR_HEIGHT }} />}>
        <LazyChart {...props} />
      </Suspense>
    </div>
  );
}
