import { formatDateTime, formatDay } from '../lib/dates';

/** A moment as 3 Dec 2026, 14:05, or only its day. */
export function Time({ iso, isDayOnly = false }: { iso: string; isDayOnly?: boolean }) {
  return (
    <time dateTime={iso} title={formatDateTime(iso)} className="whitespace-nowrap">
      {isDayOnly ? formatDay(iso) : formatDateTime(iso)}
    </time>
  );
}
