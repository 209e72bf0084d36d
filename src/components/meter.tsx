import { classNames } from '../lib/class-names';

/** How much of a limit is used and set aside: a thread along a seam, with the figures as text. */
export function Meter({
  label,
  used,
  reserved = 0,
  limit,
  text,
}: {
  label: string;
  used: number;
  reserved?: number;
  limit: number;
  text: string;
}) {
  const share = (value: number) => (limit <= 0 ? (value > 0 ? 100 : 0) : Math.min(100, (value / limit) * 100));
  const isFull = limit > 0 ? used + reserved >= limit : used > 0;
  return (
    <div
      role="meter"
      aria-label={label}
      aria-valuemin={0}
      aria-valuemax={Math.max(limit, 0)}
      aria-valuenow={Math.min(used, Math.max(limit, 0))}
      aria-valuetext={isFull ? `${text}, used up` : text}
      className="min-w-32"
    >
      <div aria-hidden="true" className="relative h-1.5 overflow-hidden rounded-full bg-seam">
        <div className="absolute inset-y-0 left-0 bg-weld-fill" style={{ width: `${share(used + reserved)}%` }} />
        <div className={classNames('absolute inset-y-0 left-0', isFull ? 'bg-madder' : 'bg-indigo')} style={{ width: `${share(used)}%` }} />
      </div>
      <p className="mt-1 text-small text-faded tabular">
        {text}
        {isFull ? <span className="text-madder">, used up</span> : null}
      </p>
    </div>
  );
}
