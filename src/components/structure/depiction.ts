import type { Molecule } from 'openchemlib';
import { ATTACHMENT, parseStructure } from './parse-structure';

/** Length of a bond in drawing units; every other length is in the same units. */
export const BOND = 30;
const LABEL_RADIUS = 8.5;
const DOUBLE_GAP = 5;
const TRIPLE_GAP = 4.5;

export interface Point {
  readonly x: number;
  readonly y: number;
}
export type Side = 'left' | 'right' | 'up' | 'down';

export interface DrawnAtom extends Point {
  readonly symbol: string;
  readonly name: string;
  readonly isAttachment: boolean;
  /** Carbon in a chain or ring is a corner without letters. */
  readonly isLabelled: boolean;
  readonly hydrogens: number;
  /** Where its hydrogens are written. */
  readonly hydrogenSide: Side;
  readonly charge: number;
  /** Unit vector from the letter to its charge. */
  readonly chargeDirection: Point;
  /** Unit vector into the widest gap between its bonds and letters: room for a number. */
  readonly gap: Point;
}
export interface DrawnBond {
  readonly begin: number;
  readonly end: number;
  readonly lines: ReadonlyArray<readonly [Point, Point]>;
}
export interface Depiction {
  readonly atoms: readonly DrawnAtom[];
  readonly bonds: readonly DrawnBond[];
  readonly bounds: { readonly left: number; readonly top: number; readonly width: number; readonly height: number };
}

const NAMES: Readonly<Record<string, string>> = {
  C: 'carbon',
  H: 'hydrogen',
  N: 'nitrogen',
  O: 'oxygen',
  S: 'sulfur',
  P: 'phosphorus',
  F: 'fluorine',
  Cl: 'chlorine',
  Br: 'bromine',
  I: 'iodine',
  Si: 'silicon',
};
const SIDE_ANGLES: Readonly<Record<Side, number>> = { right: 0, left: Math.PI, up: -Math.PI / 2, down: Math.PI / 2 };

const angleBetween = (a: number, b: number) => {
  const difference = Math.abs(a - b) % (2 * Math.PI);
  return Math.min(difference, 2 * Math.PI - difference);
};

const HYDROGEN_FIRST: ReadonlySet<string> = new Set(['O', 'S', 'F', 'Cl', 'Br', 'I']);

/** Angle in the middle of the widest gap between directions. */
function widestGap(angles: readonly number[]): number {
  if (angles.length === 0) return 0;
  const sorted = [...angles].sort((a, b) => a - b);
  let best = 0;
  let widest = -1;
  sorted.forEach((angle, index) => {
    const next = index + 1 < sorted.length ? (sorted[index + 1] ?? 0) : (sorted[0] ?? 0) + 2 * Math.PI;
    if (next - angle > widest) {
      widest = next - angle;
      best = angle + (next - angle) / 2;
    }
  });
  return best;
}

/** Smallest angle between a direction and the taken ones. */
const clearance = (angle: number, taken: readonly number[]): number =>
  taken.reduce((least, other) => Math.min(least, angleBetween(angle, other)), Math.PI);

/** Beside the letter wherever a bond leaves room there, as in hand drawing; else above or below. */
function hydrogenSide(angles: readonly number[]): Side {
  const room = (side: Side) => clearance(SIDE_ANGLES[side], angles);
  const beside: Side = room('right') >= room('left') - 1e-6 ? 'right' : 'left';
  if (room(beside) > 0.85) return beside;
  const stacked: Side = room('up') >= room('down') ? 'up' : 'down';
  return room(stacked) > room(beside) ? stacked : beside;
}

/** Where charges go, best place first: upper right as in print, then whatever bonds and hydrogens leave free. */
const CHARGE_ANGLES = [-45, -90, -135, 45, 90, 135].map((degrees) => (degrees * Math.PI) / 180);

function chargeAngle(taken: readonly number[]): number {
  const free = CHARGE_ANGLES.find((angle) => clearance(angle, taken) > 0.75);
  if (free !== undefined) return free;
  return CHARGE_ANGLES.reduce((best, angle) => (clearance(angle, taken) > clearance(best, taken) + 1e-6 ? angle : best));
}

/** Centre of the smallest ring around a bond, aromatic rings first; null outside rings. */
function ringCentre(molecule: Molecule, bond: number, at: (atom: number) => Point): Point | null {
  const rings = molecule.getRingSet();
  let chosen = -1;
  for (let ring = 0; ring < rings.getSize(); ring++) {
    if (!rings.isBondMember(ring, bond)) continue;
    const isBetter =
      chosen < 0 ||
      (rings.isAromatic(ring) && !rings.isAromatic(chosen)) ||
      (rings.isAromatic(ring) === rings.isAromatic(chosen) && rings.getRingSize(ring) < rings.getRingSize(chosen));
    if (isBetter) chosen = ring;
  }
  if (chosen < 0) return null;
  const members = rings.getRingAtoms(chosen).map(at);
  return {
    x: members.reduce((sum, point) => sum + point.x, 0) / members.length,
    y: members.reduce((sum, point) => sum + point.y, 0) / members.length,
  };
}

/**
 * Lays a structure out for drawing: positions, letters, lines. Pure geometry; colours are the drawing's business.
 *
 * @param smiles - one structure, `*` for attachment points.
 * @throws Error when the text is no SMILES.
 */
export function depictStructure(smiles: string): Depiction {
  const molecule = parseStructure(smiles);
  const count = molecule.getAllAtoms();
  const scale = BOND / (molecule.getAverageBondLength(false) || 1);
  const points: Point[] = Array.from({ length: count }, (_, atom) => ({
    x: molecule.getAtomX(atom) * scale,
    y: molecule.getAtomY(atom) * scale,
  }));
  const at = (atom: number): Point => points[atom] ?? { x: 0, y: 0 };

  const atoms: DrawnAtom[] = points.map((point, atom) => {
    const symbol = molecule.getAtomLabel(atom);
    const isAttachment = molecule.getAtomicNo(atom) === ATTACHMENT;
    const angles: number[] = [];
    for (let i = 0; i < molecule.getAllConnAtoms(atom); i++) {
      const other = at(molecule.getConnAtom(atom, i));
      angles.push(Math.atan2(other.y - point.y, other.x - point.x));
    }
    const charge = molecule.getAtomCharge(atom);
    const hydrogens = molecule.getImplicitHydrogens(atom);
    const isLabelled = !isAttachment && (symbol !== 'C' || charge !== 0 || angles.length === 0);
    // Alone, these follow their hydrogens, as in H₂O and HCl.
    const side = angles.length === 0 && HYDROGEN_FIRST.has(symbol) ? 'left' : hydrogenSide(angles);
    // Letters take room like bonds do: first the hydrogens, then the charge, then the number.
    if (isLabelled && hydrogens > 0) angles.push(SIDE_ANGLES[side]);
    const chargeDirection = chargeAngle(angles);
    if (charge !== 0) angles.push(chargeDirection);
    const gap = widestGap(angles);
    return {
      ...point,
      symbol,
      name: isAttachment ? 'attachment point' : (NAMES[symbol] ?? symbol),
      isAttachment,
      isLabelled,
      hydrogens,
      hydrogenSide: side,
      charge,
      chargeDirection: { x: Math.cos(chargeDirection), y: Math.sin(chargeDirection) },
      gap: { x: Math.cos(gap), y: Math.sin(gap) },
    };
  });

  const bonds: DrawnBond[] = Array.from({ length: molecule.getAllBonds() }, (_, bond) => {
    const begin = molecule.getBondAtom(0, bond);
    const end = molecule.getBondAtom(1, bond);
    return { begin, end, lines: bondLines(molecule, bond, atoms, at) };
  });

  return { atoms, bonds, bounds: boundsOf(atoms) };
}

function bondLines(
  molecule: Molecule,
  bond: number,
  atoms: readonly DrawnAtom[],
  at: (atom: number) => Point,
): Array<readonly [Point, Point]> {
  const begin = molecule.getBondAtom(0, bond);
  const end = molecule.getBondAtom(1, bond);
  const a = at(begin);
  const b = at(end);
  const length = Math.hypot(b.x - a.x, b.y - a.y) || 1;
  const along = { x: (b.x - a.x) / length, y: (b.y - a.y) / length };
  const across = { x: -along.y, y: along.x };
  const trimBegin = atoms[begin]?.isLabelled === true ? LABEL_RADIUS : 0;
  const trimEnd = atoms[end]?.isLabelled === true ? LABEL_RADIUS : 0;
  const line = (offset: number, inset = 0): readonly [Point, Point] => {
    // An inner line stops where letters already made room.
    const from = Math.max(trimBegin, inset);
    const to = length - Math.max(trimEnd, inset);
    return [
      { x: a.x + along.x * from + across.x * offset, y: a.y + along.y * from + across.y * offset },
      { x: a.x + along.x * to + across.x * offset, y: a.y + along.y * to + across.y * offset },
    ];
  };
  const order = molecule.getBondOrder(bond);
  if (order === 3) return [line(0), line(TRIPLE_GAP), line(-TRIPLE_GAP)];
  if (order !== 2) return [line(0)];
  const centre = ringCentre(molecule, bond, at);
  if (centre !== null) {
    const side = Math.sign((centre.x - a.x) * across.x + (centre.y - a.y) * across.y) || 1;
    return [line(0), line(side * DOUBLE_GAP, BOND * 0.13)];
  }
  const neighbourSide = [begin, end].reduce((sum, atom) => {
    for (let i = 0; i < molecule.getAllConnAtoms(atom); i++) {
      const other = molecule.getConnAtom(atom, i);
      if (other === begin || other === end) continue;
      sum += Math.sign(Math.round(((at(other).x - a.x) * across.x + (at(other).y - a.y) * across.y) * 100));
    }
    return sum;
  }, 0);
  const isTerminal = molecule.getAllConnAtoms(begin) === 1 || molecule.getAllConnAtoms(end) === 1;
  if (isTerminal || neighbourSide === 0) return [line(DOUBLE_GAP / 2), line(-DOUBLE_GAP / 2)];
  return [line(0), line(Math.sign(neighbourSide) * DOUBLE_GAP, BOND * 0.13)];
}

function boundsOf(atoms: readonly DrawnAtom[]): Depiction['bounds'] {
  const box = { left: Infinity, top: Infinity, right: -Infinity, bottom: -Infinity };
  for (const atom of atoms) {
    const letters = atom.isLabelled ? 9 : 4;
    const side = (wanted: Side) =>
      atom.isLabelled && atom.hydrogens > 0 && atom.hydrogenSide === wanted
        ? 14
        : atom.isLabelled && wanted === 'right' && atom.charge !== 0
          ? 8
          : 0;
    box.left = Math.min(box.left, atom.x - letters - side('left'));
    box.right = Math.max(box.right, atom.x + letters + side('right'));
    box.top = Math.min(box.top, atom.y - letters - side('up'));
    box.bottom = Math.max(box.bottom, atom.y + letters + side('down'));
  }
  if (atoms.length === 0) return { left: 0, top: 0, width: BOND, height: BOND };
  return { left: box.left, top: box.top, width: box.right - box.left, height: box.bottom - box.top };
}
