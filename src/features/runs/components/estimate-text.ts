import { formatCount } from '../../../lib/numbers';

const UNITS: ReadonlyArray<readonly [number, string]> = [
  [1e12, 'trillion'],
  [1e9, 'billion'],
  [1e6, 'million'],
];

/** An estimated number with no more digits than an estimate deserves: 24 900, 3.1 million. */
export function formatEstimate(value: number): string {
  for (const [size, name] of UNITS) {
    if (value >= size) {
      const scaled = value / size;
      return scaled >= 1e6 ? `${scaled.toExponential(1)} ${name}` : `${scaled >= 100 ? formatCount(scaled) : scaled.toFixed(1)} ${name}`;
    }
  }
  if (value < 1000) return formatCount(value);
  const step = 10 ** (Math.floor(Math.log10(value)) - 2);
  return formatCount(Math.round(value / step) * step);
}
