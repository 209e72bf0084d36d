import { elementOf } from '../../shared/chemistry/elements.js';
import { formatFold } from '../../shared/estimates/fold.js';
import type { ResolvedEvidence } from '../../shared/chemistry/resolve-options.js';
import type { EstimateHint } from '../../shared/jobs/contract.js';
import type { MolecularGraph } from '../../shared/types/molecular-graph.js';
import type { SearchEstimate } from '../enumeration/estimate.js';
import type { Search } from '../enumeration/search.js';
import { AnalysisScratch, analyseStructure, type StructureAnalysis } from '../graph/analysis.js';
import { checkRingSizes } from '../ranking/ring-sizes.js';
import { fallByFittedCensus } from './census-by-fit.js';

/** What is remembered of a constitution that was met. */
export interface Observation {
  /** Carbons by attached hydrogens. */
  readonly census: string;
  /** Carbons by attached hydrogens and hybridisation. */
  readonly carbonKinds: string;
  readonly hasPeroxideOrHydrazineBond: boolean;
  readonly hasOnlyUsualRings: boolean;
  readonly hasUsualValences: boolean;
  readonly survives: boolean;
}

const USUAL_RINGS = { min: 5, max: 6 };
const CARBON = 6;
const NITROGEN = 7;
const OXYGEN = 8;
/** A hint that promises less is not worth reading. */
const LEAST_FACTOR = 1.5;
/** Equally heavy samples below which nothing is said, and below which only bounds are given. */
const LEAST_SAMPLES = 2;
const ENOUGH_SAMPLES = 20;
/** So many samples, or pairs of them, must carry a share before it is taken for more than a bound. */
const LEAST_MET = 4;
const MOST_HINTS = 4;

/** Looks at constitutions; not re-entrant. */
export class Observer {
  readonly #scratch = new AnalysisScratch();

  observe(graph: MolecularGraph): Omit<Observation, 'survives'> {
    const structure = analyseStructure(graph, this.#scratch);
    const byHydrogens = [0, 0, 0, 0, 0];
    const byKind = new Array<number>(20).fill(0);
    for (let a = 0; a < graph.atomCount; a++) {
      if (graph.atomicNumbers[a] !== CARBON) continue;
      byHydrogens[graph.hydrogens[a]]++;
      byKind[4 * graph.hydrogens[a] + structure.hybridisation[a]]++;
    }
    return {
      census: byHydrogens.join(),
      carbonKinds: byKind.join(),
      hasPeroxideOrHydrazineBond: hasBondBetweenLike(structure),
      hasOnlyUsualRings: checkRingSizes(structure, USUAL_RINGS) === null,
      hasUsualValences: hasUsualValences(graph),
    };
  }
}

function hasBondBetweenLike({ graph }: StructureAnalysis): boolean {
  const { atomCount: n, atomicNumbers, bondOrders } = graph;
  for (let a = 0; a < n; a++) {
    if (atomicNumbers[a] !== NITROGEN && atomicNumbers[a] !== OXYGEN) continue;
    for (let b = a + 1; b < n; b++) if (atomicNumbers[b] === atomicNumbers[a] && bondOrders[a * n + b] !== 0) return true;
  }
  return false;
}

function hasUsualValences({ atomCount: n, atomicNumbers, hydrogens, charges, bondOrders }: MolecularGraph): boolean {
  for (let a = 0; a < n; a++) {
    let orders = hydrogens[a];
    for (let b = 0; b < n; b++) orders += bondOrders[a * n + b];
    if (charges[a] !== 0 || orders > elementOf(atomicNumbers[a]).defaultValence) return false;
  }
  return true;
}

/** Expected fall of a number; a bound where too little was met to say more. */
interface Fall {
  readonly factor: number;
  readonly isBound: boolean;
}

/**
 * What further knowledge would help, most first. Nobody knows yet what an experiment will say: knowing the class of the true
 * constitution leaves on average Σ sᵢ² / Σ sᵢ constitutions, s being the sizes of the classes that the experiment tells
 * apart, if each constitution is as likely as the other. That is the chance that two constitutions drawn at random agree.
 * A rule that people may set leaves the share that keeps it.
 *
 * @param evidence - with options settled: hints are for what it lacks.
 */
export function listHints(evidence: ResolvedEvidence, search: Search, size: SearchEstimate<Observation>): EstimateHint[] {
  const { carbonSignals, options, fragments } = evidence;
  const hints: EstimateHint[] = [];
  const add = (kind: EstimateHint['kind'], what: string, fall: Fall | null): void => {
    if (fall === null || fall.factor < LEAST_FACTOR) return;
    const extent = `${fall.isBound ? 'at least ' : 'about '}${formatFold(fall.factor)}`;
    hints.push({ kind, factor: fall.factor, text: `${what} would cut this ${extent}.` });
  };
  const lacksHydrogens = carbonSignals.length === 0 || carbonSignals.some(({ hydrogens }) => hydrogens === undefined);
  const byCensus = fallByCensus(search, size);
  if (lacksHydrogens) add('attachedHydrogens', 'Attached-hydrogen counts (DEPT or HSQC)', byCensus);
  if (carbonSignals.length === 0)
    add(
      'carbonShifts',
      'A ¹³C list with shifts and attached hydrogens',
      atLeast(
        fallByClasses(size, ({ carbonKinds }) => carbonKinds),
        byCensus,
      ),
    );
  else if (!options.shiftWindows)
    add(
      'shiftWindows',
      'Windows for the carbons from their shifts',
      fallByClasses(size, ({ carbonKinds }) => carbonKinds),
    );
  const excludesLikeBonds = fragments.excluded.some(({ smiles }) => /^\*?(OO|NN|O~O|N~N)\*?$/.test(smiles));
  if (!excludesLikeBonds)
    add(
      'heteroBonds',
      `Ruling out ${likeBonds(evidence.formula)} bonds`,
      fallByRule(size, (met) => !met.hasPeroxideOrHydrazineBond),
    );
  if (options.ringSizes.min <= 3 && options.ringSizes.max === null)
    add(
      'ringSizes',
      'Allowing only rings of five and six atoms',
      fallByRule(size, (met) => met.hasOnlyUsualRings),
    );
  if ((options.valenceGroups ?? []).length > 0)
    add(
      'valenceGroups',
      'Ruling out nitro, N-oxide and other groups of higher valence',
      fallByRule(size, (met) => met.hasUsualValences),
    );
  return hints.sort((a, b) => b.factor - a.factor).slice(0, MOST_HINTS);
}

/** Names the bonds that a formula has atoms for. */
function likeBonds(formula: string): string {
  const has = (symbol: string): boolean => new RegExp(`${symbol}(?![a-z])`).test(formula);
  return [...(has('O') ? ['O–O'] : []), ...(has('N') ? ['N–N'] : [])].join(' and ');
}

/** The census of carbons belongs to a whole branch, so that its size is known better than from single constitutions. */
function fallByCensus(search: Search, size: SearchEstimate<Observation>): Fall | null {
  const { branchSizes, branchVariances, samples } = size;
  if (effectiveCount(size) < ENOUGH_SAMPLES || branchSizes.some((value) => Number.isNaN(value))) {
    const factor = fallByFittedCensus(search, branchSizes);
    return factor === null ? fallByClasses(size, ({ census }) => census) : { factor, isBound: false };
  }
  const censusOf = new Map<number, string>();
  for (const { branch, observation } of samples) censusOf.set(branch, observation.census);
  const sizes = new Map<string, number>();
  let total = 0;
  let noise = 0;
  for (const [branch, census] of censusOf) {
    sizes.set(census, (sizes.get(census) ?? 0) + branchSizes[branch]);
    total += branchSizes[branch];
    noise += branchVariances[branch];
  }
  if (total === 0) return null;
  let squares = 0;
  for (const value of sizes.values()) squares += value * value;
  // The square of an estimate is too large by its variance on average. Where noise is all there is, the factor is too small.
  const isBound = noise > squares / 2;
  return { factor: (total * total) / (isBound ? squares : squares - noise), isBound };
}

/** Knowledge that holds other knowledge in it cuts at least as much. */
function atLeast(fall: Fall | null, held: Fall | null): Fall | null {
  if (fall === null || held === null) return fall ?? held;
  return fall.factor < held.factor ? { factor: held.factor, isBound: true } : fall;
}

/** Chance that two constitutions drawn at random agree, from all pairs of different samples. */
function fallByClasses(size: SearchEstimate<Observation>, classOf: (observation: Observation) => string): Fall | null {
  const sizes = new Map<string, number>();
  let total = 0;
  let own = 0;
  for (const { weight, observation } of size.samples) {
    const name = classOf(observation);
    sizes.set(name, (sizes.get(name) ?? 0) + weight);
    total += weight;
    own += weight * weight;
  }
  let agreeing = -own;
  for (const value of sizes.values()) agreeing += value * value;
  const pairs = total * total - own;
  if (pairs <= 0) return null;
  const samples = effectiveCount(size);
  if (samples < LEAST_SAMPLES) return null;
  // Counting a sample as agreeing with itself makes the chance too large and the factor a bound.
  if (samples < ENOUGH_SAMPLES) return { factor: (total * total) / (agreeing + own), isBound: true };
  const least = LEAST_MET / ((samples * (samples - 1)) / 2);
  const share = agreeing / pairs;
  return share > least ? { factor: 1 / share, isBound: false } : { factor: 1 / least, isBound: true };
}

/** Share of constitutions that keep a rule; null when none was met, for then it may contradict the evidence. */
function fallByRule(size: SearchEstimate<Observation>, keeps: (observation: Observation) => boolean): Fall | null {
  let total = 0;
  let kept = 0;
  let met = 0;
  for (const { weight, observation } of size.samples) {
    total += weight;
    if (!keeps(observation)) continue;
    kept += weight;
    met++;
  }
  if (met === 0) return null;
  const samples = effectiveCount(size);
  if (samples < LEAST_SAMPLES) return null;
  const least = LEAST_MET / samples;
  const share = kept / total;
  // One-sided 95 % end of the normal approximation, not below what so few samples can tell.
  if (samples < ENOUGH_SAMPLES)
    return { factor: 1 / Math.min(1, Math.max(least, share + 1.64 * Math.sqrt((share * (1 - share)) / samples))), isBound: true };
  return share > least ? { factor: 1 / share, isBound: false } : { factor: 1 / least, isBound: true };
}

function effectiveCount({ samples }: SearchEstimate<Observation>): number {
  let total = 0;
  let squares = 0;
  for (const { weight } of samples) {
    total += weight;
    squares += weight * weight;
  }
  return squares === 0 ? 0 : (total * total) / squares;
}
