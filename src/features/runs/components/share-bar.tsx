import { classNames } from '../../../lib/class-names';

interface ShareBarProps {
  /** Of what is left: 1 = all of it. */
  share: { readonly estimate: number; readonly low: number; readonly high: number };
}

const percent = (share: number): string => `${Math.min(100, Math.max(0, share * 100))}%`;

/** A share of a limit with its interval: the thread up to what is expected, lighter up to what it may become. Decoration for the words beside it. */
export function ShareBar({ share: { estimate, low, high } }: ShareBarProps) {
  const tone = low > 1 ? 'madder' : high > 1 ? 'weld' : 'indigo';
  const solid = { madder: 'bg-madder', weld: 'bg-weld-fill', indigo: 'bg-indigo' }[tone];
  return (
    <span aria-hidden="true" className="relative block h-2 overflow-hidden rounded-full bg-seam">
      <span className={classNames('absolute inset-y-0 left-0 opacity-40', solid)} style={{ width: percent(high) }} />
      <span className={classNames('absolute inset-y-0 left-0', solid)} style={{ width: percent(estimate) }} />
      <span className="absolute inset-y-0 w-px bg-cloth" style={{ left: percent(low) }} />
    </span>
  );
}
