import type { QueryBond, QueryGraph } from './excluded-pattern.js';
import type { Fragment } from './fragment.js';
import { listSmallAromaticRings, type SmallRingAtom } from './small-aromatic-rings.js';

/** Steps after which the search gives up; reached only by patterns made of dozens of wildcards. */
const MAX_STEPS = 200_000;
/** Stands for the unknown heavy atom behind an attachment point. */
const OUTSIDE = -1;

interface TargetAtom {
  readonly atomicNumber: number;
  readonly hydrogens: number;
  readonly charge: number;
  isAromatic: boolean;
}
interface Target {
  readonly atoms: TargetAtom[];
  /** order 0 = no bond; symmetric, row-major. */
  readonly orders: Uint8Array;
  readonly areAromatic: Uint8Array;
}

/** The fragment with one more vertex for each attachment point. */
function targetOf(fragment: Fragment): Target {
  const { graph, attachments, aromaticAtoms, aromaticBonds } = fragment;
  const n = graph.atomCount;
  const size = n + attachments.length;
  const orders = new Uint8Array(size * size);
  const areAromatic = new Uint8Array(size * size);
  const atoms: TargetAtom[] = [];
  for (let a = 0; a < n; a++) {
    atoms.push({
      atomicNumber: graph.atomicNumbers[a]!,
      hydrogens: graph.hydrogens[a]!,
      charge: graph.charges[a]!,
      isAromatic: aromaticAtoms[a] === 1,
    });
    for (let b = 0; b < n; b++) {
      orders[a * size + b] = graph.bondOrders[a * n + b]!;
      areAromatic[a * size + b] = aromaticBonds[a * n + b]!;
    }
  }
  attachments.forEach(({ atom, order }, i) => {
    atoms.push({ atomicNumber: OUTSIDE, hydrogens: 0, charge: 0, isAromatic: false });
    orders[atom * size + n + i] = orders[(n + i) * size + atom] = order;
  });
  const ringAtoms: SmallRingAtom[] = atoms.map(({ atomicNumber, charge }, a) => ({
    atomicNumber,
    charge,
    neighbours: atoms.flatMap((_, b) => (orders[a * size + b] === 0 ? [] : [{ atom: b, order: orders[a * size + b]! }])),
  }));
  for (const ring of listSmallAromaticRings(ringAtoms)) {
    ring.forEach((atom, i) => {
      const next = ring[(i + 1) % ring.length]!;
      atoms[atom]!.isAromatic = true;
      areAromatic[atom * size + next] = areAromatic[next * size + atom] = 1;
    });
  }
  return { atoms, orders, areAromatic };
}

function doesBondFit(kind: QueryBond['kind'], order: number, isAromatic: boolean): boolean {
  if (order === 0) return false;
  switch (kind) {
    case 'any':
      return true;
    case 'aromatic':
      return isAromatic;
    case 'singleOrAromatic':
      return isAromatic || order === 1;
    case 'single':
      return !isAromatic && order === 1;
    case 'double':
      return !isAromatic && order === 2;
    case 'triple':
      return order === 3;
  }
}

/**
 * Tells whether an excluded pattern already lies inside a required fragment, so that no structure can satisfy both.
 * The atom behind an attachment point is known to be heavy and nothing else: only `*` matches it.
 *
 * @returns false also when the search gives up; the enumeration itself then decides.
 */
export function doesPatternOccurIn(query: QueryGraph, fragment: Fragment): boolean {
  const target = targetOf(fragment);
  const size = target.atoms.length;
  const order = connectedOrder(query);
  const image = new Int32Array(query.atoms.length).fill(-1);
  const isUsed = new Uint8Array(size);
  let steps = 0;

  const extend = (depth: number): boolean => {
    if (depth === order.length) return true;
    const atom = order[depth]!;
    const wanted = query.atoms[atom]!;
    for (let candidate = 0; candidate < size; candidate++) {
      if (++steps > MAX_STEPS) return false;
      const offered = target.atoms[candidate]!;
      if (isUsed[candidate] === 1) continue;
      if (wanted.atomicNumber !== 0 && wanted.atomicNumber !== offered.atomicNumber) continue;
      if (wanted.isAromatic !== null && wanted.isAromatic !== offered.isAromatic) continue;
      if (wanted.hydrogens !== null && wanted.hydrogens !== offered.hydrogens) continue;
      if (offered.hydrogens < wanted.minHydrogens) continue;
      if (wanted.charge !== null && wanted.charge !== offered.charge) continue;
      const bondsFit = query.bonds.every(({ from, to, kind }) => {
        if (from !== atom && to !== atom) return true;
        const other = image[from === atom ? to : from]!;
        return (
          other === -1 || doesBondFit(kind, target.orders[candidate * size + other]!, target.areAromatic[candidate * size + other] === 1)
        );
      });
      if (!bondsFit) continue;
      image[atom] = candidate;
      isUsed[candidate] = 1;
      if (extend(depth + 1)) return true;
      image[atom] = -1;
      isUsed[candidate] = 0;
    }
    return false;
  };
  return extend(0);
}

/** Query atoms so that each but the first is bonded to an earlier one (patterns are connected). */
function connectedOrder(query: QueryGraph): number[] {
  const start = Math.max(
    query.atoms.findIndex(({ atomicNumber }) => atomicNumber !== 0),
    0,
  );
  const order = [start];
  for (let head = 0; head < order.length; head++) {
    for (const { from, to } of query.bonds) {
      const next = from === order[head] ? to : to === order[head] ? from : -1;
      if (next !== -1 && !order.includes(next)) order.push(next);
    }
  }
  return order;
}
