/** "¹³C 1.2, ¹H 0.10 ppm": mean absolute deviation of the matched signals; empty without such evidence. */
export function misfitText(candidate: { readonly carbonDeviation: number | null; readonly protonDeviation: number | null }): string {
  const parts = [
    candidate.carbonDeviation === null ? null : `¹³C ${candidate.carbonDeviation.toFixed(1)}`,
    candidate.protonDeviation === null ? null : `¹H ${candidate.protonDeviation.toFixed(2)}`,
  ].filter((part) => part !== null);
  return parts.length === 0 ? '' : `${parts.join(', ')}\u2009ppm`;
}
