import { readCorrelations, type CorrelationConstraint } from '../../shared/chemistry/correlations.js';
import { parseFormula } from '../../shared/chemistry/formula.js';
import { SHIFT_RANGES } from '../../shared/chemistry/shift-window-table.js';
import { windowOf } from '../../shared/chemistry/shift-windows.js';
import type { CarbonWindow, EvidenceDocument } from '../../shared/schemas/evidence.js';
import { GROUP_SHIFT_RANGES } from '../enumeration/group-shift-ranges.js';
import { solventOfCarbonSignal } from '../ranking/solvent-peaks.js';

/** A signal of which COSY or HMBC pairs speak, as something to be laid on atoms. */
export interface SiteModel {
  /** On carbons, or, for a proton without HSQC partner, on any atom with hydrogen. */
  readonly isCarbon: boolean;
  /** Index of the 13C or 1H signal. */
  readonly signal: number;
  /** Atoms to choose for it: the carbons that a 13C signal stands for, places of an overlapped 1H signal. */
  readonly slots: number;
  /**
   * Its count was given, so the chosen atoms are all it stands for. A 13C signal without a count stands for one carbon and
   * all its equivalents; so does every lone proton.
   */
  readonly isCounted: boolean;
  /** Hydrogens of the atoms it may lie on. */
  readonly leastHydrogens: number;
  readonly mostHydrogens: number;
  /** For lone protons: true = only on atoms other than C and Si, false = only on these, null = on either. */
  readonly exchangeable: boolean | null;
  readonly window: CarbonWindow | null;
  /** The same for carbons of isocyanides, diazo groups and nitrile oxides, with their shifts let in. */
  readonly groupWindow: CarbonWindow | null;
  /** 1H signals that are known to come from these very atoms; 0 where overlap leaves that open. */
  readonly tiedProtons: number;
}

/** The COSY and HMBC pairs of a document, ready to be matched against structures. */
export interface CorrelationModel {
  readonly sites: readonly SiteModel[];
  readonly constraints: readonly CorrelationConstraint[];
  readonly hmbcBonds: number;
  readonly cosyBonds: number;
  /** How many pairs may go unmet. */
  readonly exceptions: number;
  /** Carbons that the 13C signals stand for at least, in all and by attached hydrogens. */
  readonly carbonsUnder: number;
  readonly carbonsUnderType: readonly number[];
  /** Every 13C signal has its attached hydrogens. */
  readonly isTyped: boolean;
}

/** Hydrogen counts that a 13C list tells apart, 0–3. */
export const TYPE_COUNT = 4;

/** @returns null when there is no pair that says anything of structures. */
export function createCorrelationModel(evidence: EvidenceDocument): CorrelationModel | null {
  const reading = readCorrelations(evidence);
  const { sites, constraints, attached, tiedProtons } = reading;
  if (constraints.length === 0) return null;
  const parsed = parseFormula(evidence.formula);
  const { correlations, options } = evidence;
  const carbonsUnderType = new Array<number>(TYPE_COUNT).fill(0);
  let carbonsUnder = 0;
  let isTyped = true;
  evidence.carbonSignals.forEach((signal, index) => {
    const isNamed = sites.some((site) => site.kind === 'carbon' && site.signal === index);
    if (!isNamed && solventOfCarbonSignal(signal, options.solvent) !== null) return;
    carbonsUnder += signal.count ?? 1;
    const { least, most } = attached[index];
    if (least === most) carbonsUnderType[least] += signal.count ?? 1;
    else isTyped = false;
  });
  return {
    sites: sites.map(({ kind, signal }, site): SiteModel => {
      if (kind === 'carbon') {
        const observed = evidence.carbonSignals[signal];
        return {
          isCarbon: true,
          signal,
          slots: observed.count ?? 1,
          isCounted: observed.count !== undefined,
          leastHydrogens: attached[signal].least,
          mostHydrogens: attached[signal].most,
          exchangeable: null,
          window: parsed.ok ? windowOf(observed, options, parsed.counts) : null,
          groupWindow: parsed.ok ? windowOf(observed, options, parsed.counts, [...SHIFT_RANGES, ...GROUP_SHIFT_RANGES]) : null,
          tiedProtons: (observed.count ?? 1) === 1 ? tiedProtons[signal].length : 0,
        };
      }
      const { count, exchangeable } = evidence.protonSignals[signal];
      const uses = constraints.filter(({ alternatives }) => alternatives.some((ends) => ends.includes(site))).length;
      return {
        isCarbon: false,
        signal,
        slots: Math.max(1, Math.min(count ?? 1, uses)),
        isCounted: false,
        leastHydrogens: 1,
        // The three hydrogens of a CH3 are always under one signal.
        mostHydrogens: count === undefined || count >= 3 ? 4 : 2,
        exchangeable: exchangeable ?? null,
        window: null,
        groupWindow: null,
        tiedProtons: 0,
      };
    }),
    constraints,
    hmbcBonds: correlations.hmbcBonds,
    cosyBonds: correlations.cosyBonds,
    exceptions: correlations.exceptions,
    carbonsUnder,
    carbonsUnderType,
    isTyped,
  };
}

/**
 * Does each site stand for its chosen atoms only, or also for atoms equivalent to them? The latter when its count was not
 * given and the signals leave carbons over.
 *
 * @param carbonsOfType - carbons of the structure by attached hydrogens, 0–3. @param isOpen - written: 1 = also for equivalents.
 */
export function findOpenSites(model: CorrelationModel, carbonsOfType: ArrayLike<number>, isOpen: Uint8Array): void {
  const total = carbonsOfType[0] + carbonsOfType[1] + carbonsOfType[2] + carbonsOfType[3];
  for (let k = 0; k < model.sites.length; k++) {
    const { isCarbon, isCounted, leastHydrogens, mostHydrogens } = model.sites[k];
    const isUsedUp =
      model.carbonsUnder >= total ||
      (model.isTyped && leastHydrogens === mostHydrogens && model.carbonsUnderType[leastHydrogens] >= carbonsOfType[leastHydrogens]);
    isOpen[k] = isCarbon && (isCounted || isUsedUp) ? 0 : 1;
  }
}
