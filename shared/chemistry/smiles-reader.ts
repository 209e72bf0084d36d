import { findElement, SUPPORTED_SYMBOLS } from './elements.js';

/** What the text of a SMILES says, before any chemistry: atoms and bonds as written, `*` and `[H]` included. */
export interface WrittenAtom {
  /** Element symbol in its usual capitals; `*` for an attachment point. */
  readonly symbol: string;
  /** Lower case in the text. */
  readonly isAromatic: boolean;
  readonly isBracketed: boolean;
  /** Hydrogens given in the bracket; 0 outside brackets. */
  readonly bracketHydrogens: number;
  readonly charge: number;
  /** Offset of the atom in the text. */
  readonly position: number;
}

/** `null` order: no symbol in the text; `any` is the `~` of query patterns. */
export type WrittenOrder = 1 | 2 | 3 | 'aromatic' | 'any' | null;
export interface WrittenBond {
  readonly from: number;
  readonly to: number;
  readonly order: WrittenOrder;
  readonly position: number;
}
export interface WrittenSmiles {
  readonly atoms: readonly WrittenAtom[];
  readonly bonds: readonly WrittenBond[];
  readonly hadStereo: boolean;
}

/** Thrown inside the parser only; `parseSmiles` turns it into a result. `position` counts from 0. */
export class SmilesError extends Error {
  constructor(
    message: string,
    readonly position: number,
  ) {
    super(`position ${position + 1}: ${message}`);
    this.name = 'SmilesError';
  }
}

const ELEMENT_LIST = SUPPORTED_SYMBOLS.join(' ');
const STEREO_MARK = /@(?:@|(?:TH|AL|SP|TB|OH)\d{1,2})?/y;
const PLAIN_ATOM = /Cl|Br|[CNOPSFI]|[cnops]/y;
/** Longer text is refused: graphs are matrices, and searches over them go as deep as there are atoms. */
const MAX_LENGTH = 2000;

export const PLAIN_BONDS = '-=#:/\\';
export const QUERY_BONDS = `${PLAIN_BONDS}~`;

interface OpenRing {
  readonly atom: number;
  readonly order: WrittenOrder;
  readonly position: number;
}

function unknownElement(symbol: string, position: number): SmilesError {
  return new SmilesError(`element "${symbol}" is not supported; use ${ELEMENT_LIST}`, position);
}

/** Reads one bracket atom that starts at `start`; returns it with the offset behind the closing bracket. */
function readBracketAtom(text: string, start: number): { atom: WrittenAtom; end: number; hadStereo: boolean } {
  const close = text.indexOf(']', start);
  if (close < 0) throw new SmilesError('bracket is not closed; add ]', start);
  let at = start + 1;
  const take = (pattern: RegExp): string | null => {
    pattern.lastIndex = at;
    const match = pattern.exec(text);
    if (match === null || at + match[0].length > close) return null;
    at += match[0].length;
    return match[0];
  };
  if (take(/\d+/y) !== null) throw new SmilesError('isotope labels are not supported; remove the mass number', start + 1);
  const written = take(/\*|[A-Z][a-z]?|[a-z][a-z]?/y);
  if (written === null) throw new SmilesError('expected an element symbol behind [', at);
  const isAromatic = /^[a-z]/.test(written);
  if (isAromatic && !['c', 'n', 'o', 'p', 's'].includes(written)) {
    throw new SmilesError(`aromatic atom "${written}" is not supported; lower case is possible for c n o p s`, start + 1);
  }
  const symbol = isAromatic ? written.toUpperCase() : written;
  if (symbol === 'D' || symbol === 'T') throw new SmilesError('isotopes are not supported; write H', start + 1);
  if (symbol !== '*' && findElement(symbol) === null) throw unknownElement(symbol, start + 1);
  const hadStereo = take(STEREO_MARK) !== null;
  const hydrogenPosition = at;
  const hydrogenText = take(/H\d?/y);
  const bracketHydrogens = hydrogenText === null ? 0 : hydrogenText === 'H' ? 1 : Number(hydrogenText.slice(1));
  const chargePosition = at;
  const chargeText = take(/\+\d|-\d|\++|-+/y);
  let charge = 0;
  if (chargeText !== null) {
    const size = /\d/.test(chargeText) ? Number(chargeText.slice(1)) : chargeText.length;
    charge = chargeText.startsWith('+') ? size : -size;
  }
  const mapPosition = at;
  const hasMap = take(/:\d{1,4}/y) !== null;
  if (hasMap && symbol !== '*') throw new SmilesError('atom numbers belong only on attachment points; remove the :n', mapPosition);
  if (at !== close)
    throw new SmilesError(
      `"${text.slice(at, close)}" is not understood inside brackets; expected element, H count and charge, as in [nH] or [N+]`,
      at,
    );
  if (symbol === '*' && (bracketHydrogens > 0 || charge !== 0)) {
    throw new SmilesError(
      'an attachment point takes no hydrogens and no charge; write * or [*:1]',
      hydrogenText !== null ? hydrogenPosition : chargePosition,
    );
  }
  return { atom: { symbol, isAromatic, isBracketed: true, bracketHydrogens, charge, position: start }, end: close + 1, hadStereo };
}

/** Complains about a character that starts neither atom, bond, ring closure nor branch. */
function unexpectedCharacter(text: string, at: number): SmilesError {
  const rest = text.slice(at);
  if (rest.startsWith('.')) return new SmilesError('several components are not supported; remove the part before or behind the dot', at);
  if (/^\s/.test(rest)) return new SmilesError('a SMILES contains no spaces; remove the space and what follows', at);
  if (rest.startsWith('Si')) return new SmilesError('silicon is written in brackets: [Si], [SiH3]', at);
  if (/^H/.test(rest)) return new SmilesError('hydrogen outside brackets is implied; leave it out or write [H]', at);
  if (/^[>?!,;&~$]/.test(rest)) return new SmilesError(`"${rest[0]}" is a reaction or query symbol; expected a plain SMILES`, at);
  const symbol = /^[A-Z][a-z]?|^[a-z]/.exec(rest);
  if (symbol !== null) return unknownElement(symbol[0], at);
  return new SmilesError(`"${rest[0]}" is not understood here; expected an atom, a bond or a ring closure`, at);
}

/**
 * Reads the text of a SMILES strictly: every symbol must be understood, every ring and branch closed, no pair of
 * atoms bonded twice. Elements are checked, valences are not.
 *
 * @param bondSymbols - bond symbols to understand: those of a structure, or with `~` those of a query pattern.
 * @throws SmilesError with the offset of the first fault.
 * @see OpenSMILES specification 1.0, section 3 (grammar); boron, wildcards with several bonds, components and
 * reactions are left out on purpose.
 */
export function readSmiles(text: string, bondSymbols = PLAIN_BONDS): WrittenSmiles {
  if (text.length > MAX_LENGTH)
    throw new SmilesError(`the SMILES is longer than ${MAX_LENGTH} characters; expected one molecule`, MAX_LENGTH);
  const atoms: WrittenAtom[] = [];
  const bonds: WrittenBond[] = [];
  const branches: { atom: number; position: number }[] = [];
  const openRings = new Map<number, OpenRing>();
  const bonded = new Set<string>();
  let hadStereo = false;
  let previous = -1;
  let order: WrittenOrder = null;
  let orderPosition = -1;

  const connect = (from: number, to: number, bondOrder: WrittenOrder, position: number): void => {
    if (from === to) throw new SmilesError('an atom cannot close a ring with itself', position);
    const key = from < to ? `${from}-${to}` : `${to}-${from}`;
    if (bonded.has(key)) throw new SmilesError('these two atoms are bonded already; use = or # for a multiple bond', position);
    bonded.add(key);
    bonds.push({ from, to, order: bondOrder, position });
  };
  const addAtom = (atom: WrittenAtom): void => {
    atoms.push(atom);
    const index = atoms.length - 1;
    if (previous >= 0) connect(previous, index, order, orderPosition >= 0 ? orderPosition : atom.position);
    else if (orderPosition >= 0)
      throw new SmilesError(
        'a bond needs an atom before it; an attachment point is written *= before or =* behind its atom',
        orderPosition,
      );
    previous = index;
    order = null;
    orderPosition = -1;
  };
  const closeRing = (ring: number, position: number): void => {
    if (previous < 0) throw new SmilesError('a ring closure needs an atom before it', position);
    const open = openRings.get(ring);
    if (open === undefined) openRings.set(ring, { atom: previous, order, position });
    else {
      if (open.order !== null && order !== null && open.order !== order) {
        throw new SmilesError(`ring closure ${ring} has two different bond orders; give it once`, position);
      }
      connect(open.atom, previous, open.order ?? order, position);
      openRings.delete(ring);
    }
    order = null;
    orderPosition = -1;
  };

  let at = 0;
  while (at < text.length) {
    const character = text.charAt(at);
    PLAIN_ATOM.lastIndex = at;
    const plain = text.startsWith('Si', at) ? null : PLAIN_ATOM.exec(text);
    if (plain !== null) {
      const symbol = plain[0];
      const isAromatic = /^[a-z]/.test(symbol);
      addAtom({
        symbol: isAromatic ? symbol.toUpperCase() : symbol,
        isAromatic,
        isBracketed: false,
        bracketHydrogens: 0,
        charge: 0,
        position: at,
      });
      at += symbol.length;
    } else if (character === '*') {
      addAtom({ symbol: '*', isAromatic: false, isBracketed: false, bracketHydrogens: 0, charge: 0, position: at });
      at++;
    } else if (character === '[') {
      const bracket = readBracketAtom(text, at);
      hadStereo ||= bracket.hadStereo;
      addAtom(bracket.atom);
      at = bracket.end;
    } else if (bondSymbols.includes(character)) {
      if (orderPosition >= 0) throw new SmilesError('two bond symbols in a row; keep one', at);
      order = character === '=' ? 2 : character === '#' ? 3 : character === ':' ? 'aromatic' : character === '~' ? 'any' : 1;
      if (character === '/' || character === '\\') hadStereo = true;
      orderPosition = at;
      at++;
    } else if (character >= '0' && character <= '9') {
      closeRing(Number(character), at);
      at++;
    } else if (character === '%') {
      const digits = /^%(\d\d)/.exec(text.slice(at, at + 3));
      if (digits === null) throw new SmilesError('% needs two digits, as in %12', at);
      closeRing(Number(digits[1]), at);
      at += 3;
    } else if (character === '(') {
      if (previous < 0) throw new SmilesError('a branch needs an atom before it', at);
      if (orderPosition >= 0) throw new SmilesError('the bond symbol belongs inside the branch, behind (', orderPosition);
      if (text[at + 1] === ')') throw new SmilesError('the branch is empty; remove ()', at);
      if (/[\d%(]/.test(text.charAt(at + 1))) throw new SmilesError('a branch begins with an atom or a bond', at + 1);
      branches.push({ atom: previous, position: at });
      at++;
    } else if (character === ')') {
      const branch = branches.pop();
      if (branch === undefined) throw new SmilesError(') without (; remove it', at);
      if (orderPosition >= 0) throw new SmilesError('a bond leads nowhere; add the atom behind it', orderPosition);
      previous = branch.atom;
      at++;
    } else throw unexpectedCharacter(text, at);
  }

  if (atoms.length === 0) throw new SmilesError('expected a SMILES such as *C(=O)OC', 0);
  const branch = branches.pop();
  if (branch !== undefined) throw new SmilesError('branch is not closed; add )', branch.position);
  if (orderPosition >= 0) throw new SmilesError('a bond leads nowhere; add the atom behind it, * for an attachment point', orderPosition);
  for (const [ring, open] of openRings)
    throw new SmilesError(`ring ${ring} is not closed; repeat its digit at the atom that closes it`, open.position);
  return { atoms, bonds, hadStereo };
}
