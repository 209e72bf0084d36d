import type { CarbonSignal, EvidenceDocument, ProtonSignal } from '../schemas/evidence.js';
import type { InputIssue } from '../schemas/problem.js';
import { countOf, parseFormula } from './formula.js';

/** How far a shift of a 2D pair may lie from the listed signal that it means, ppm (common practice: digital resolution of 2D spectra). */
export const CARBON_TOLERANCE = 0.6;
export const PROTON_TOLERANCE = 0.06;
/** Differences of typed numbers below this are rounding. */
const ROUNDING = 1e-9;
/** Elements whose hydrogens exchange and have no HSQC pair with a carbon; each atom accounts for one unpaired signal of at most two hydrogens. */
const EXCHANGING = ['N', 'O', 'S'] as const;

export const CORRELATION_KINDS = ['cosy', 'hsqc', 'hmbc'] as const;
export type CorrelationKind = (typeof CORRELATION_KINDS)[number];

/** Indexes of the listed signals that the two shifts of a pair can mean, nearest first; empty = none is near enough. */
export interface PairReading {
  readonly first: readonly number[];
  readonly second: readonly number[];
}

/** Where the proton or carbon of a pair sits: on the carbons of a 13C signal, or, for a proton without HSQC partner, anywhere. */
export type CorrelationSite =
  | { readonly kind: 'carbon'; readonly signal: number }
  /** Index of the 1H signal. */
  | { readonly kind: 'proton'; readonly signal: number };

/** A COSY or HMBC pair as a demand on a structure: one of the alternatives must lie within the limit. */
export interface CorrelationConstraint {
  readonly kind: 'cosy' | 'hmbc';
  /** Index in the list of the evidence. */
  readonly index: number;
  /** Indexes into the sites of the reading; the two ends of each alternative. */
  readonly alternatives: readonly (readonly [number, number])[];
}

/** Bounds on the hydrogens of each carbon under a 13C signal, 0–3. */
export interface AttachedHydrogens {
  readonly least: number;
  readonly most: number;
}

/** What the 2D pairs of a document say. Element i of a list of pairs is pair i of the evidence. */
export interface CorrelationReading {
  readonly pairs: Readonly<Record<CorrelationKind, readonly PairReading[]>>;
  readonly sites: readonly CorrelationSite[];
  readonly constraints: readonly CorrelationConstraint[];
  /** Per 13C signal. */
  readonly attached: readonly AttachedHydrogens[];
  /** Per 13C signal: 1H signals that HSQC ties to it and to nothing else. */
  readonly tiedProtons: readonly (readonly number[])[];
  /** Contradictions among pairs and signals. */
  readonly issues: readonly InputIssue[];
  /** Pairs that cannot be used as they are, and what was concluded, for people. */
  readonly notes: readonly string[];
}

/**
 * Listed signals within a tolerance of a shift, nearest first, in the order of the list where they are equally near.
 *
 * @param shift, tolerance - ppm.
 */
export function signalsNear(signals: readonly { readonly shift: number }[], shift: number, tolerance: number): number[] {
  return signals
    .map((signal, index) => ({ index, distance: Math.abs(signal.shift - shift) }))
    .filter(({ distance }) => distance <= tolerance + ROUNDING)
    .sort((a, b) => a.distance - b.distance || a.index - b.index)
    .map(({ index }) => index);
}

/** Which nucleus each shift of a pair belongs to. */
export const PAIR_NUCLEI = {
  cosy: ['1H', '1H'],
  hsqc: ['13C', '1H'],
  hmbc: ['1H', '13C'],
} as const satisfies Record<CorrelationKind, readonly ['1H' | '13C', '1H' | '13C']>;

function layPairs(document: EvidenceDocument): Record<CorrelationKind, PairReading[]> {
  const lay = (shift: number, nucleus: '1H' | '13C'): number[] =>
    nucleus === '13C'
      ? signalsNear(document.carbonSignals, shift, CARBON_TOLERANCE)
      : signalsNear(document.protonSignals, shift, PROTON_TOLERANCE);
  const layKind = (kind: CorrelationKind): PairReading[] =>
    document.correlations[kind].map(([first, second]) => ({
      first: lay(first, PAIR_NUCLEI[kind][0]),
      second: lay(second, PAIR_NUCLEI[kind][1]),
    }));
  return { cosy: layKind('cosy'), hsqc: layKind('hsqc'), hmbc: layKind('hmbc') };
}

/** The one signal that a shift means: the only near one, or the nearest. Undefined when two are equally near. */
function nearestOf(near: readonly number[], signals: readonly { readonly shift: number }[], shift: number): number | undefined {
  const [first, second] = near;
  if (first === undefined || second === undefined) return first;
  const gap = Math.abs(signals[second]!.shift - shift) - Math.abs(signals[first]!.shift - shift);
  return gap > ROUNDING ? first : undefined;
}

/** HSQC read: for each 1H signal the 13C signals it sits on. */
interface Ties {
  /** 13C signals of pairs that mean this 1H signal. */
  readonly sure: ReadonlySet<number>;
  /** 13C signals of pairs that may mean it, because it lies near. */
  readonly possible: ReadonlySet<number>;
}

function readTies(document: EvidenceDocument, pairs: readonly PairReading[]): Ties[] {
  const ties = document.protonSignals.map(() => ({ sure: new Set<number>(), possible: new Set<number>() }));
  pairs.forEach(({ first, second }, index) => {
    if (first.length === 0) return;
    const meant = nearestOf(second, document.protonSignals, document.correlations.hsqc[index]![1]);
    for (const proton of second) for (const carbon of first) ties[proton]![proton === meant ? 'sure' : 'possible'].add(carbon);
  });
  return ties;
}

/**
 * Reads the 2D pairs of a document against its signals. A shift means every listed signal within the tolerance, so that
 * a pair between overlapping signals is met by either of them. HSQC ties protons to carbons; COSY and HMBC pairs of tied
 * protons then speak of carbons only.
 *
 * @param document - parsed by the schema.
 */
export function readCorrelations(document: EvidenceDocument): CorrelationReading {
  const pairs = layPairs(document);
  const ties = readTies(document, pairs.hsqc);
  const tiedProtons = document.carbonSignals.map((_, carbon) =>
    ties.flatMap(({ sure }, proton) => (sure.size === 1 && sure.has(carbon) ? [proton] : [])),
  );
  const absence = readAbsence(document, pairs.hsqc, ties);
  return {
    pairs,
    ...readConstraints(pairs, ties),
    tiedProtons,
    attached: document.carbonSignals.map((signal, carbon) =>
      attachedTo(signal, tiedProtons[carbon]!.length, absence.includes(carbon), pairs.hsqc, carbon),
    ),
    issues: [...pairIssues(document, pairs.hsqc), ...tieIssues(document, pairs.hsqc, tiedProtons)],
    notes: [...unlaidNotes(document, pairs), ...absenceNotes(document, absence)],
  };
}

function attachedTo(
  { hydrogens, count }: CarbonSignal,
  tied: number,
  isAbsent: boolean,
  hsqc: readonly PairReading[],
  carbon: number,
): AttachedHydrogens {
  if (hydrogens !== undefined) return { least: hydrogens, most: hydrogens };
  if (isAbsent) return { least: 0, most: 0 };
  // Only the hydrogens of a CH2 can show apart, so two signals on a single carbon mean CH2.
  if (tied >= 2 && count === 1) return { least: 2, most: 2 };
  const isProtonated = hsqc.some(({ first, second }) => first.length === 1 && first[0] === carbon && second.length > 0);
  return { least: isProtonated ? 1 : 0, most: 3 };
}

/**
 * 13C signals that are quaternary because HSQC shows nothing on them. Said only where both lists are whole: the 13C list
 * by its option, the HSQC list when N, O and S can carry the hydrogens of all 1H signals without a partner.
 */
function readAbsence(document: EvidenceDocument, hsqc: readonly PairReading[], ties: readonly Ties[]): number[] {
  if (hsqc.length === 0 || document.protonSignals.length === 0 || document.options.carbonList !== 'complete') return [];
  const unpaired = document.protonSignals.reduce(
    (sum, { exchangeable, count }, proton) =>
      exchangeable === true || ties[proton]!.sure.size + ties[proton]!.possible.size > 0 ? sum : sum + Math.ceil((count ?? 1) / 2),
    0,
  );
  const formula = parseFormula(document.formula);
  const exchanging = formula.ok ? EXCHANGING.reduce((sum, symbol) => sum + countOf(formula.counts, symbol), 0) : 0;
  if (unpaired > exchanging) return [];
  return document.carbonSignals.flatMap(({ hydrogens }, carbon) =>
    hydrogens === undefined && !hsqc.some(({ first }) => first.includes(carbon)) ? [carbon] : [],
  );
}

function absenceNotes(document: EvidenceDocument, absence: readonly number[]): string[] {
  if (absence.length === 0) return [];
  const shifts = absence.map((carbon) => document.carbonSignals[carbon]!.shift.toFixed(1)).join(', ');
  return [`13C ${absence.length === 1 ? 'signal' : 'signals'} without an HSQC pair read as quaternary: ${shifts}`];
}

function unlaidNotes(document: EvidenceDocument, pairs: CorrelationReading['pairs']): string[] {
  const notes: string[] = [];
  for (const kind of CORRELATION_KINDS) {
    pairs[kind].forEach(({ first, second }, index) => {
      const shifts = document.correlations[kind][index]!;
      const path = `correlations.${kind}[${index}]`;
      [first, second].forEach((near, end) => {
        const nucleus = PAIR_NUCLEI[kind][end]!;
        const tolerance = nucleus === '13C' ? CARBON_TOLERANCE : PROTON_TOLERANCE;
        if (near.length === 0) notes.push(`${path} is not used: no ${nucleus} signal is listed within ${tolerance} ppm of ${shifts[end]!}`);
      });
      if (kind === 'cosy' && isDiagonal({ first, second })) notes.push(`${path} is not used: both shifts mean the same signal`);
    });
  }
  return notes;
}

const isDiagonal = ({ first, second }: PairReading): boolean => first.length === 1 && second.length === 1 && first[0] === second[0];

/** HSQC pairs on signals that cannot have them. */
function pairIssues(document: EvidenceDocument, hsqc: readonly PairReading[]): InputIssue[] {
  return hsqc.flatMap(({ first, second }, index): InputIssue[] => {
    const path = `correlations.hsqc[${index}]`;
    if (first.length > 0 && first.every((carbon) => document.carbonSignals[carbon]!.hydrogens === 0)) {
      const { shift } = document.carbonSignals[first[0]!]!;
      return [{ path, message: `the 13C signal at ${shift} ppm has 0 attached hydrogens; correct it or remove the pair` }];
    }
    if (second.length > 0 && second.every((proton) => document.protonSignals[proton]!.exchangeable === true)) {
      const { shift } = document.protonSignals[second[0]!]!;
      return [{ path, message: `the 1H signal at ${shift} ppm is marked as exchangeable; correct it or remove the pair` }];
    }
    return [];
  });
}

/** Protons tied to more carbons than they have hydrogens for, and carbons with more 1H signals than they can show. */
function tieIssues(document: EvidenceDocument, hsqc: readonly PairReading[], tiedProtons: readonly (readonly number[])[]): InputIssue[] {
  const issues: InputIssue[] = [];
  document.protonSignals.forEach(({ shift, count }: ProtonSignal, proton) => {
    if (count === undefined) return;
    // Pairs whose two shifts each mean a single signal.
    const own = hsqc.flatMap(({ first, second }, index) =>
      first.length === 1 && second.length === 1 && second[0] === proton ? [{ index, carbon: first[0]! }] : [],
    );
    const carbons = [...new Set(own.map(({ carbon }) => carbon))];
    const needed = carbons.reduce((sum, carbon) => sum + fewestHydrogens(document.carbonSignals[carbon]!), 0);
    if (carbons.length < 2 || needed <= count) return;
    const last = own.findLast(({ carbon }) => carbon !== own[0]!.carbon)!;
    const places = carbons.map((carbon) => document.carbonSignals[carbon]!.shift).join(', ');
    issues.push({
      path: `correlations.hsqc[${last.index}]`,
      message: `the 1H signal at ${shift} ppm stands for ${count} hydrogens, too few for the carbons at ${places} ppm; raise its count or remove a pair`,
    });
  });
  document.carbonSignals.forEach(({ shift, hydrogens, count }, carbon) => {
    if (count !== 1 || hydrogens === 0) return;
    const tied = tiedProtons[carbon]!;
    const most = hydrogens === undefined || hydrogens === 2 ? 2 : 1;
    if (tied.length <= most) return;
    const index = hsqc.findLastIndex(({ first, second }) => first.includes(carbon) && tied.includes(second[0]!));
    issues.push({
      path: `correlations.hsqc[${index}]`,
      message: `${tied.length} 1H signals on the single carbon at ${shift} ppm, which can show ${most}; correct its hydrogens or count, or remove a pair`,
    });
  });
  return issues;
}

/** Hydrogens that a carbon signal takes of a 1H signal on it: those of a CH2 may be shared by two signals. */
function fewestHydrogens({ hydrogens, count }: CarbonSignal): number {
  return (hydrogens === 3 ? 3 : 1) * (count ?? 1);
}

/** COSY and HMBC pairs as demands; equal pairs, a COSY pair and its mirror image among them, count once. */
function readConstraints(pairs: CorrelationReading['pairs'], ties: readonly Ties[]): Pick<CorrelationReading, 'sites' | 'constraints'> {
  const sites: CorrelationSite[] = [];
  const siteNumber = (kind: CorrelationSite['kind'], signal: number): number => {
    const known = sites.findIndex((site) => site.kind === kind && site.signal === signal);
    return known >= 0 ? known : sites.push({ kind, signal }) - 1;
  };
  const protonSites = (proton: number): number[] => {
    const { sure, possible } = ties[proton]!;
    const places = [...new Set([...sure, ...possible])].map((carbon) => siteNumber('carbon', carbon));
    // Without a pair of its own the proton may also sit elsewhere.
    return sure.size > 0 ? places : [...places, siteNumber('proton', proton)];
  };
  const constraints: CorrelationConstraint[] = [];
  const seen = new Set<string>();
  const add = (kind: 'cosy' | 'hmbc', index: number, combinations: readonly (readonly [number, number])[]): void => {
    // Told apart by signals: two protons of one CH2 that see the same carbon are two observations.
    const key = `${kind} ${combinations
      .map(([a, b]) => (kind === 'cosy' && a > b ? `${b},${a}` : `${a},${b}`))
      .sort()
      .join(' ')}`;
    if (combinations.length === 0 || seen.has(key)) return;
    seen.add(key);
    const alternatives = combinations.flatMap(([proton, other]) =>
      protonSites(proton).flatMap((from) =>
        (kind === 'hmbc' ? [siteNumber('carbon', other)] : protonSites(other)).map((to) => [from, to] as const),
      ),
    );
    const ordered = alternatives.map(([a, b]): readonly [number, number] => (kind === 'cosy' && a > b ? [b, a] : [a, b]));
    const distinct = new Map(ordered.map((ends) => [ends.join(), ends]));
    constraints.push({ kind, index, alternatives: [...distinct.values()] });
  };
  pairs.hmbc.forEach(({ first, second }, index) =>
    add(
      'hmbc',
      index,
      first.flatMap((proton) => second.map((carbon) => [proton, carbon] as const)),
    ),
  );
  pairs.cosy.forEach(({ first, second }, index) =>
    // A signal has no cross peak with itself.
    add(
      'cosy',
      index,
      first.flatMap((a) => second.filter((b) => b !== a).map((b) => [a, b] as const)),
    ),
  );
  return { sites, constraints };
}

/**
 * Fills in the attached hydrogens of 13C signals that the 2D pairs settle: quaternary carbons without, and CH2 with two
 * HSQC pairs. Signals with hydrogens of their own stay as they are.
 */
export function attachedHydrogensFrom2D(document: EvidenceDocument): CarbonSignal[] {
  if (document.correlations.hsqc.length === 0) return document.carbonSignals;
  const { attached } = readCorrelations(document);
  return document.carbonSignals.map((signal, carbon) => {
    const { least, most } = attached[carbon]!;
    return signal.hydrogens === undefined && least === most ? { ...signal, hydrogens: least } : signal;
  });
}
