import { formatProbability } from '../../lib/numbers';

const THICKEST_PX = 14;
const THINNEST_PX = 0.75;

/** A probability as a thread of that thickness, with the number. */
export function ProbabilityThread({
  probability,
  length = 40,
  tone = 'ink',
  label,
}: {
  probability: number;
  length?: number;
  tone?: 'ink' | 'weld';
  label?: string;
}) {
  const thickness = Math.max(THINNEST_PX, probability * THICKEST_PX);
  return (
    <span className="tabular inline-flex items-center gap-2 whitespace-nowrap">
      <svg aria-hidden="true" width={length} height={THICKEST_PX} viewBox={`0 0 ${length} ${THICKEST_PX}`} className="shrink-0">
        <line
          x1="0"
          x2={length}
          y1={THICKEST_PX / 2}
          y2={THICKEST_PX / 2}
          strokeWidth={thickness}
          stroke={tone === 'weld' ? 'var(--color-weld-fill)' : 'var(--color-ink)'}
        />
      </svg>
      {label === undefined ? null : <span className="sr-only">{label}: </span>}
      {formatProbability(probability)}
    </span>
  );
}
