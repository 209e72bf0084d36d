import { elementOf, findElement } from './elements.js';
import { QUERY_BONDS, readSmiles, SmilesError, type WrittenSmiles } from './smiles-reader.js';
import { listSmallAromaticRings, type SmallRingAtom } from './small-aromatic-rings.js';

/** One atom of a substructure query. */
export interface QueryAtom {
  /** 0 = any heavy atom. */
  readonly atomicNumber: number;
  /** True for lower case (and rings that are aromatic as drawn); null = either. */
  readonly isAromatic: boolean | null;
  /** Exact number of hydrogens when the pattern gives it in brackets; null = any. */
  readonly hydrogens: number | null;
  /** At least so many hydrogens (`[H]` written out). */
  readonly minHydrogens: number;
  /** Exact charge when written; null = any. */
  readonly charge: number | null;
}
export type QueryBondKind = 'single' | 'double' | 'triple' | 'aromatic' | 'singleOrAromatic' | 'any';
export interface QueryBond {
  readonly from: number;
  readonly to: number;
  readonly kind: QueryBondKind;
}
export interface QueryGraph {
  readonly atoms: readonly QueryAtom[];
  readonly bonds: readonly QueryBond[];
}

export type ExcludedPatternResult =
  | { readonly kind: 'query'; readonly query: QueryGraph; readonly notes: readonly string[] }
  /** Uses SMARTS beyond plain SMILES: a library has to match it. */
  | { readonly kind: 'smarts' }
  | { readonly kind: 'fault'; readonly message: string; readonly position: number };

/**
 * Signs of SMARTS that a plain SMILES never has: logic, atomic numbers, counts of rings, degree or valence in brackets,
 * any-(aliphatic) atoms, ring bonds.
 */
const SMARTS_SIGNS = [
  /[,;&!$]/,
  /\[[^\]]*#\d/,
  /\[[^\]]*[XDRvxrh]\d/,
  /\[(?:[^\]]*[^A-Za-z\]])?[XRrvxhaA]\]/,
  /(?:^|[^A-Za-z])[aA](?:$|[^a-z])/,
  /@[-=#~]|[-=#~]@/,
];
const looksLikeSmarts = (text: string): boolean => SMARTS_SIGNS.some((sign) => sign.test(text));

function areBracketsBalanced(text: string): boolean {
  const open: string[] = [];
  for (const character of text) {
    if (character === '[' || character === '(') open.push(character);
    else if (character === ']' && open.pop() !== '[') return false;
    else if (character === ')' && open.pop() !== '(') return false;
  }
  return open.length === 0;
}

interface MutableAtom {
  atomicNumber: number;
  isAromatic: boolean | null;
  hydrogens: number | null;
  minHydrogens: number;
  charge: number | null;
  readonly position: number;
  readonly writtenHydrogens: number;
}
interface MutableBond {
  readonly from: number;
  readonly to: number;
  kind: QueryBondKind;
}

const leastOrder = (kind: QueryBondKind): number => (kind === 'double' ? 2 : kind === 'triple' ? 3 : 1);

/** Brings the usual drawings of nitro groups and sulfoxides to the form in which structures are held. */
function unifyChargeDrawings(atoms: readonly MutableAtom[], bonds: readonly MutableBond[]): void {
  const bondsOf = (atom: number): MutableBond[] => bonds.filter(({ from, to }) => from === atom || to === atom);
  atoms.forEach((atom, i) => {
    const own = bondsOf(i);
    const partner = (bond: MutableBond): number => (bond.from === i ? bond.to : bond.from);
    const used = own.reduce((sum, { kind }) => sum + leastOrder(kind), 0);
    if (atom.atomicNumber === 7 && atom.charge === null && used >= 4) {
      const oxide = own.find(
        (bond) => bond.kind === 'double' && atoms[partner(bond)]!.atomicNumber === 8 && bondsOf(partner(bond)).length === 1,
      );
      if (oxide !== undefined) {
        oxide.kind = 'single';
        atom.charge = 1;
        atoms[partner(oxide)]!.charge = -1;
      }
    }
    if ((atom.atomicNumber === 16 || atom.atomicNumber === 15) && (atom.charge ?? 0) > 0) {
      for (const bond of own) {
        const other = atoms[partner(bond)]!;
        if ((atom.charge ?? 0) <= 0 || other.charge !== -1 || bond.kind !== 'single') continue;
        bond.kind = 'double';
        atom.charge = atom.charge! - 1;
        other.charge = null;
      }
      if (atom.charge === 0) atom.charge = null;
    }
  });
}

/** Rings drawn with alternating bonds in capitals mean the aromatic ring, whatever form a structure is held in. */
function markDrawnAromaticRings(atoms: readonly MutableAtom[], bonds: readonly MutableBond[]): void {
  const ringAtoms: SmallRingAtom[] = atoms.map((atom) => ({ atomicNumber: atom.atomicNumber, charge: atom.charge ?? 0, neighbours: [] }));
  for (const { from, to, kind } of bonds) {
    const order = leastOrder(kind);
    ringAtoms[from]!.neighbours.push({ atom: to, order });
    ringAtoms[to]!.neighbours.push({ atom: from, order });
  }
  for (const ring of listSmallAromaticRings(ringAtoms)) {
    ring.forEach((atom, i) => {
      const next = ring[(i + 1) % ring.length]!;
      atoms[atom]!.isAromatic = true;
      const bond = bonds.find(({ from, to }) => (from === atom && to === next) || (from === next && to === atom));
      if (bond !== undefined && bond.kind !== 'any') bond.kind = 'aromatic';
    });
  }
}

function buildQuery(written: WrittenSmiles): QueryGraph {
  const atoms: MutableAtom[] = [];
  const place = new Int32Array(written.atoms.length).fill(-1);
  written.atoms.forEach((atom, i) => {
    if (atom.symbol === 'H') return;
    place[i] = atoms.length;
    atoms.push({
      atomicNumber: atom.symbol === '*' ? 0 : findElement(atom.symbol)!.atomicNumber,
      isAromatic: atom.isAromatic ? true : null,
      hydrogens: atom.isBracketed && atom.bracketHydrogens > 0 ? atom.bracketHydrogens : null,
      minHydrogens: 0,
      charge: atom.charge === 0 ? null : atom.charge,
      position: atom.position,
      writtenHydrogens: atom.bracketHydrogens,
    });
  });
  if (!atoms.some(({ atomicNumber }) => atomicNumber > 0)) throw new SmilesError('expected at least one named atom in the pattern', 0);
  const bonds: MutableBond[] = [];
  for (const bond of written.bonds) {
    const from = place[bond.from]!;
    const to = place[bond.to]!;
    if (from < 0 || to < 0) {
      const heavy = Math.max(from, to);
      if (heavy < 0 || (bond.order !== null && bond.order !== 1))
        throw new SmilesError('hydrogen needs exactly one single bond, to a heavy atom', bond.position);
      atoms[heavy]!.minHydrogens++;
      continue;
    }
    const areAromatic = atoms[from]!.isAromatic === true && atoms[to]!.isAromatic === true;
    const kind: QueryBondKind =
      bond.order === null
        ? areAromatic
          ? 'singleOrAromatic'
          : 'single'
        : bond.order === 1
          ? 'single'
          : bond.order === 2
            ? 'double'
            : bond.order === 3
              ? 'triple'
              : bond.order;
    bonds.push({ from, to, kind });
  }
  unifyChargeDrawings(atoms, bonds);
  markDrawnAromaticRings(atoms, bonds);
  atoms.forEach((atom, i) => {
    if (atom.atomicNumber === 0) return;
    const { name, valences } = elementOf(atom.atomicNumber);
    const most = valences[valences.length - 1]! + Math.max(atom.charge ?? 0, 0);
    const used = bonds.reduce(
      (sum, bond) => sum + (bond.from === i || bond.to === i ? leastOrder(bond.kind) : 0),
      Math.max(atom.writtenHydrogens, atom.minHydrogens),
    );
    if (used > most)
      throw new SmilesError(
        `${name} has ${used} bonds, at most ${most} are possible, so the pattern never matches; remove bonds`,
        atom.position,
      );
  });
  return {
    atoms: atoms.map(({ atomicNumber, isAromatic, hydrogens, minHydrogens, charge }) => ({
      atomicNumber,
      isAromatic,
      hydrogens,
      minHydrogens,
      charge,
    })),
    bonds: bonds.map(({ from, to, kind }) => ({ from, to, kind })),
  };
}

/**
 * Reads an excluded fragment as a substructure query.
 *
 * Plain SMILES is read as a drawn piece: a capital letter is the element in or outside aromatic rings, lower case an
 * aromatic atom, `-` (or nothing) a single, `=` a double, `:` an aromatic bond, `~` any bond, `*` any heavy atom;
 * nothing between two lower-case atoms is single or aromatic. Open valences may carry anything; `[OH]`, `[CH2]` fix
 * the number of hydrogens, `[N+]` the charge. Rings drawn with alternating bonds are aromatic. Text that uses SMARTS
 * beyond that is left to a library.
 */
export function parseExcludedPattern(text: string): ExcludedPatternResult {
  const pattern = text.trim();
  try {
    const written = readSmiles(pattern, QUERY_BONDS);
    return { kind: 'query', query: buildQuery(written), notes: written.hadStereo ? ['stereo dropped'] : [] };
  } catch (fault) {
    if (!(fault instanceof SmilesError)) throw fault;
    if (looksLikeSmarts(pattern) && areBracketsBalanced(pattern)) return { kind: 'smarts' };
    return { kind: 'fault', message: fault.message, position: fault.position };
  }
}
