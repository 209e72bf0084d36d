export type Nucleus = '13C' | '1H';

/** One line of a stick plot. */
export interface Stick {
  readonly key: string;
  /** δ in ppm. */
  readonly shift: number;
  /** Standard deviation in ppm; absent for observed signals. */
  readonly sd?: number;
  /** Nuclei under the signal, ≥ 1; decides its height. */
  readonly nuclei: number;
  /** Said when the stick is active: "δ 166.9, 1 C". */
  readonly text: string;
}
/** An observed and a predicted stick that were laid on one another. */
export interface StickLink {
  readonly key: string;
  readonly observedKey: string;
  readonly predictedKey: string;
  /** |observed − predicted| in standard deviations. */
  readonly misfit: number;
}

/** Range of an axis in ppm, low < high. */
export interface ShiftRange {
  readonly low: number;
  readonly high: number;
}

/** Narrowest range worth drawing and the room kept beside the outermost sticks, in ppm. */
const RANGES: Readonly<Record<Nucleus, { least: number; margin: number; grid: number }>> = {
  '13C': { least: 30, margin: 6, grid: 5 },
  '1H': { least: 1.5, margin: 0.25, grid: 0.25 },
};
const SD_SHOWN = 1;

/**
 * The range that holds every stick with its uncertainty band, widened to whole grid steps.
 *
 * @param sticks - observed and predicted sticks together.
 * @returns a range at least as wide as the nucleus asks for; the usual range of the nucleus without sticks.
 */
export function wholeRange(sticks: readonly Stick[], nucleus: Nucleus): ShiftRange {
  const { least, margin, grid } = RANGES[nucleus];
  if (sticks.length === 0) return nucleus === '13C' ? { low: 0, high: 220 } : { low: 0, high: 12 };
  let low = Infinity;
  let high = -Infinity;
  for (const stick of sticks) {
    const band = (stick.sd ?? 0) * SD_SHOWN;
    low = Math.min(low, stick.shift - band);
    high = Math.max(high, stick.shift + band);
  }
  low -= margin;
  high += margin;
  const missing = Math.max(0, least - (high - low)) / 2;
  return { low: Math.floor((low - missing) / grid) * grid, high: Math.ceil((high + missing) / grid) * grid };
}

/** Axis ticks at 1, 2 or 5 times a power of ten, about one every `spacingPx` pixels. Ascending. */
export function axisTicks(range: ShiftRange, widthPx: number, spacingPx = 64): number[] {
  const wanted = Math.max(2, Math.floor(widthPx / spacingPx));
  const rough = (range.high - range.low) / wanted;
  const power = 10 ** Math.floor(Math.log10(rough));
  const step = ([1, 2, 5, 10].find((factor) => factor * power >= rough) ?? 10) * power;
  const ticks: number[] = [];
  for (let index = Math.ceil(range.low / step - 1e-9); index * step <= range.high + 1e-9; index++) {
    // Avoids 0.30000000000000004 on the axis.
    ticks.push(Number((index * step).toFixed(6)));
  }
  return ticks;
}

/** Height of a stick as a share of the tallest: the square root keeps a single proton visible beside nine. */
export function stickHeight(nuclei: number, mostNuclei: number): number {
  return Math.sqrt(Math.max(nuclei, 1) / Math.max(mostNuclei, 1));
}

/**
 * Moves labels apart along a line so that neighbours keep a distance, each as near to its stick as the others
 * allow (least squares; pool adjacent violators).
 *
 * @param positions - wanted places in pixels, any order.
 * @param distance - least distance between two labels in pixels.
 * @param range - where labels may lie.
 * @returns places in the order of `positions`; null when they cannot all find room.
 * @see Barlow, Bartholomew, Bremner, Brunk, Statistical Inference under Order Restrictions, 1972 (the pooling).
 */
export function spreadLabels(
  positions: readonly number[],
  distance: number,
  range: { readonly from: number; readonly to: number },
): number[] | null {
  if (positions.length === 0) return [];
  if ((positions.length - 1) * distance > range.to - range.from) return null;
  const order = positions.map((_, index) => index).sort((a, b) => (positions[a] ?? 0) - (positions[b] ?? 0));
  // With the distance taken out, "neighbours keep a distance" becomes "the sequence does not fall".
  const pools: Array<{ sum: number; size: number }> = [];
  order.forEach((index, rank) => {
    let pool = { sum: (positions[index] ?? 0) - rank * distance, size: 1 };
    for (let last = pools.at(-1); last !== undefined && last.sum / last.size > pool.sum / pool.size; last = pools.at(-1)) {
      pool = { sum: last.sum + pool.sum, size: last.size + pool.size };
      pools.pop();
    }
    pools.push(pool);
  });
  const lowest = range.from;
  const highest = range.to - (positions.length - 1) * distance;
  const placed = new Array<number>(positions.length).fill(0);
  let rank = 0;
  for (const pool of pools) {
    const base = Math.min(highest, Math.max(lowest, pool.sum / pool.size));
    for (let member = 0; member < pool.size; member++) {
      placed[order[rank] ?? 0] = base + rank * distance;
      rank++;
    }
  }
  return placed;
}

/** Zooms a range about a point, never beyond `whole` and never below a hundredth of it. */
export function zoomRange(range: ShiftRange, factor: number, about: number, whole: ShiftRange): ShiftRange {
  const width = Math.min(whole.high - whole.low, Math.max((whole.high - whole.low) / 100, (range.high - range.low) * factor));
  const share = (about - range.low) / (range.high - range.low);
  return moveInto({ low: about - share * width, high: about + (1 - share) * width }, whole);
}

/** Moves a range by a share of its own width without leaving `whole`. */
export function panRange(range: ShiftRange, share: number, whole: ShiftRange): ShiftRange {
  const step = (range.high - range.low) * share;
  return moveInto({ low: range.low + step, high: range.high + step }, whole);
}

function moveInto(range: ShiftRange, whole: ShiftRange): ShiftRange {
  const width = range.high - range.low;
  const low = Math.min(Math.max(range.low, whole.low), whole.high - width);
  return { low, high: low + width };
}
