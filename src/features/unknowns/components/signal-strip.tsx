import { Nucleus } from '../../../components/chemistry-text';

const AXES = { '13C': { low: 0, high: 230 }, '1H': { low: 0, high: 13 } } as const;

/** Observed shifts as sticks on one line, high field at the right: where the signals lie, at a glance. */
export function SignalStrip({ nucleus, shifts }: { nucleus: '13C' | '1H'; shifts: readonly number[] }) {
  const { low, high } = AXES[nucleus];
  const at = (shift: number) => 100 - ((Math.min(high, Math.max(low, shift)) - low) / (high - low)) * 100;
  return (
    <div className="flex items-center gap-3 text-table">
      <span className="w-8 shrink-0">
        <Nucleus nucleus={nucleus} />
      </span>
      <svg aria-hidden="true" className="h-5 min-w-0 flex-1" preserveAspectRatio="none" viewBox="-1 0 102 20">
        <path d="M-1 19.5H101" stroke="var(--color-selvage)" vectorEffect="non-scaling-stroke" />
        {shifts.map((shift, index) => (
          <path key={index} d={`M${at(shift)} 3V19`} stroke="var(--color-indigo)" strokeWidth={1.5} vectorEffect="non-scaling-stroke" />
        ))}
      </svg>
      <span className="shrink-0 text-faded tabular">
        {shifts.length} signal{shifts.length === 1 ? '' : 's'}
      </span>
    </div>
  );
}
