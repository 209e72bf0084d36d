import type { Band } from './funnel-stages';

/** Sizes of a band in pixels. */
export interface BandFrame {
  readonly width: number;
  /** Room between the top of the picture and the first thread. */
  readonly top: number;
  /** Distance between two neighbouring threads. */
  readonly pitch: number;
  /** Threads that stand for a factor of ten. */
  readonly threadsPerDecade: number;
  /** Height of the picture; cut threads end at its lower edge. */
  readonly height: number;
  /** Where the first column begins; columns share what is left of the width. */
  readonly left: number;
}

export interface BandPath {
  readonly key: string;
  readonly d: string;
}
export interface CutPath extends BandPath {
  /** Index of the gate at which the thread leaves. */
  readonly gate: number;
  /** False while the run has not yet said what cut it. */
  readonly isCounted: boolean;
}
export interface GateLine {
  readonly x: number;
  readonly y1: number;
  readonly y2: number;
  /** The run has not reported this gate yet. */
  readonly isOpen: boolean;
}
export interface BandGeometry {
  /** Threads that are left, as far as the run has got. */
  readonly left: readonly BandPath[];
  /** Threads that leave downwards at a gate. */
  readonly cut: readonly CutPath[];
  /** Gates: a vertical line across the band as it arrives there. */
  readonly gates: readonly GateLine[];
  readonly columns: ReadonlyArray<{ readonly x: number; readonly width: number }>;
  /** False when the band ends before its last gate. */
  readonly reachesEnd: boolean;
}

/**
 * Number of threads drawn for a number of constitutions: one for a single constitution, then
 * `threadsPerDecade` more for each factor of ten, so that the width of the band is the logarithm of what is left.
 */
export function threadCount(constitutions: number, threadsPerDecade: number): number {
  if (constitutions <= 0) return 0;
  return 1 + Math.round(threadsPerDecade * Math.log10(constitutions));
}

/**
 * Threads behind each gate, never more than before it. Gates not reported yet share evenly what is lost up to the
 * next reported one; behind the last reported gate nothing is known and the list ends.
 */
function threadsBehindGates(band: Band, threadsPerDecade: number): number[] {
  const lastKnown = band.gates.reduce((found, gate, index) => (gate.left === null ? found : index), -1);
  const threads: number[] = [];
  let arriving = threadCount(band.woven ?? 0, threadsPerDecade);
  for (let index = 0; index <= lastKnown; index++) {
    let next = index;
    while (band.gates[next]?.left === null) next++;
    const target = Math.min(arriving, threadCount(band.gates[next]?.left ?? 0, threadsPerDecade));
    arriving -= Math.round((arriving - target) / (next - index + 1));
    threads.push(arriving);
  }
  return threads;
}

const round = (value: number) => Math.round(value * 100) / 100;

/**
 * Lays out a band of threads from left to right. Threads lie on a fixed grid from the top; those cut at a gate are the
 * lowest ones, so that the others run straight on. The leaving threads bend in concentric quarter circles and
 * never cross. A gate that cuts less than one thread's worth still shows one leaving thread: no cut is invisible.
 *
 * @returns SVG paths in the coordinates of the frame.
 */
export function layOutBand(band: Band, frame: BandFrame): BandGeometry {
  const { width, left, top, pitch, threadsPerDecade, height } = frame;
  const columnWidth = (width - left) / (band.gates.length + 1);
  const columns = Array.from({ length: band.gates.length + 1 }, (_, index) => ({ x: left + index * columnWidth, width: columnWidth }));
  const yOf = (thread: number) => top + (thread + 0.5) * pitch;
  const behind = threadsBehindGates(band, threadsPerDecade);
  const reachesEnd = behind.length === band.gates.length;

  const cut: CutPath[] = [];
  const gates: GateLine[] = [];
  let threads = threadCount(band.woven ?? 0, threadsPerDecade);
  band.gates.forEach((gate, index) => {
    const x = left + (index + 1) * columnWidth;
    const arriving = threads;
    gates.push({ x: round(x), y1: round(top - 4), y2: round(top + Math.max(arriving, 1) * pitch + 4), isOpen: gate.left === null });
    const remaining = behind[index] ?? arriving;
    const isFray = gate.cut > 0 && remaining === arriving;
    const leaving = isFray ? 1 : arriving - remaining;
    const turn = x + 2;
    for (let order = 0; order < leaving; order++) {
      // The frayed thread has no place of its own in the band: it splits off just below the lowest one.
      const y = isFray ? yOf(arriving - 1) : yOf(arriving - 1 - order);
      const bend = pitch * (order + 0.5) + 4;
      const start = isFray ? x - Math.min(12, columnWidth / 4) : left;
      cut.push({
        key: `${gate.stage}-${order}`,
        gate: index,
        isCounted: gate.cut > 0,
        d: `M${round(start)} ${round(y)}H${round(turn)}A${round(bend)} ${round(bend)} 0 0 1 ${round(turn + bend)} ${round(y + bend)}V${round(height)}`,
      });
    }
    threads = remaining;
  });

  const end = reachesEnd ? width : (columns[behind.length]?.x ?? left) + columnWidth * 0.6;
  const leftOver = Array.from({ length: threads }, (_, thread) => ({
    key: `thread-${thread}`,
    d: `M${round(left)} ${round(yOf(thread))}H${round(end)}`,
  }));
  return { left: leftOver, cut, gates, columns, reachesEnd };
}
