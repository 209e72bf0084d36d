import type { ReactNode } from 'react';
import { classNames } from '../lib/class-names';

/** A molecular formula with real subscripts: C₉H₁₀O₂. Copies as plain text. */
export function Formula({ formula, className }: { formula: string; className?: string }) {
  const parts = formula.match(/[A-Z][a-z]?|\d+|./g) ?? [];
  return (
    <span className={classNames('whitespace-nowrap', className)}>
      {parts.map((part, index): ReactNode => (/^\d+$/.test(part) ? <sub key={index}>{part}</sub> : part))}
    </span>
  );
}

/** Name of a nucleus: ¹³C, ¹H. */
export function Nucleus({ nucleus }: { nucleus: '13C' | '1H' }) {
  return (
    <span className="whitespace-nowrap">
      <sup>{nucleus.slice(0, -1)}</sup>
      {nucleus.slice(-1)}
    </span>
  );
}

/** A chemical shift: δ 166.9; ¹³C with one decimal, ¹H with two. */
export function Shift({ value, nucleus, isBare = false }: { value: number; nucleus: '13C' | '1H'; isBare?: boolean }) {
  const text = Math.abs(value).toFixed(nucleus === '13C' ? 1 : 2);
  return (
    <span className="whitespace-nowrap tabular">
      {isBare ? '' : 'δ\u00a0'}
      {value < 0 ? `\u2212${text}` : text}
    </span>
  );
}

/** A coupling constant: J = 8.1 Hz, J in italics. */
export function Coupling({ values }: { values: readonly number[] }) {
  if (values.length === 0) return null;
  return (
    <span className="whitespace-nowrap tabular">
      <i>J</i> = {values.map((value) => value.toFixed(1)).join(', ')}
      {'\u2009'}Hz
    </span>
  );
}
