import { Canonizer, Molecule } from 'openchemlib';
import type { MolecularGraph } from '../../shared/types/molecular-graph.js';
import { atomColour } from './atom-colour.js';
import { canonicalForm } from './canonical.js';

/** A constitution as people and other programs get it. */
export interface CanonicalStructure {
  /** SMILES without stereo marks; the same for every numbering and Kekulé form of the constitution. */
  readonly smiles: string;
  /** openchemlib id code without stereo. */
  readonly idcode: string;
  /** `order[i]` = atom of the given graph that stands at position i of the SMILES. */
  readonly order: readonly number[];
}

/**
 * Builds the openchemlib molecule of a graph, atom k of the graph being atom k of the molecule.
 *
 * Coordinates stay zero and parities are declared known and absent: molecules built by another route get other id
 * codes for the same constitution, so everything that is compared by id code must come from here.
 *
 * @param graph - read only, not kept.
 */
export function moleculeFromGraph(graph: MolecularGraph): Molecule {
  const { atomCount: n, atomicNumbers, bondOrders, charges, hydrogens } = graph;
  const molecule = new Molecule(n, n + 8);
  for (let a = 0; a < n; a++) {
    molecule.addAtom(atomicNumbers[a]!);
    if (charges[a] !== 0) molecule.setAtomCharge(a, charges[a]!);
  }
  for (let a = 0; a < n; a++) {
    for (let b = a + 1; b < n; b++) {
      const order = bondOrders[a * n + b]!;
      if (order === 0) continue;
      const bond = molecule.addBond(a, b);
      const type = order === 1 ? Molecule.cBondTypeSingle : order === 2 ? Molecule.cBondTypeDouble : Molecule.cBondTypeTriple;
      molecule.setBondType(bond, type);
    }
  }
  for (let a = 0; a < n; a++) {
    // The library fills up with hydrogens to the next usual valence; where the graph has another number, it is told so.
    if (molecule.getImplicitHydrogens(a) !== hydrogens[a]) molecule.setAtomAbnormalValence(a, bondOrderSum(graph, a) + hydrogens[a]!);
  }
  molecule.setParitiesValid(0);
  return molecule;
}

/**
 * Canonical SMILES and id code of a constitution, and which of its atoms stands where in the SMILES.
 *
 * The library's SMILES follows the Kekulé form it starts from, so it is written from the molecule that the id code
 * describes; for a few strained fused arenes the first id code does so too, so the one returned is that of the SMILES.
 * Structures that the library takes for aromatic by mistake (arynes, cyclic cumulenes) lose hydrogens on the way and are
 * written with their double bonds instead, from a canonical numbering of our own.
 *
 * @param graph - read only, not kept.
 * @throws Error when no SMILES describes the same molecule; that would be a fault of this module.
 */
export function canonicalStructure(graph: MolecularGraph): CanonicalStructure {
  const canonizer = new Canonizer(moleculeFromGraph(graph), { neglectAnyStereoInformation: true });
  const found =
    readBack(graph, canonizer, Molecule.fromIDCode(canonizer.getIDCode(), false).toIsomericSmiles()) ??
    readBack(graph, canonizer, moleculeFromGraph(reorderGraph(graph, canonicalOrder(graph))).toIsomericSmiles({ kekulizedOutput: true }));
  if (found === null) throw new Error(`canonicalStructure: no faithful SMILES for ${moleculeFromGraph(graph).toIsomericSmiles()}`);
  return found;
}

/** Reads a SMILES of the graph and lays it on the graph; null when it describes something else. */
function readBack(graph: MolecularGraph, canonizer: Canonizer, smiles: string): CanonicalStructure | null {
  const written = graphFromMolecule(Molecule.fromSmiles(smiles, { noCoordinates: true, noStereo: true }));
  const writtenCanonizer = new Canonizer(moleculeFromGraph(written), { neglectAnyStereoInformation: true });
  const atomOfRank = new Map<number, number>();
  canonizer.getFinalRank().forEach((rank, atom) => atomOfRank.set(rank, atom));
  let order: readonly number[] | null = writtenCanonizer.getFinalRank().map((rank) => atomOfRank.get(rank) ?? -1);
  if (!isSameSkeleton(written, graph, order)) order = findSkeletonMatch(written, graph);
  return order === null ? null : { smiles, idcode: writtenCanonizer.getIDCode(), order };
}

function canonicalOrder(graph: MolecularGraph): readonly number[] {
  const colours = Uint16Array.from({ length: graph.atomCount }, (_, atom) => atomColour(graph, atom));
  return Array.from(canonicalForm(graph.atomCount, colours, graph.bondOrders).order);
}

/** True when `order` lays every atom of `a` on an atom of `b` with the same element, charge, hydrogens and neighbours. */
function isSameSkeleton(a: MolecularGraph, b: MolecularGraph, order: readonly number[]): boolean {
  const n = a.atomCount;
  if (n !== b.atomCount || order.length !== n) return false;
  for (let i = 0; i < n; i++) if (!fitsSkeleton(a, b, order, i, order[i]!)) return false;
  return true;
}

/** Atom i of `a` may stand for atom `x` of `b`, given the partners of the atoms before i. */
function fitsSkeleton(a: MolecularGraph, b: MolecularGraph, order: readonly number[], i: number, x: number): boolean {
  const n = a.atomCount;
  if (a.atomicNumbers[i] !== b.atomicNumbers[x] || a.hydrogens[i] !== b.hydrogens[x] || a.charges[i] !== b.charges[x]) return false;
  for (let j = 0; j < i; j++) if ((a.bondOrders[i * n + j] === 0) !== (b.bondOrders[x * n + order[j]!] === 0)) return false;
  return true;
}

/** Lays `a` on `b` without regard to bond orders (they differ between Kekulé forms); null if that is impossible. */
function findSkeletonMatch(a: MolecularGraph, b: MolecularGraph): number[] | null {
  const n = a.atomCount;
  if (n !== b.atomCount) return null;
  const order: number[] = [];
  const extend = (): boolean => {
    const i = order.length;
    if (i === n) return true;
    for (let x = 0; x < n; x++) {
      if (order.includes(x) || !fitsSkeleton(a, b, order, i, x)) continue;
      order.push(x);
      if (extend()) return true;
      order.pop();
    }
    return false;
  };
  return extend() ? order : null;
}

/**
 * Graph of an openchemlib molecule: its heavy atoms in their order, one Kekulé form, no stereo.
 *
 * @throws RangeError if a bond is neither single, double nor triple.
 */
export function graphFromMolecule(molecule: Molecule): MolecularGraph {
  molecule.ensureHelperArrays(Molecule.cHelperNeighbours);
  const n = molecule.getAtoms();
  const atomicNumbers = new Uint8Array(n);
  const hydrogens = new Uint8Array(n);
  const charges = new Int8Array(n);
  const bondOrders = new Uint8Array(n * n);
  for (let a = 0; a < n; a++) {
    atomicNumbers[a] = molecule.getAtomicNo(a);
    hydrogens[a] = molecule.getAllHydrogens(a);
    charges[a] = molecule.getAtomCharge(a);
  }
  for (let bond = 0; bond < molecule.getBonds(); bond++) {
    const order = molecule.getBondOrder(bond);
    if (order < 1 || order > 3) throw new RangeError(`graphFromMolecule: bond order ${order}`);
    const a = molecule.getBondAtom(0, bond);
    const b = molecule.getBondAtom(1, bond);
    bondOrders[a * n + b] = bondOrders[b * n + a] = order;
  }
  return { atomCount: n, atomicNumbers, hydrogens, charges, bondOrders };
}

/** The same constitution with atom `order[i]` moved to position i. */
export function reorderGraph(graph: MolecularGraph, order: readonly number[]): MolecularGraph {
  const n = graph.atomCount;
  const bondOrders = new Uint8Array(n * n);
  for (let i = 0; i < n; i++) for (let j = 0; j < n; j++) bondOrders[i * n + j] = graph.bondOrders[order[i]! * n + order[j]!]!;
  return {
    atomCount: n,
    atomicNumbers: Uint8Array.from(order, (a) => graph.atomicNumbers[a]!),
    hydrogens: Uint8Array.from(order, (a) => graph.hydrogens[a]!),
    charges: Int8Array.from(order, (a) => graph.charges[a]!),
    bondOrders,
  };
}

function bondOrderSum(graph: MolecularGraph, atom: number): number {
  let sum = 0;
  for (let b = 0; b < graph.atomCount; b++) sum += graph.bondOrders[atom * graph.atomCount + b]!;
  return sum;
}
