import { hybridisationsAt } from './bond-patterns.js';
import type { FillLayout } from './layout.js';

const CARBON = 6;
const NITROGEN = 7;
const ANY_ORDER = 255;
/** Bits of hybridisations, see CarbonDemand. */
const SP3 = 1;
const SP = 4;

/**
 * Most 13C signals that the methyl groups on each atom can show together, whatever molecule the layout becomes: one where
 * nothing in it can tell them apart, else two. Never below what SignalBounds finds for the molecule.
 *
 * They are told apart by another stereocentre, by what parts a whole molecule (a tertiary nitrogen that turns or inverts
 * slowly, an allene, a cage) and on a double bond by its far end.
 *
 * @returns for each atom of the layout's graph, 1 or 2.
 */
export function mostSignalsOfTwins(layout: FillLayout): Uint8Array {
  const { atomCount: n, atomicNumbers, hydrogens, charges } = layout.base;
  const mayBeCentre = (v: number): boolean => {
    const z = atomicNumbers[v];
    if (hydrogens[v] > 1) return false;
    return z === CARBON ? (hybridisationsAt(layout, v) & SP3) !== 0 : z === 14 || z === 15 || z === 16 || charges[v] !== 0;
  };
  const atoms = Array.from({ length: n }, (_, v) => v);
  const centres = atoms.filter(mayBeCentre);
  const mayBeParted =
    mostRings(layout) > 1 ||
    atoms.some((v) => atomicNumbers[v] === NITROGEN && hydrogens[v] === 0) ||
    atoms.some((v) => atomicNumbers[v] === CARBON && (hybridisationsAt(layout, v) & SP) !== 0);
  return Uint8Array.from(atoms, (v) => {
    const isAlone = centres.every((centre) => centre === v);
    return !mayBeParted && isAlone && atomicNumbers[v] === CARBON && hybridisationsAt(layout, v) === SP3 ? 1 : 2;
  });
}

/** Rings of a molecule of the layout at most: what multiple bonds that are prescribed leave of the unsaturation. */
function mostRings({ base, open, freeValence, bondQuota }: FillLayout): number {
  let orders = base.bondOrders.reduce((sum, order) => sum + order, 0);
  let piBonds = base.bondOrders.reduce((sum, order) => sum + (order > 1 ? order - 1 : 0), 0) / 2;
  let doubles = 0;
  let triples = 0;
  for (let v = 0; v < open; v++) {
    orders += freeValence[v];
    if (bondQuota[4 * v] === ANY_ORDER) continue;
    doubles += bondQuota[4 * v + 2];
    triples += bondQuota[4 * v + 3];
  }
  piBonds += Math.ceil(doubles / 2) + 2 * Math.ceil(triples / 2);
  return orders / 2 - piBonds - base.atomCount + 1;
}
