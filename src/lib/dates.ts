const day = new Intl.DateTimeFormat('en-GB', { day: 'numeric', month: 'short', year: 'numeric' });
const minute = new Intl.DateTimeFormat('en-GB', { hour: '2-digit', minute: '2-digit', hour12: false });

// Intl writes "Sept" in British English; the house style has three letters.
const shortMonth = (text: string) => text.replace('Sept', 'Sep');

/** `3 Dec 2026`, in the time zone of the reader. */
export const formatDay = (iso: string): string => shortMonth(day.format(new Date(iso)));

/** `3 Dec 2026, 14:05`, in the time zone of the reader. */
export const formatDateTime = (iso: string): string => `${formatDay(iso)}, ${minute.format(new Date(iso))}`;

/** A span of seconds in the units people use: `0.8 s`, `42 s`, `3 min 20 s`, `2 h 5 min`. */
export function formatSeconds(seconds: number): string {
  if (seconds === 0) return '0\u2009s';
  if (seconds < 0.05) return '<\u20090.1\u2009s';
  if (seconds < 9.95) return `${seconds.toFixed(1)}\u2009s`;
  const whole = Math.round(seconds);
  if (whole < 60) return `${whole}\u2009s`;
  if (whole < 3600) return `${Math.floor(whole / 60)}\u2009min${whole % 60 === 0 ? '' : ` ${whole % 60}\u2009s`}`;
  const minutes = Math.round(whole / 60);
  return `${Math.floor(minutes / 60)}\u2009h${minutes % 60 === 0 ? '' : ` ${minutes % 60}\u2009min`}`;
}

/** An estimated span of time without false digits: 4.2 s, 80 s, 21 min, 3.3 h. */
export function formatRoughSeconds(seconds: number): string {
  if (seconds < 59.5) return formatSeconds(seconds);
  if (seconds < 120) return `${Math.round(seconds / 10) * 10}\u2009s`;
  const minutes = seconds / 60;
  if (minutes < 119.5) return `${Math.round(minutes)}\u2009min`;
  const hours = minutes / 60;
  return `${hours < 9.95 ? hours.toFixed(1) : hours.toFixed(0)}\u2009h`;
}
