import { readCorrelations } from '../../shared/chemistry/correlations.js';
import { countOf, type FormulaCounts } from '../../shared/chemistry/formula.js';
import { SHIFT_RANGES, type ShiftRange } from '../../shared/chemistry/shift-window-table.js';
import { windowOf } from '../../shared/chemistry/shift-windows.js';
import { type CarbonWindow, type EvidenceDocument, HYBRIDISATIONS } from '../../shared/schemas/evidence.js';
import { solventOfCarbonSignal } from '../ranking/solvent-peaks.js';

/** What 13C signals say of the carbons of the whole molecule. */
export interface CarbonCensus {
  /** Bounds on how many carbons carry h hydrogens, h = 0–4. */
  readonly least: readonly number[];
  readonly most: readonly number[];
  readonly windows: CarbonWindows;
}

/** Attached hydrogens of a signal that were not determined. */
export const ANY_HYDROGENS = -1;

/** Like 13C signals: each needs carbons of its own that fit. */
export interface CarbonDemand {
  /** 0–3, or {@link ANY_HYDROGENS}. */
  readonly hydrogens: number;
  /** Bit p: hybridisation p of HYBRIDISATIONS is allowed. */
  readonly hybridisations: number;
  readonly leastHetero: number;
  readonly mostHetero: number;
  readonly signals: number;
  /** Carbons that one of these signals stands for at least. */
  readonly carbons: number;
}

/** Every signal that cannot be the solvent's, with its window. */
export interface CarbonWindows {
  readonly demands: readonly CarbonDemand[];
  /** Every carbon with hydrogens lies under one of the signals. */
  readonly isComplete: boolean;
}

export const ALL_HYBRIDISATIONS = (1 << HYBRIDISATIONS.length) - 1;
export const MOST_HETERO = 4;

/**
 * Bounds from 13C signals with known attached hydrogens: every signal needs a carbon of its kind, and where the list is
 * complete a protonated kind without any signal is absent; beside them the windows of the signals. Signals that may be the
 * solvent's do not count.
 *
 * @param evidence - parsed document with its options settled. @param counts - its formula.
 * @param ranges - of the shifts at which kinds of carbon are found, where the fitted ones are not enough.
 */
export function carbonCensus(
  evidence: EvidenceDocument,
  counts: FormulaCounts,
  ranges: readonly ShiftRange[] = SHIFT_RANGES,
): CarbonCensus {
  const { carbonSignals: all, options } = evidence;
  const carbonCount = countOf(counts, 'C');
  const least = [0, 0, 0, 0, 0];
  const most = [carbonCount, carbonCount, carbonCount, carbonCount, carbonCount];
  const signals = all.filter((signal) => solventOfCarbonSignal(signal, options.solvent) === null);
  for (const signal of signals) if (signal.hydrogens !== undefined) least[signal.hydrogens] += signal.count ?? 1;
  // Carbons with an HSQC pair are not quaternary, however many hydrogens they have.
  readCorrelations(evidence).attached.forEach(({ least: attached }, index) => {
    const signal = all[index];
    if (signal.hydrogens === undefined && attached > 0 && signals.includes(signal)) most[0] = Math.max(0, most[0] - (signal.count ?? 1));
  });
  const isComplete = signals.length > 0 && signals.every((signal) => signal.hydrogens !== undefined) && options.carbonList === 'complete';
  if (isComplete) {
    for (let h = 1; h <= 4; h++) if (!signals.some((signal) => signal.hydrogens === h)) most[h] = 0;
    // When every signal says for how many carbons it stands, the protonated kinds are settled.
    for (let h = 1; h <= 3; h++) {
      const ofKind = signals.filter((signal) => signal.hydrogens === h);
      if (ofKind.length > 0 && ofKind.every((signal) => signal.count !== undefined)) most[h] = least[h];
    }
  }
  const demands = new Map<string, CarbonDemand>();
  for (const signal of signals) {
    const demand = demandOf(signal.hydrogens, signal.count, windowOf(signal, options, counts, ranges));
    const key = Object.values(demand).join();
    const known = demands.get(key);
    demands.set(key, { ...demand, signals: (known?.signals ?? 0) + 1 });
  }
  return { least, most, windows: { demands: [...demands.values()], isComplete } };
}

function demandOf(hydrogens: number | undefined, count: number | undefined, window: CarbonWindow | null): CarbonDemand {
  return {
    hydrogens: hydrogens ?? ANY_HYDROGENS,
    hybridisations: window === null ? ALL_HYBRIDISATIONS : hybridisationBits(window),
    leastHetero: window?.heteroNeighbours.min ?? 0,
    mostHetero: window?.heteroNeighbours.max ?? MOST_HETERO,
    signals: 0,
    carbons: count ?? 1,
  };
}

/** Bit p: hybridisation p of HYBRIDISATIONS is allowed. */
export function hybridisationBits({ hybridisations }: CarbonWindow): number {
  return HYBRIDISATIONS.reduce((bits, hybridisation, p) => bits | (hybridisations.includes(hybridisation) ? 1 << p : 0), 0);
}

/** Position in HYBRIDISATIONS of a carbon with so many π bonds: sp3, sp2, sp. */
export function hybridisationOf(piBonds: number): number {
  return Math.min(piBonds, HYBRIDISATIONS.length - 1);
}

/** Can a carbon with these hydrogens and one of these hybridisations (bits) lie under the signals of a demand, its neighbours left open? */
export function isOfType(demand: CarbonDemand, hydrogens: number, hybridisations: number): boolean {
  return (
    (demand.hydrogens === ANY_HYDROGENS || demand.hydrogens === Math.min(hydrogens, 3)) && (demand.hybridisations & hybridisations) !== 0
  );
}

/** Carbons alike in all that is known of them while nothing is bonded yet. */
export interface CarbonGroup {
  readonly hydrogens: number;
  /** Those still possible, bits as in {@link CarbonDemand}. */
  readonly hybridisations: number;
  /** Bonded heteroatoms at least and at most. */
  readonly leastHetero: number;
  readonly mostHetero: number;
  readonly count: number;
}

/** Can carbons of the group lie under signals of the demand? */
export function fitsGroup(demand: CarbonDemand, group: CarbonGroup): boolean {
  return (
    isOfType(demand, group.hydrogens, group.hybridisations) &&
    demand.leastHetero <= group.mostHetero &&
    demand.mostHetero >= group.leastHetero
  );
}

/**
 * Can every signal have the carbons it needs, no carbon under two signals, and every carbon with hydrogens a signal where the
 * list is complete? Maximum flow by augmenting paths.
 */
export function meetsDemands({ demands, isComplete }: CarbonWindows, groups: readonly CarbonGroup[]): boolean {
  if (isComplete && groups.some((group) => group.count > 0 && group.hydrogens > 0 && !demands.some((demand) => fitsGroup(demand, group))))
    return false;
  const flow = demands.map(() => new Array<number>(groups.length).fill(0));
  const left = groups.map(({ count }) => count);
  /** Gets a carbon more for demand d, others moving aside; groups seen once. */
  const augment = (d: number, seen: Uint8Array): boolean => {
    for (let g = 0; g < groups.length; g++) {
      if (seen[g] === 1 || !fitsGroup(demands[d], groups[g])) continue;
      seen[g] = 1;
      if (left[g] > 0) {
        left[g]--;
        flow[d][g]++;
        return true;
      }
      for (let other = 0; other < demands.length; other++) {
        if (other === d || flow[other][g] === 0 || !augment(other, seen)) continue;
        flow[other][g]--;
        flow[d][g]++;
        return true;
      }
    }
    return false;
  };
  return demands.every(({ signals, carbons }, d) => {
    for (let k = 0; k < signals * carbons; k++) if (!augment(d, new Uint8Array(groups.length))) return false;
    return true;
  });
}
