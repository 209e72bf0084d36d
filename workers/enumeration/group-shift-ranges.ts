import type { ShiftRange } from '../../shared/chemistry/shift-window-table.js';
import type { MolecularGraph } from '../../shared/types/molecular-graph.js';
import type { UnitKind } from './units.js';

/**
 * Where carbons of groups are found, ppm, that are too rare in the data for the fitted ranges; from memory, with wide
 * margins: isocyanides 150 to 170; diazomethane 23, ethyl diazoacetate 46, diphenyldiazomethane 63; nitrile oxides near 36.
 */
const ISOCYANIDE: readonly ShiftRange[] = [{ hydrogens: 0, bonds: 'triple', neighbours: 'N', low: 140, high: 180 }];
const DIAZO: readonly ShiftRange[] = [
  { hydrogens: 0, bonds: 'double', neighbours: 'N', low: 40, high: 100 },
  { hydrogens: 1, bonds: 'double', neighbours: 'N', low: 20, high: 80 },
  { hydrogens: 2, bonds: 'double', neighbours: 'N', low: 10, high: 50 },
];
const NITRILE_OXIDE: readonly ShiftRange[] = [0, 1].map((hydrogens) => ({
  hydrogens,
  bonds: 'triple',
  neighbours: 'N',
  low: 15,
  high: 60,
}));

/** Of every such group. */
export const GROUP_SHIFT_RANGES: readonly ShiftRange[] = [...ISOCYANIDE, ...DIAZO, ...NITRILE_OXIDE];

/** Is an atom the carbon of an isocyanide, a diazo group or a nitrile oxide? */
export function isGroupCarbon({ atomCount: n, atomicNumbers, charges, bondOrders }: MolecularGraph, atom: number): boolean {
  if (atomicNumbers[atom] !== 6) return false;
  if (charges[atom] === -1) return true;
  for (let centre = 0; centre < n; centre++) {
    const order = bondOrders[atom * n + centre];
    if (order < 2 || charges[centre] !== 1) continue;
    for (let end = 0; end < n; end++)
      if (charges[end] === -1 && bondOrders[centre * n + end] > 0 && (order === 3 || atomicNumbers[end] === 7)) return true;
  }
  return false;
}

/** Shift ranges to add for a unit that is or holds such a group; empty for every other. */
export function groupShiftRanges({ graph, bondQuota }: UnitKind): readonly ShiftRange[] {
  const { atomCount: n, atomicNumbers, charges, bondOrders } = graph;
  const ranges: ShiftRange[] = [];
  for (let centre = 0; centre < n; centre++) {
    if (atomicNumbers[centre] !== 7 || charges[centre] !== 1) continue;
    const bonds = bondOrders.subarray(centre * n, (centre + 1) * n);
    const partner = charges.findIndex((charge, atom) => charge < 0 && bonds[atom] > 0);
    if (partner === -1) continue;
    if (atomicNumbers[partner] === 6) ranges.push(...ISOCYANIDE);
    else if (atomicNumbers[partner] === 7) ranges.push(...DIAZO);
    else if (bondQuota[4 * centre + 3] > 0 || bonds.includes(3)) ranges.push(...NITRILE_OXIDE);
  }
  return ranges;
}
