import { useId } from 'react';
import type { BandFrame, BandGeometry } from './band-geometry';
import type { Band } from './funnel-stages';

interface BandSvgProps {
  band: Band;
  geometry: BandGeometry;
  frame: BandFrame;
  /** The list behind the last gate lacks constitutions: its ends are drawn in weld. */
  isIncomplete: boolean;
  /** Numbers on the gates, for layouts that explain them in a list. */
  hasGateNumbers?: boolean;
  /** For lists: gates step back behind the threads. */
  isSmall?: boolean;
}

/**
 * The threads themselves. A thread is undyed until its fate is known: madder where it is cut, weld where it is only
 * not kept, verdigris where it arrives. Decoration for the words beside it, hence hidden from screen readers.
 */
export function BandSvg({ band, geometry, frame, isIncomplete, hasGateNumbers = false, isSmall = false }: BandSvgProps) {
  const id = useId();
  const threadWidth = Math.max(0.75, frame.pitch * (isSmall ? 0.65 : 0.55));
  const cutColour = (gate: number) => (band.gates[gate]?.stage === 'ranked' ? 'var(--color-weld)' : 'var(--color-madder)');
  return (
    <svg
      aria-hidden="true"
      width={frame.width}
      height={frame.height}
      viewBox={`0 0 ${frame.width} ${frame.height}`}
      className="block overflow-visible"
      fill="none"
      strokeWidth={threadWidth}
    >
      <defs>
        {geometry.gates.map((gate, index) => (
          <linearGradient
            key={gate.x}
            id={`${id}-cut-${index}`}
            gradientUnits="userSpaceOnUse"
            x1={gate.x - 24}
            x2={gate.x + 2}
            y1="0"
            y2="0"
          >
            <stop offset="0" stopColor="var(--color-faded)" />
            <stop offset="1" stopColor={cutColour(index)} />
          </linearGradient>
        ))}
        <linearGradient
          id={`${id}-left`}
          gradientUnits="userSpaceOnUse"
          x1={(geometry.gates.at(-1)?.x ?? 0) - 24}
          x2={(geometry.gates.at(-1)?.x ?? 0) + 8}
          y1="0"
          y2="0"
        >
          <stop offset="0" stopColor="var(--color-faded)" />
          <stop offset="1" stopColor={isIncomplete ? 'var(--color-weld-fill)' : 'var(--color-verdigris)'} />
        </linearGradient>
        <linearGradient id={`${id}-fade`} x1="0" x2="0" y1="0" y2="1">
          <stop offset="0.7" stopColor="white" />
          <stop offset="1" stopColor="white" stopOpacity="0" />
        </linearGradient>
        <mask id={`${id}-mask`} maskUnits="userSpaceOnUse" x="0" y="0" width={frame.width} height={frame.height}>
          <rect width={frame.width} height={frame.height} fill={`url(#${id}-fade)`} />
        </mask>
      </defs>
      <g mask={`url(#${id}-mask)`}>
        {geometry.cut.map((path) => (
          <path
            key={path.key}
            d={path.d}
            stroke={path.isCounted ? `url(#${id}-cut-${path.gate})` : 'var(--color-faded)'}
            strokeOpacity={path.isCounted ? 0.9 : 0.55}
          />
        ))}
      </g>
      {geometry.left.map((path) => (
        <path key={path.key} d={path.d} stroke={geometry.reachesEnd ? `url(#${id}-left)` : 'var(--color-faded)'} />
      ))}
      <path
        d={`M${frame.left} ${frame.top - 4}V${geometry.gates[0]?.y2 ?? frame.top}`}
        stroke="var(--color-ink)"
        strokeWidth={isSmall ? 1.5 : 2}
        strokeLinecap="round"
      />
      {geometry.gates.map((gate, index) => (
        <g key={gate.x}>
          <path
            d={`M${gate.x} ${gate.y1}V${gate.y2}`}
            stroke={gate.isOpen || isSmall ? 'var(--color-selvage)' : 'var(--color-ink)'}
            strokeWidth={isSmall ? 0.75 : 1}
            strokeDasharray={gate.isOpen ? '2 3' : undefined}
          />
          {hasGateNumbers ? (
            <text x={gate.x} y={gate.y1 - 4} textAnchor="middle" fill="var(--color-faded)" stroke="none" fontSize="12" fontWeight="600">
              {index + 1}
            </text>
          ) : null}
        </g>
      ))}
    </svg>
  );
}
