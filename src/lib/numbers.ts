const THIN_SPACE = '\u2009';

/** Whole numbers with thin spaces between thousands: `369 067`; four digits stay together. */
export function formatCount(value: number): string {
  const digits = String(Math.round(value));
  return digits.length <= 4 ? digits : digits.replace(/\B(?=(\d{3})+(?!\d))/g, THIN_SPACE);
}

/** Probabilities as percentages: `37 %`, `0.4 %`, `< 0.1 %`; never 100 %, since nothing is certain here. */
export function formatProbability(value: number): string {
  const percent = value * 100;
  if (percent < 0.1) return percent <= 0 ? `0${THIN_SPACE}%` : `<${THIN_SPACE}0.1${THIN_SPACE}%`;
  if (percent >= 99.95) return `>${THIN_SPACE}99.9${THIN_SPACE}%`;
  return `${percent < 10 || percent > 99 ? percent.toFixed(1) : percent.toFixed(0)}${THIN_SPACE}%`;
}

/** A signed number with a real minus sign: `+1.3`, `−0.42`. */
export function formatSigned(value: number, digits: number): string {
  const text = Math.abs(value).toFixed(digits);
  if (Number(text) === 0) return text;
  return value < 0 ? `\u2212${text}` : `+${text}`;
}

export type NumberText = { kind: 'empty' } | { kind: 'number'; value: number } | { kind: 'notNumber' };

/** Reads what people type into a number field: blanks, a decimal comma and a real minus sign are understood. */
export function parseNumberText(text: string): NumberText {
  const plain = text.trim().replace('\u2212', '-').replace(',', '.');
  if (plain === '') return { kind: 'empty' };
  if (!/^[+-]?(\d+\.?\d*|\.\d+)$/.test(plain)) return { kind: 'notNumber' };
  return { kind: 'number', value: Number(plain) };
}
