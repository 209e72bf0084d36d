import type { Remark } from './remarks';

const KIND_ORDER: Readonly<Record<Remark['kind'], number>> = { signal: 0, fit: 1, plausibility: 2, stereo: 3 };

/**
 * The remarks worth showing where there is room for a few: what speaks against a candidate and what speaks for it come
 * before mere notes, and both sides are heard when both have something to say.
 *
 * @param remarks - in the order of the engine, most telling first within a kind. Read only.
 */
export function tellingRemarks(remarks: readonly Remark[], most: number): Remark[] {
  const sorted = remarks
    .map((remark, index) => ({ remark, index }))
    .sort((a, b) => KIND_ORDER[a.remark.kind] - KIND_ORDER[b.remark.kind] || a.index - b.index)
    .map(({ remark }) => remark);
  const doubts = sorted.filter((remark) => remark.tone === 'doubts');
  const supports = sorted.filter((remark) => remark.tone === 'supports');
  const notes = sorted.filter((remark) => remark.tone === 'notes');
  const alternating: Remark[] = [];
  for (let index = 0; index < Math.max(doubts.length, supports.length); index++) {
    const pair = [doubts[index], supports[index]];
    alternating.push(...pair.filter((remark) => remark !== undefined));
  }
  return [...alternating, ...notes].slice(0, most);
}
