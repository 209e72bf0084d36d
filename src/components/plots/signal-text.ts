import type { Nucleus } from './stick-plot-layout';

/** A shift with the digits of its nucleus and a real minus sign: 166.9, 7.26, −0.02. */
export function shiftText(shift: number, nucleus: Nucleus): string {
  const digits = nucleus === '13C' ? 1 : 2;
  const text = Math.abs(shift).toFixed(digits);
  return shift < 0 && Number(text) !== 0 ? `\u2212${text}` : text;
}

/** Attached hydrogens as chemists write them: C, CH, CH₂, CH₃. */
export function carbonTypeText(hydrogens: number): string {
  return ['C', 'CH', 'CH₂', 'CH₃'][hydrogens] ?? `CH${hydrogens}`;
}

/** Carbons under a signal: "CH₂", "2 × CH", "2 C" when the type is not known; empty when nothing is known. */
export function carbonCountText(count: number | null, kind: string): string {
  if (kind === '') return count === null ? '' : `${count}\u2009C`;
  return count === null || count === 1 ? kind : `${count}\u2009×\u2009${kind}`;
}

/** Hydrogens under a signal with its shape: "2 H, d"; either part may be unknown. */
export function protonCountText(count: number | null, multiplicity: string): string {
  return [count === null ? '' : `${count}\u2009H`, multiplicity].filter((part) => part !== '').join(', ');
}

/** Atom numbers as people see them, from 1, with runs joined: 1, 3–5. */
export function atomNumbersText(atoms: readonly number[]): string {
  const sorted = [...new Set(atoms)].sort((a, b) => a - b).map((atom) => atom + 1);
  const parts: string[] = [];
  for (let start = 0; start < sorted.length;) {
    let end = start;
    while (end + 1 < sorted.length && sorted[end + 1] === (sorted[end] ?? 0) + 1) end++;
    parts.push(end - start >= 2 ? `${sorted[start]}–${sorted[end]}` : sorted.slice(start, end + 1).join(', '));
    start = end + 1;
  }
  return parts.join(', ');
}
