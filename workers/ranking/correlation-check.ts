import { type CarbonWindow, type EvidenceDocument, HYBRIDISATIONS } from '../../shared/schemas/evidence.js';
import { createCorrelationModel, findOpenSites, TYPE_COUNT, type CorrelationModel } from '../correlations/correlation-model.js';
import { areTwins, CorrelationMatcher, FAILED, hasBit, MET, setBit, WORDS } from '../correlations/correlation-matcher.js';
import { isGroupCarbon } from '../enumeration/group-shift-ranges.js';
import { MAX_ATOMS, NEIGHBOUR_STRIDE, type StructureAnalysis } from '../graph/analysis.js';
import type { Environments } from './environments.js';
import type { SignalBounds } from './signal-bounds.js';
import type { SignalContradiction } from './signal-census.js';

const CARBON = 6;
const SILICON = 14;

/** Reason of a run: which pair is at fault depends on the assignment, so none is named. */
export const CORRELATION_REASON = 'signals:correlations';

/** Places tried for one structure; beyond it the structure is kept, because nothing was proved against it. */
const NODE_LIMIT = 50_000;

/**
 * The exact test of COSY, HSQC and HMBC pairs on a finished structure: is there an assignment of the signals that leaves no
 * more pairs unmet than allowed? Scratch is reused from structure to structure: not re-entrant.
 */
export class CorrelationCheck {
  private readonly matcher: CorrelationMatcher;
  private readonly carbonsOfType = new Int32Array(TYPE_COUNT);
  /** Carbons by attached hydrogens, then atoms with hydrogen: all but C and Si, and these. */
  private readonly ofType = new Int32Array(TYPE_COUNT * WORDS);
  private readonly members = new Int32Array(MAX_ATOMS * WORDS);

  private constructor(
    private readonly evidence: EvidenceDocument,
    private readonly model: CorrelationModel,
  ) {
    this.matcher = new CorrelationMatcher(model);
  }

  /** @returns null when no pair says anything of structures. */
  static of(evidence: EvidenceDocument): CorrelationCheck | null {
    const model = createCorrelationModel(evidence);
    return model === null ? null : new CorrelationCheck(evidence, model);
  }

  /**
   * @param s - read only. @param environments, bounds - of the same structure, read only.
   * @returns the reason code, null when the structure fits.
   */
  check(s: StructureAnalysis, environments: Environments, bounds: SignalBounds): string | null {
    this.describe(s, environments, bounds);
    return this.matcher.match(s.graph.atomCount, this.model.exceptions, NODE_LIMIT) === FAILED ? CORRELATION_REASON : null;
  }

  /** The pairs that the best assignment leaves unmet, one contradiction each; empty when the structure fits. */
  explain(s: StructureAnalysis, environments: Environments, bounds: SignalBounds): (SignalContradiction & { readonly text: string })[] {
    if (this.check(s, environments, bounds) === null) return [];
    const { matcher, model } = this;
    const n = s.graph.atomCount;
    let exceptions = model.exceptions + 1;
    while (exceptions <= model.constraints.length && matcher.match(n, exceptions, NODE_LIMIT) !== MET) exceptions++;
    if (exceptions > model.constraints.length)
      return [{ reason: CORRELATION_REASON, text: 'It has no atoms on which all signals of the 2D pairs could lie.', atoms: [] }];
    return model.constraints.flatMap((constraint, p) => {
      if (matcher.isUnmet[p] === 0) return [];
      const { kind, index, alternatives } = constraint;
      const [first, second] = this.evidence.correlations[kind][index];
      const limit = kind === 'hmbc' ? model.hmbcBonds : model.cosyBonds;
      const tail = model.exceptions === 0 ? '' : `, and only ${model.exceptions} of the pairs may be an exception`;
      return [
        {
          reason: `signals:${kind}[${index}]`,
          text: `${kind.toUpperCase()} ${first} → ${second} cannot be met within ${limit} bonds together with the other pairs${tail}.`,
          atoms: this.atomsOf(alternatives[0]),
        },
      ];
    });
  }

  private atomsOf(sites: readonly number[]): number[] {
    const { firstSlot, atomOfSlot } = this.matcher;
    return [...new Set(sites.flatMap((site) => [...atomOfSlot.subarray(firstSlot[site], firstSlot[site + 1])]))];
  }

  /** Writes the structure into the matcher. */
  private describe(s: StructureAnalysis, environments: Environments, bounds: SignalBounds): void {
    const { matcher, model, carbonsOfType, ofType, members } = this;
    const { atomCount: n, atomicNumbers, hydrogens } = s.graph;
    const { classOf } = environments;
    matcher.adjacency.fill(0, 0, n * WORDS);
    matcher.protonated.fill(0);
    matcher.geminal.fill(0);
    carbonsOfType.fill(0);
    ofType.fill(0);
    members.fill(0, 0, environments.classCount * WORDS);
    for (let a = 0; a < n; a++) {
      for (let k = 0; k < s.degrees[a]; k++) setBit(matcher.adjacency, a, s.neighbours[a * NEIGHBOUR_STRIDE + k]);
      setBit(members, classOf[a], a);
      if (hydrogens[a] > 0) setBit(matcher.protonated, 0, a);
      if (hydrogens[a] === 2 && bounds.protonSignals[classOf[a]] > 1) setBit(matcher.geminal, 0, a);
      if (atomicNumbers[a] !== CARBON) continue;
      // Methane counts as CH3.
      const type = Math.min(hydrogens[a], TYPE_COUNT - 1);
      carbonsOfType[type]++;
      setBit(ofType, type, a);
    }
    findOpenSites(model, carbonsOfType, matcher.isOpen);
    for (let a = 0; a < n; a++) {
      matcher.alike[a * WORDS] = members[classOf[a] * WORDS];
      matcher.alike[a * WORDS + 1] = members[classOf[a] * WORDS + 1];
      matcher.twinOf[a] = this.findTwin(a, environments);
    }
    matcher.classes ??= { classOf, carbonSignals: bounds.carbonSignals, protonSignals: bounds.protonSignals };
    this.describePlaces(s);
  }

  private findTwin(a: number, { classOf, size, first }: Environments): number {
    const c = classOf[a];
    if (size[c] === 1) return a;
    for (let b = first[c]; b < a; b++) if (classOf[b] === c && areTwins(this.matcher.adjacency, a, b)) return b;
    return a;
  }

  private describePlaces(s: StructureAnalysis): void {
    const { model, matcher, ofType } = this;
    const { atomCount: n, atomicNumbers, hydrogens } = s.graph;
    const { places } = matcher;
    for (let site = 0; site < model.sites.length; site++) {
      const { isCarbon, leastHydrogens, mostHydrogens, exchangeable, window, groupWindow } = model.sites[site];
      places[site * WORDS] = places[site * WORDS + 1] = 0;
      if (isCarbon) {
        for (let type = leastHydrogens; type <= mostHydrogens; type++) {
          places[site * WORDS] |= ofType[type * WORDS];
          places[site * WORDS + 1] |= ofType[type * WORDS + 1];
        }
        if (window === null) continue;
        for (let a = 0; a < n; a++)
          if (hasBit(places, site, a) && !isInWindow(s, a, isGroupCarbon(s.graph, a) ? groupWindow : window))
            places[site * WORDS + (a >> 5)] &= ~(1 << (a & 31));
        continue;
      }
      for (let a = 0; a < n; a++) {
        const isHetero = atomicNumbers[a] !== CARBON && atomicNumbers[a] !== SILICON;
        if (hydrogens[a] < leastHydrogens || hydrogens[a] > mostHydrogens || (exchangeable ?? isHetero) !== isHetero) continue;
        setBit(places, site, a);
      }
    }
  }
}

/** Does a carbon have the hybridisation and the heteroatoms next to it that a window asks for? */
function isInWindow(s: StructureAnalysis, atom: number, window: CarbonWindow | null): boolean {
  if (window === null) return true;
  const { hybridisations, heteroNeighbours } = window;
  if (!hybridisations.includes(HYBRIDISATIONS[3 - s.hybridisation[atom]])) return false;
  let hetero = 0;
  for (let k = 0; k < s.degrees[atom]; k++) if (s.graph.atomicNumbers[s.neighbours[atom * NEIGHBOUR_STRIDE + k]] !== CARBON) hetero++;
  return hetero >= heteroNeighbours.min && hetero <= heteroNeighbours.max;
}
