import type { MolecularGraph } from '../../shared/types/molecular-graph.js';
import { createGraph } from '../graph/pack.js';
import { type BondPattern, createRefinement } from './bond-patterns.js';
import { FILL_STRIDE } from './fill.js';
import type { FillLayout } from './layout.js';
import { listAllowedOrders } from './partial-pattern-check.js';
import type { SearchProblem } from './problem.js';
import { RESONANT_BOND, type UnitKind } from './units.js';

/** Free atoms of one element with the same number of hydrogens, and the same bonds where these are prescribed. */
export interface AtomClass {
  readonly atomicNumber: number;
  readonly hydrogens: number;
  readonly valence: number;
  /** Bonds to other heavy atoms; null = any that make up the valence. */
  readonly bonds: BondPattern | null;
  readonly count: number;
}
/** One way to share the hydrogens, and where shifts tell them the multiple bonds of carbons, out among the free atoms. */
export type Distribution = readonly AtomClass[];

/** More symmetric sets of units than this are refused: the group is held as a list. */
const MAX_TIED_PERMUTATIONS = 50_000;

/** Thrown when the units' symmetry group does not fit; the message is for people. */
export class TooSymmetricError extends Error {}

/**
 * Lists every hydrogen distribution that can belong to a connected molecule and meets the carbon census and the
 * one-atom fragments, in a fixed order; where windows of signals restrict carbons, refined by their bonds.
 *
 * A necessary condition only: valence sum even, enough bonds to connect, no atom with more valence than the others
 * together can take (Senior, Am. J. Math. 1951, 73, 663).
 */
export function listDistributions(problem: SearchProblem): Distribution[] {
  const { free, units, census, demands } = problem;
  const fixedCarbons = [0, 0, 0, 0, 0];
  let unitValence = 0;
  let unitMost = 0;
  let partCount = 0;
  for (const unit of units) {
    partCount += unit.count;
    let valence = 0;
    for (let atom = 0; atom < unit.graph.atomCount; atom++) {
      valence += unit.freeValence[atom];
      if (unit.graph.atomicNumbers[atom] === 6) fixedCarbons[unit.graph.hydrogens[atom]] += unit.count;
    }
    unitValence += valence * unit.count;
    if (valence > unitMost) unitMost = valence;
  }
  for (const element of free) partCount += element.count;

  const refine = createRefinement(problem);
  const result: Distribution[] = [];
  const chosen: AtomClass[] = [];
  /** Largest number of hydrogens that elements [k, end) can carry. */
  const roomFrom = new Array<number>(free.length + 1).fill(0);
  const mostHydrogens = (valence: number): number => (partCount === 1 ? valence : valence - 1);
  for (let k = free.length - 1; k >= 0; k--) roomFrom[k] = roomFrom[k + 1] + free[k].count * mostHydrogens(free[k].valence);

  const isConnectable = (): boolean => {
    let total = unitValence;
    let most = unitMost;
    for (const atomClass of chosen) {
      const valence = atomClass.valence - atomClass.hydrogens;
      total += valence * atomClass.count;
      if (atomClass.count > 0 && valence > most) most = valence;
    }
    if (total % 2 !== 0 || total < 2 * (partCount - 1)) return false;
    return partCount === 1 ? total === 0 : most <= total - most;
  };
  const chooseElement = (k: number, hydrogens: number): void => {
    if (hydrogens > roomFrom[k]) return;
    if (k === free.length) {
      if (hydrogens === 0 && isConnectable()) for (const refined of refine(chosen.filter(({ count }) => count > 0))) result.push(refined);
      return;
    }
    const { atomicNumber, valence, count } = free[k];
    const top = mostHydrogens(valence);
    const chooseClass = (h: number, atoms: number, left: number): void => {
      if (h < 0) {
        if (atoms === 0) chooseElement(k + 1, left);
        return;
      }
      let least = 0;
      let most = atoms;
      if (atomicNumber === 6) {
        least = Math.max(0, census.least[h] - fixedCarbons[h]);
        most = Math.min(most, census.most[h] - fixedCarbons[h]);
      }
      let demanded = 0;
      for (const demand of demands) if (demand.atomicNumber === atomicNumber && demand.hydrogens === h) demanded += demand.count;
      if (demanded > least) least = demanded;
      if (h === 0) least = Math.max(least, atoms);
      for (let number = most; number >= least; number--) {
        if (number * h > left) continue;
        chosen.push({ atomicNumber, hydrogens: h, valence, bonds: null, count: number });
        chooseClass(h - 1, atoms - number, left - number * h);
        chosen.pop();
      }
    };
    chooseClass(top, count, hydrogens);
  };
  chooseElement(0, problem.hydrogens);
  return result;
}

/** Where the atoms of one unit instance stand in the laid-out graph. */
export interface PlacedUnit {
  readonly kind: number;
  /** Atom of the unit → vertex of the graph. */
  readonly vertices: readonly number[];
}

export interface SearchLayout extends FillLayout {
  readonly placedUnits: readonly PlacedUnit[];
  /** Vertices of free atoms. */
  readonly freeVertices: readonly number[];
}

/**
 * Lays a distribution out as rows: units with several open atoms first, then classes by falling free valence.
 *
 * @param forms - the Kekulé form used for each unit kind.
 * @throws TooSymmetricError when the units' permutations are too many to list.
 */
export function createLayout(problem: SearchProblem, distribution: Distribution): SearchLayout {
  const { units } = problem;
  const n = problem.heavyAtomCount;
  interface Row {
    atomicNumber: number;
    hydrogens: number;
    charge: number;
    valence: number;
    quota: readonly number[] | null;
    unit: number;
    atom: number;
    classKey: string;
  }
  const instances: { kind: number; unit: UnitKind }[] = [];
  units.forEach((unit, kind) => {
    for (let copy = 0; copy < unit.count; copy++) instances.push({ kind, unit });
  });
  const rowOf = (unit: UnitKind, instance: number, kind: number, atom: number): Row => ({
    atomicNumber: unit.graph.atomicNumbers[atom],
    hydrogens: unit.graph.hydrogens[atom],
    charge: unit.graph.charges[atom],
    valence: unit.freeValence[atom],
    quota: [...unit.bondQuota.subarray(4 * atom, 4 * atom + 4)],
    unit: instance,
    atom,
    classKey: `unit ${kind}/${atom}`,
  });
  const tiedRows: Row[] = [];
  const freeRows: Row[] = [];
  const closedRows: Row[] = [];
  instances.forEach(({ kind, unit }, instance) => {
    const rows = unit.openAtoms.map((atom) => rowOf(unit, instance, kind, atom));
    (rows.length > 1 ? tiedRows : freeRows).push(...rows);
    closedRows.push(...unit.closedAtoms.map((atom) => rowOf(unit, instance, kind, atom)));
  });
  for (const atomClass of distribution) {
    const { bonds } = atomClass;
    for (let copy = 0; copy < atomClass.count; copy++) {
      freeRows.push({
        atomicNumber: atomClass.atomicNumber,
        hydrogens: atomClass.hydrogens,
        charge: 0,
        valence: atomClass.valence - atomClass.hydrogens,
        quota: bonds === null ? null : [0, bonds.singles, bonds.doubles, bonds.triples],
        unit: -1,
        atom: -1,
        classKey: `atom ${atomClass.atomicNumber}/${atomClass.hydrogens}${bonds === null ? '' : `/${bonds.singles}${bonds.doubles}${bonds.triples}`}`,
      });
    }
  }
  freeRows.sort((a, b) => b.valence - a.valence || (a.classKey < b.classKey ? -1 : a.classKey > b.classKey ? 1 : 0));

  const rows = [...tiedRows, ...freeRows, ...closedRows];
  const open = tiedRows.length + freeRows.length;
  const base = createGraph(n);
  const freeValence = new Uint8Array(open);
  const bondQuota = new Uint8Array(4 * open);
  const classOf = new Uint16Array(open);
  const unitOf = new Uint16Array(open);
  const vertices = instances.map(({ unit }) => new Array<number>(unit.graph.atomCount).fill(-1));
  const freeVertices: number[] = [];
  const classNumbers = new Map<string, number>();
  rows.forEach((row, v) => {
    base.atomicNumbers[v] = row.atomicNumber;
    base.hydrogens[v] = row.hydrogens;
    base.charges[v] = row.charge;
    if (row.unit >= 0) vertices[row.unit][row.atom] = v;
    else freeVertices.push(v);
    if (v >= open) return;
    freeValence[v] = row.valence;
    if (row.quota === null) bondQuota[4 * v] = 255;
    else bondQuota.set(row.quota, 4 * v);
    if (!classNumbers.has(row.classKey)) classNumbers.set(row.classKey, classNumbers.size);
    classOf[v] = classNumbers.get(row.classKey)!;
    unitOf[v] = row.unit >= 0 ? row.unit : instances.length + v;
  });
  instances.forEach(({ unit }, instance) => placeForm(base, unit, unit.forms[0], vertices[instance]));
  const placedUnits = instances.map(({ kind }, instance) => ({ kind, vertices: vertices[instance] }));
  const layout: SearchLayout = {
    open,
    tied: tiedRows.length,
    freeValence,
    bondQuota,
    classOf,
    unitOf,
    allowedOrders: null,
    ringLimits: problem.structure.rings,
    tiedPermutations: listTiedPermutations(units, tiedRows.length),
    base,
    resonantBonds: findResonantBonds(n, placedUnits, units),
    // Three double bonds and a ring are the least that has a second Kekulé form.
    tellsForms: problem.mergeResonanceForms && unsaturationOf(base, freeValence) >= 4,
    placedUnits,
    freeVertices,
  };
  return { ...layout, allowedOrders: listAllowedOrders(problem.structure.patterns, layout, FILL_STRIDE) };
}

/** Rings plus double bonds of every molecule of a layout. */
function unsaturationOf(base: MolecularGraph, freeValence: Uint8Array): number {
  const inside = base.bondOrders.reduce((sum, order) => sum + order, 0);
  const outside = freeValence.reduce((sum, valence) => sum + valence, 0);
  return (inside + outside) / 2 - base.atomCount + 1;
}

function findResonantBonds(n: number, placedUnits: readonly PlacedUnit[], units: readonly UnitKind[]): Uint8Array | null {
  if (placedUnits.every(({ kind }) => units[kind].forms.length === 1 && !units[kind].labels.includes(RESONANT_BOND))) return null;
  const flags = new Uint8Array(n * n);
  for (const { kind, vertices } of placedUnits) {
    const { labels, graph } = units[kind];
    const size = graph.atomCount;
    for (let i = 0; i < size; i++)
      for (let j = 0; j < size; j++) if (labels[i * size + j] === RESONANT_BOND) flags[vertices[i] * n + vertices[j]] = 1;
  }
  return flags;
}

/** Writes the bonds of one Kekulé form of a unit into a graph. */
export function placeForm(graph: MolecularGraph, unit: UnitKind, form: Uint8Array, vertices: readonly number[]): void {
  const size = unit.graph.atomCount;
  for (let i = 0; i < size; i++)
    for (let j = 0; j < size; j++) {
      if (unit.labels[i * size + j] !== 0) graph.bondOrders[vertices[i] * graph.atomCount + vertices[j]] = form[i * size + j];
    }
}

/** All moves of whole units among their kind, combined with the symmetries of each, on the tied vertices. */
function listTiedPermutations(units: readonly UnitKind[], tied: number): Uint8Array[] {
  let list = [new Uint8Array(0)];
  let offset = 0;
  for (const unit of units) {
    const size = unit.openAtoms.length;
    if (size < 2) continue;
    const ofKind: number[][] = [];
    const build = (slots: number[], images: number[]): void => {
      if (slots.length === unit.count) {
        ofKind.push(images);
        if (ofKind.length * list.length > MAX_TIED_PERMUTATIONS) {
          throw new TooSymmetricError(
            `${unit.count} copies of ${unit.smiles} are more than the search can tell apart; ask for fewer copies or a larger fragment`,
          );
        }
        return;
      }
      for (let slot = 0; slot < unit.count; slot++) {
        if (slots.includes(slot)) continue;
        for (const symmetry of unit.openSymmetries) {
          build([...slots, slot], [...images, ...Array.from(symmetry, (position) => offset + slot * size + position)]);
        }
      }
    };
    build([], []);
    list = list.flatMap((head) => ofKind.map((images) => Uint8Array.from([...head, ...images])));
    offset += size * unit.count;
  }
  if (offset !== tied) throw new Error('tied vertices and unit kinds disagree');
  return list;
}
