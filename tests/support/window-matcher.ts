import type { CarbonWindow } from '../../shared/schemas/evidence.js';
import type { MolecularGraph } from '../../shared/types/molecular-graph.js';

/** A 13C signal as far as windows go. */
export interface WindowedSignal {
  readonly hydrogens: number | undefined;
  /** Carbons under it, at least 1. */
  readonly count: number;
  readonly window: CarbonWindow | null;
}

/**
 * Do the windows of the signals leave this structure? Written for tests, apart from the engine: every signal needs as many
 * carbons of its own as it counts, and, where the list is complete, every carbon with hydrogens needs a signal it fits.
 *
 * @param classes - environment of each atom; given, two signals never share an environment beyond `most` of it.
 */
export function matchWindows(
  graph: MolecularGraph,
  signals: readonly WindowedSignal[],
  isComplete: boolean,
  environments?: { readonly classOf: ArrayLike<number>; readonly most: ArrayLike<number> },
): boolean {
  const n = graph.atomCount;
  const carbons = Array.from({ length: n }, (_, atom) => atom).filter((atom) => graph.atomicNumbers[atom] === 6);
  const fits = (signal: WindowedSignal, atom: number): boolean => {
    const hydrogens = Math.min(graph.hydrogens[atom], 3);
    if (signal.hydrogens !== undefined && signal.hydrogens !== hydrogens) return false;
    if (signal.window === null) return true;
    const orders = Array.from({ length: n }, (_, other) => graph.bondOrders[atom * n + other]);
    const doubles = orders.filter((order) => order === 2).length;
    const triples = orders.filter((order) => order === 3).length;
    const hybridisation = triples > 0 || doubles > 1 ? 'sp' : doubles === 1 ? 'sp2' : 'sp3';
    const hetero = orders.filter((order, other) => order > 0 && graph.atomicNumbers[other] !== 6).length;
    const { hybridisations, heteroNeighbours } = signal.window;
    return hybridisations.includes(hybridisation) && hetero >= heteroNeighbours.min && hetero <= heteroNeighbours.max;
  };
  if (isComplete && carbons.some((atom) => graph.hydrogens[atom] > 0 && !signals.some((signal) => fits(signal, atom)))) return false;
  const demands = signals.flatMap((signal) => Array.from({ length: signal.count }, () => signal));
  if (!hasMatching(demands, carbons, fits)) return false;
  if (environments === undefined) return true;
  const slots = [...new Set(carbons.map((atom) => environments.classOf[atom]))].flatMap((c) => {
    const atom = carbons.find((carbon) => environments.classOf[carbon] === c)!;
    return Array.from({ length: environments.most[c] }, () => atom);
  });
  return hasMatching(signals, slots, fits);
}

/** Can every signal have a place of its own? Places are positions, so that equal ones count apart. */
function hasMatching(
  signals: readonly WindowedSignal[],
  places: readonly number[],
  fits: (signal: WindowedSignal, atom: number) => boolean,
): boolean {
  const taken = new Array<number>(places.length).fill(-1);
  const place = (signal: number, seen: Set<number>): boolean =>
    places.some((atom, position) => {
      if (seen.has(position) || !fits(signals[signal], atom)) return false;
      seen.add(position);
      if (taken[position] !== -1 && !place(taken[position], seen)) return false;
      taken[position] = signal;
      return true;
    });
  return signals.every((_, signal) => place(signal, new Set()));
}
