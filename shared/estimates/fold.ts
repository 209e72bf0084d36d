/** A factor as people say it, with no more digits than an estimate deserves: `3-fold`, `12-fold`, `300-fold`. */
export function formatFold(factor: number): string {
  if (factor < 9.5) return `${factor < 2.75 ? Number(factor.toFixed(1)) : Math.round(factor)}-fold`;
  const digits = factor < 100 ? 2 : 1;
  const rounded = Number(factor.toPrecision(digits));
  if (rounded >= 1e6) return `${rounded.toExponential(0).replace(/e\+(\d+)$/, (_, power: string) => ` × 10${superscript(power)}`)}-fold`;
  return `${String(rounded).replace(/\B(?=(\d{3})+(?!\d))/g, rounded < 10_000 ? '' : '\u2009')}-fold`;
}

const superscript = (digits: string): string => [...digits].map((digit) => '⁰¹²³⁴⁵⁶⁷⁸⁹'[Number(digit)] ?? '').join('');
