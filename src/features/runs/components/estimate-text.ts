import { formatRoughSeconds } from '../../../lib/dates';
import { formatCount } from '../../../lib/numbers';

const UNITS: ReadonlyArray<readonly [number, string]> = [
  [1e12, 'trillion'],
  [1e9, 'billion'],
  [1e6, 'million'],
];
const LARGEST_IN_WORDS = 1e15;
const DAY_SECONDS = 86_400;
const YEAR_SECONDS = 365.25 * DAY_SECONDS;

/** An estimated number with no more digits than an estimate deserves: 24 900, 3.1 million, 6.5 × 10¹⁹. */
export function formatEstimate(value: number): string {
  if (value >= LARGEST_IN_WORDS) return formatPower(value);
  for (const [size, name] of UNITS) {
    if (value >= size) {
      const scaled = value / size;
      return `${scaled >= 9.95 ? formatCount(scaled) : scaled.toFixed(1)} ${name}`;
    }
  }
  if (value < 1000) return formatCount(value);
  const step = 10 ** (Math.floor(Math.log10(value)) - 2);
  return formatCount(Math.round(value / step) * step);
}

/** An estimated span of time in the largest unit that says something: 12 s, 3.3 h, 40 days, 2 million years. */
export function formatSpan(seconds: number): string {
  if (seconds < 2 * DAY_SECONDS) return formatRoughSeconds(seconds);
  if (seconds < 2 * YEAR_SECONDS) return `${formatCount(seconds / DAY_SECONDS)} days`;
  return `${formatEstimate(seconds / YEAR_SECONDS)} years`;
}

/** A share in per cent without false digits; from ten times on as a factor. */
export function formatShare(share: number): string {
  if (share >= 10) return `${formatEstimate(share)} times`;
  const percent = share * 100;
  if (percent < 0.1) return '<\u20090.1\u2009%';
  return `${percent < 10 ? percent.toFixed(1) : percent.toFixed(0)}\u2009%`;
}

function formatPower(value: number): string {
  const [digits = '', power = ''] = value.toExponential(1).split('e+');
  return `${digits}\u2009×\u200910${[...power].map((digit) => '⁰¹²³⁴⁵⁶⁷⁸⁹'[Number(digit)] ?? '').join('')}`;
}
