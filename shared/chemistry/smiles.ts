import type { MolecularGraph } from '../types/molecular-graph.js';
import { elementOf, findElement } from './elements.js';
import { findPerfectMatching } from './kekule.js';
import { readSmiles, SmilesError, type WrittenSmiles } from './smiles-reader.js';

/** A bond to something outside the written atoms: the `*` of a fragment. */
export interface Attachment {
  readonly atom: number;
  readonly order: 1 | 2 | 3;
}
export interface ParsedSmiles {
  readonly ok: true;
  /**
   * Heavy atoms in the order of the text; `*` and `[H]` are not atoms. One Kekulé form. Oxygens that a lone N⁺ beside `*`
   * needs follow at the end.
   */
  readonly graph: MolecularGraph;
  /** Length n, 1 = written in lower case. */
  readonly aromaticAtoms: Uint8Array;
  /** n × n, row-major, symmetric, 1 = bond of a ring written in lower case. */
  readonly aromaticBonds: Uint8Array;
  readonly attachments: readonly Attachment[];
  /** What was changed or left out on reading, for people. */
  readonly notes: readonly string[];
}
export interface SmilesFault {
  readonly ok: false;
  /** Names the position (from 1) and the cure. */
  readonly message: string;
  /** Offset in the text, from 0. */
  readonly position: number;
}
export type SmilesResult = ParsedSmiles | SmilesFault;

export const STEREO_NOTE = 'stereo dropped';

/** Valences of an atom with a charge; elements and charges not listed are refused. */
const CHARGED_VALENCES: Readonly<Record<string, number>> = { 'C-1': 3, N1: 4, 'N-1': 2, O1: 3, 'O-1': 1, 'S-1': 1 };

/** Working copy of a structure while it is checked; orders are per bond, aromatic bonds still open. */
interface Draft {
  readonly symbols: string[];
  readonly positions: number[];
  readonly isAromatic: boolean[];
  readonly isBracketed: boolean[];
  readonly hydrogens: number[];
  readonly charges: number[];
  readonly attachments: { atom: number; order: 1 | 2 | 3; position: number }[];
  readonly bonds: { a: number; b: number; order: 1 | 2 | 3 | 'aromatic'; position: number }[];
  readonly bondsOf: number[][];
}

const otherEnd = (bond: { a: number; b: number }, atom: number): number => (bond.a === atom ? bond.b : bond.a);

/** Folds `[H]` and `*` away and numbers the heavy atoms. */
function draftFrom(written: WrittenSmiles): Draft {
  const { atoms, bonds } = written;
  const index = new Int32Array(atoms.length).fill(-1);
  const degree = new Int32Array(atoms.length);
  for (const bond of bonds) {
    degree[bond.from]!++;
    degree[bond.to]!++;
  }
  const draft: Draft = {
    symbols: [],
    positions: [],
    isAromatic: [],
    isBracketed: [],
    hydrogens: [],
    charges: [],
    attachments: [],
    bonds: [],
    bondsOf: [],
  };
  atoms.forEach((atom, i) => {
    if (atom.symbol === '*') {
      if (degree[i] !== 1)
        throw new SmilesError(
          'an attachment point needs exactly one bond, to an atom of the fragment; use several * for several attachments',
          atom.position,
        );
      return;
    }
    if (atom.symbol === 'H') {
      if (atom.charge !== 0) throw new SmilesError('charged hydrogen is not supported; write [H] or leave it out', atom.position);
      if (degree[i] !== 1 || atom.bracketHydrogens > 0)
        throw new SmilesError('hydrogen needs exactly one bond, to a heavy atom', atom.position);
      return;
    }
    index[i] = draft.symbols.length;
    draft.symbols.push(atom.symbol);
    draft.positions.push(atom.position);
    draft.isAromatic.push(atom.isAromatic);
    draft.isBracketed.push(atom.isBracketed);
    draft.hydrogens.push(atom.bracketHydrogens);
    draft.charges.push(atom.charge);
    draft.bondsOf.push([]);
  });
  if (draft.symbols.length === 0) throw new SmilesError('expected at least one heavy atom (anything but H)', 0);

  for (const bond of bonds) {
    const a = index[bond.from]!;
    const b = index[bond.to]!;
    if (bond.order === 'any') throw new SmilesError('a structure has no ~ bonds; write - = or #', bond.position);
    if (a >= 0 && b >= 0) {
      draft.bondsOf[a]!.push(draft.bonds.length);
      draft.bondsOf[b]!.push(draft.bonds.length);
      const areAromatic = draft.isAromatic[a]! && draft.isAromatic[b]!;
      if (bond.order === 'aromatic' && !areAromatic)
        throw new SmilesError('an aromatic bond joins two lower-case atoms; write - or =', bond.position);
      draft.bonds.push({
        a,
        b,
        order: bond.order ?? (areAromatic ? 'aromatic' : 1),
        position: bond.order === 'aromatic' ? bond.position : -1,
      });
      continue;
    }
    const heavy = Math.max(a, b);
    const other = atoms[a >= 0 ? bond.to : bond.from]!;
    if (heavy < 0) {
      const message =
        other.symbol === '*' || atoms[bond.from]!.symbol === '*'
          ? 'an attachment point needs a bond to a heavy atom'
          : 'expected at least one heavy atom (anything but H)';
      throw new SmilesError(message, other.position);
    }
    if (bond.order === 'aromatic') throw new SmilesError('this bond cannot be aromatic; leave the : out', bond.position);
    if (other.symbol === 'H') {
      if (bond.order !== null && bond.order !== 1) throw new SmilesError('hydrogen has a single bond only', bond.position);
      draft.hydrogens[heavy]!++;
    } else draft.attachments.push({ atom: heavy, order: bond.order ?? 1, position: other.position });
  }
  return draft;
}

/**
 * Finds bonds in no ring of the part that `includes` admits: bridges, by depth-first search.
 *
 * @see Tarjan, Inf. Process. Lett. 1974, 2, 160.
 */
function findBridges(draft: Draft, includes: (bondIndex: number) => boolean): Set<number> {
  const n = draft.symbols.length;
  const entry = new Int32Array(n).fill(-1);
  const low = new Int32Array(n);
  const bridges = new Set<number>();
  let clock = 0;
  const visit = (atom: number, through: number): void => {
    entry[atom] = low[atom] = clock++;
    for (const bondIndex of draft.bondsOf[atom]!) {
      if (bondIndex === through || !includes(bondIndex)) continue;
      const to = otherEnd(draft.bonds[bondIndex]!, atom);
      if (entry[to] === -1) {
        visit(to, bondIndex);
        low[atom] = Math.min(low[atom]!, low[to]!);
        if (low[to]! > entry[atom]!) bridges.add(bondIndex);
      } else low[atom] = Math.min(low[atom]!, entry[to]!);
    }
  };
  for (let atom = 0; atom < n; atom++) if (entry[atom] === -1) visit(atom, -1);
  return bridges;
}

/**
 * Tells which bonds belong to rings of lower-case atoms. An unmarked bond between two such rings (biphenyl) is none of
 * them; whether it is single or double, the alternation decides, as it can be double only between two odd halves.
 */
function findAromaticRingBonds(draft: Draft): Set<number> {
  const chainBonds = findBridges(draft, () => true);
  draft.isAromatic.forEach((isAromatic, atom) => {
    if (isAromatic && draft.bondsOf[atom]!.every((bond) => chainBonds.has(bond))) {
      throw new SmilesError(
        'lower case means an aromatic ring, and this atom is in none; write it in capitals with its double bonds',
        draft.positions[atom]!,
      );
    }
  });
  const links = findBridges(draft, (bond) => draft.bonds[bond]!.order === 'aromatic');
  return new Set(
    draft.bonds.flatMap(({ order, position }, bond) => {
      if (order !== 'aromatic') return [];
      if (!links.has(bond)) return [bond];
      if (position >= 0) throw new SmilesError('an aromatic bond lies in a ring; write - between two rings', position);
      return [];
    }),
  );
}

const orderValue = (order: 1 | 2 | 3 | 'aromatic'): number => (order === 'aromatic' ? 1 : order);

/** Valence used by bonds as written, aromatic bonds counted once, hydrogens of brackets and `[H]` included. */
function usedValence(draft: Draft, atom: number): number {
  let used = draft.hydrogens[atom]!;
  for (const bond of draft.bondsOf[atom]!) used += orderValue(draft.bonds[bond]!.order);
  for (const attachment of draft.attachments) if (attachment.atom === atom) used += attachment.order;
  return used;
}

/** Whether an atom has no other neighbour, hydrogen or attachment than the one through which it was reached. */
function isTerminal(draft: Draft, atom: number): boolean {
  return (
    draft.bondsOf[atom]!.length === 1 && draft.hydrogens[atom] === 0 && !draft.attachments.some((attachment) => attachment.atom === atom)
  );
}

/**
 * Rewrites the usual alternative drawings to one: five-bonded nitrogen to its charge-separated form (nitro, N-oxide,
 * azide, diazo), charge-separated S and P to double bonds (sulfoxide, sulfone, phosphine oxide), and X⁻–N⁺≡N to
 * X=N⁺=N⁻.
 */
function unifyChargeDrawings(draft: Draft, notes: Set<string>): void {
  const n = draft.symbols.length;
  for (let atom = 0; atom < n; atom++) {
    const partners = draft.bondsOf[atom]!.map((index) => ({ bond: draft.bonds[index]!, to: otherEnd(draft.bonds[index]!, atom) }));
    if (draft.symbols[atom] === 'N' && draft.charges[atom] === 0 && usedValence(draft, atom) + (draft.isAromatic[atom] ? 1 : 0) === 5) {
      const oxide = partners.find(
        ({ bond, to }) => bond.order === 2 && draft.symbols[to] === 'O' && draft.charges[to] === 0 && isTerminal(draft, to),
      );
      const nitride = partners.find(
        ({ bond, to }) => bond.order === 3 && draft.symbols[to] === 'N' && draft.charges[to] === 0 && isTerminal(draft, to),
      );
      const chosen = oxide ?? nitride;
      if (chosen !== undefined) {
        chosen.bond.order = oxide !== undefined ? 1 : 2;
        draft.charges[atom] = 1;
        draft.charges[chosen.to] = -1;
        notes.add('five-bonded nitrogen read as its charge-separated form');
      }
    }
    if ((draft.symbols[atom] === 'S' || draft.symbols[atom] === 'P') && draft.charges[atom]! > 0) {
      for (const { bond, to } of partners) {
        if (draft.charges[atom]! > 0 && draft.charges[to] === -1 && (bond.order === 1 || bond.order === 2)) {
          bond.order = bond.order === 1 ? 2 : 3;
          draft.charges[atom]!--;
          draft.charges[to] = 0;
          notes.add('charge-separated sulfur or phosphorus read with double bonds');
        }
      }
    }
    if (draft.symbols[atom] === 'N' && draft.charges[atom] === 1 && partners.length === 2) {
      const end = partners.find(
        ({ bond, to }) => bond.order === 3 && draft.symbols[to] === 'N' && draft.charges[to] === 0 && isTerminal(draft, to),
      );
      const donor = partners.find(
        ({ bond, to }) => bond.order === 1 && draft.charges[to] === -1 && (draft.symbols[to] === 'C' || draft.symbols[to] === 'N'),
      );
      if (end !== undefined && donor !== undefined) {
        donor.bond.order = 2;
        end.bond.order = 2;
        draft.charges[donor.to] = 0;
        draft.charges[end.to] = -1;
        notes.add('azide or diazo group read as =[N+]=[N-]');
      }
    }
  }
}

/**
 * Closes N⁺ that a cut has parted from its O⁻: an attachment point with a single bond on it can only be that oxygen,
 * because nothing else brings the opposite charge (with hydrogen on the N⁺ the text is a salt). The oxygen is added behind the written atoms.
 */
function completeOxides(draft: Draft, notes: Set<string>): void {
  for (let atom = draft.symbols.length - 1; atom >= 0; atom--) {
    if (draft.symbols[atom] !== 'N' || draft.charges[atom] !== 1 || draft.hydrogens[atom]! > 0 || hasOppositeCharge(draft, atom)) continue;
    const attachment = draft.attachments.findIndex((candidate) => candidate.atom === atom && candidate.order === 1);
    if (attachment === -1) continue;
    const [{ position }] = draft.attachments.splice(attachment, 1) as [Draft['attachments'][number]];
    const oxygen = draft.symbols.push('O') - 1;
    draft.positions.push(position);
    draft.isAromatic.push(false);
    draft.isBracketed.push(true);
    draft.hydrogens.push(0);
    draft.charges.push(-1);
    draft.bondsOf.push([draft.bonds.length]);
    draft.bondsOf[atom]!.push(draft.bonds.length);
    draft.bonds.push({ a: atom, b: oxygen, order: 1, position: -1 });
    notes.add('the * on N+ read as O−, which its charge needs');
  }
}

const hasOppositeCharge = (draft: Draft, atom: number): boolean =>
  draft.bondsOf[atom]!.some((bond) => draft.charges[otherEnd(draft.bonds[bond]!, atom)]! * draft.charges[atom]! < 0);

/** Refuses every charge that is not part of a charge-separated neutral group. */
function checkCharges(draft: Draft): void {
  let total = 0;
  draft.charges.forEach((charge, atom) => {
    total += charge;
    if (charge === 0) return;
    const position = draft.positions[atom]!;
    if (CHARGED_VALENCES[`${draft.symbols[atom]}${charge}`] === undefined) {
      throw new SmilesError(
        `this charge on ${draft.symbols[atom]} is not supported; draw the neutral form (charges are possible in nitro, N-oxide, azide, isocyanide and diazo groups)`,
        position,
      );
    }
    if (!hasOppositeCharge(draft, atom)) {
      throw new SmilesError(
        'a charge needs the opposite charge on a neighbouring atom (nitro, N-oxide, azide, isocyanide, diazo); draw the neutral form of salts and ions',
        position,
      );
    }
  });
  if (total !== 0) {
    const charged = draft.charges.findIndex((charge) => Math.sign(charge) === Math.sign(total));
    throw new SmilesError(`the charges add up to ${total > 0 ? '+' : ''}${total}; draw the neutral form`, draft.positions[charged]!);
  }
}

function allowedValences(draft: Draft, atom: number): readonly number[] {
  const charge = draft.charges[atom]!;
  const symbol = draft.symbols[atom]!;
  if (charge !== 0) return [CHARGED_VALENCES[`${symbol}${charge}`]!];
  return findElement(symbol)!.valences;
}

const listValences = (valences: readonly number[]): string =>
  valences.length === 1 ? `${valences[0]}` : `${valences.slice(0, -1).join(', ')} or ${valences[valences.length - 1]}`;

/** Fills implied hydrogens, checks every valence, and tells which aromatic atoms need a double bond. */
function settleHydrogens(draft: Draft): boolean[] {
  return draft.symbols.map((symbol, atom) => {
    const used = usedValence(draft, atom);
    const valences = allowedValences(draft, atom);
    const position = draft.positions[atom]!;
    const name = findElement(symbol)!.name;
    if (draft.isAromatic[atom]) {
      if (!draft.isBracketed[atom] && symbol === 'C' && used === 2) {
        draft.hydrogens[atom]!++;
        return true;
      }
      for (const valence of valences) {
        if (valence === used + 1) return true;
        if (valence !== used) continue;
        const hasOuterDoubleBond =
          draft.bondsOf[atom]!.some((bond) => draft.bonds[bond]!.order === 2) ||
          draft.attachments.some((attachment) => attachment.atom === atom && attachment.order === 2);
        if (symbol === 'C' && draft.charges[atom] === 0 && !hasOuterDoubleBond)
          throw new SmilesError('a saturated carbon is not aromatic; write this ring in capitals', position);
        return false;
      }
      if (draft.isBracketed[atom] && used < valences[0]!)
        throw new SmilesError('radicals are not supported; give this atom its hydrogens', position);
      throw new SmilesError(
        `aromatic ${name} cannot have ${used} bonds and a place in the ring; expected ${listValences(valences)} in all`,
        position,
      );
    }
    const fitting = valences.find((valence) => valence >= used);
    if (fitting === undefined) {
      const hint = symbol === 'N' && draft.charges[atom] === 0 ? '; write nitro as [N+](=O)[O-] and N-oxides as [N+][O-]' : '';
      throw new SmilesError(
        `${name} has ${used} bonds (hydrogens included), at most ${listValences(valences)} allowed; remove bonds or hydrogens${hint}`,
        position,
      );
    }
    if (draft.isBracketed[atom]) {
      if (fitting !== used) {
        const cured = draft.hydrogens[atom]! + fitting - used;
        throw new SmilesError(
          `radicals are not supported: ${name} in brackets has ${used} of ${fitting} bonds; write all its hydrogens, as in [${symbol}H${cured > 1 ? cured : ''}]`,
          position,
        );
      }
    } else draft.hydrogens[atom]! += fitting - used;
    return false;
  });
}

/** Gives the aromatic bonds of a draft alternating orders. */
function kekulise(draft: Draft, needsDoubleBond: readonly boolean[]): void {
  const members = needsDoubleBond.flatMap((needs, atom) => (needs ? [atom] : []));
  const place = new Map(members.map((atom, i) => [atom, i]));
  const neighbours: number[][] = members.map(() => []);
  for (const bond of draft.bonds) {
    if (bond.order !== 'aromatic') continue;
    const a = place.get(bond.a);
    const b = place.get(bond.b);
    if (a === undefined || b === undefined) continue;
    neighbours[a]!.push(b);
    neighbours[b]!.push(a);
  }
  const partner = findPerfectMatching({ size: members.length, neighbours });
  if (partner === null) {
    const ring = draft.isAromatic.indexOf(true);
    const nitrogen = members.find((atom) => draft.symbols[atom] === 'N');
    const cure =
      nitrogen === undefined ? 'write the ring in capitals with its double bonds' : 'if a ring nitrogen carries hydrogen, write it as [nH]';
    throw new SmilesError(`this aromatic ring cannot be drawn with alternating double bonds; ${cure}`, draft.positions[nitrogen ?? ring]!);
  }
  for (const bond of draft.bonds) {
    if (bond.order !== 'aromatic') continue;
    const a = place.get(bond.a);
    bond.order = a !== undefined && partner[a] === place.get(bond.b) ? 2 : 1;
  }
}

function buildParsed(text: string): ParsedSmiles {
  const written = readSmiles(text);
  const notes = new Set<string>();
  if (written.hadStereo) notes.add(STEREO_NOTE);
  const draft = draftFrom(written);
  const ringBonds = findAromaticRingBonds(draft);
  unifyChargeDrawings(draft, notes);
  completeOxides(draft, notes);
  checkCharges(draft);
  const needsDoubleBond = settleHydrogens(draft);

  const n = draft.symbols.length;
  const aromaticBonds = new Uint8Array(n * n);
  for (const bond of ringBonds) {
    const { a, b } = draft.bonds[bond]!;
    aromaticBonds[a * n + b] = aromaticBonds[b * n + a] = 1;
  }
  kekulise(draft, needsDoubleBond);

  const bondOrders = new Uint8Array(n * n);
  for (const { a, b, order } of draft.bonds) bondOrders[a * n + b] = bondOrders[b * n + a] = orderValue(order);
  return {
    ok: true,
    graph: {
      atomCount: n,
      atomicNumbers: Uint8Array.from(draft.symbols, (symbol) => findElement(symbol)!.atomicNumber),
      hydrogens: Uint8Array.from(draft.hydrogens),
      charges: Int8Array.from(draft.charges),
      bondOrders,
    },
    aromaticAtoms: Uint8Array.from(draft.isAromatic, (isAromatic) => (isAromatic ? 1 : 0)),
    aromaticBonds,
    attachments: draft.attachments.map(({ atom, order }) => ({ atom, order })),
    notes: [...notes],
  };
}

/**
 * Parses a SMILES strictly into a graph of heavy atoms with hydrogen counts, in one Kekulé form.
 *
 * Accepted: H C N O S P F Cl Br I Si; `*` as attachment point; S 4 and 6, P 5 as written; charges only where each has
 * the opposite charge on a neighbour and the sum is 0. Stereo marks are dropped with a note, five-bonded nitrogen and
 * charge-separated S and P are redrawn with a note. Everything else is refused with its position and a cure.
 *
 * @param text - SMILES without surrounding space; read only.
 * @see OpenSMILES specification 1.0 (grammar, implied hydrogens); SCIENCE.md 9.1.
 */
export function parseSmiles(text: string): SmilesResult {
  try {
    return buildParsed(text);
  } catch (fault) {
    if (fault instanceof SmilesError) return { ok: false, message: fault.message, position: fault.position };
    throw fault;
  }
}

/** Counts the elements of a graph, hydrogens included, in no particular order. */
export function compositionOf(graph: MolecularGraph): ReadonlyMap<string, number> {
  const counts = new Map<string, number>();
  const add = (symbol: string, count: number): void => {
    if (count > 0) counts.set(symbol, (counts.get(symbol) ?? 0) + count);
  };
  for (let atom = 0; atom < graph.atomCount; atom++) {
    add(elementOf(graph.atomicNumbers[atom]!).symbol, 1);
    add('H', graph.hydrogens[atom]!);
  }
  return counts;
}
