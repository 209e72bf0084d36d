import { elementOf } from './elements.js';
import type { Fragment } from './fragment.js';

const BOND_SYMBOLS = ['', '', '=', '#'] as const;

/**
 * Writes a fragment as a substructure query for exclusion: the same atoms with exactly their hydrogens and charges,
 * attachment points left out. Hydroxy `*O` becomes `[OH]`, which no ether matches; as plain text it would.
 *
 * @returns SMILES with every atom in brackets; rings written in lower case stay aromatic.
 */
export function exactQueryOf({ graph, aromaticAtoms, aromaticBonds }: Pick<Fragment, 'graph' | 'aromaticAtoms' | 'aromaticBonds'>): string {
  const { atomCount: n, bondOrders } = graph;
  const placed = new Uint8Array(n);
  const closures = new Map<string, number>();
  const children: number[][] = Array.from({ length: n }, () => []);
  const key = (a: number, b: number): string => (a < b ? `${a},${b}` : `${b},${a}`);
  const walk = (atom: number, from: number): void => {
    placed[atom] = 1;
    for (let next = 0; next < n; next++) {
      if (next === from || bondOrders[atom * n + next] === 0) continue;
      if (placed[next] === 1) {
        if (!closures.has(key(atom, next))) closures.set(key(atom, next), closures.size + 1);
        continue;
      }
      children[atom]!.push(next);
      walk(next, atom);
    }
  };
  walk(0, -1);
  const bond = (a: number, b: number): string => {
    if (aromaticBonds[a * n + b] === 1) return '';
    const order = bondOrders[a * n + b]!;
    // Between two aromatic atoms an unwritten bond would be read as aromatic.
    return order === 1 && aromaticAtoms[a] === 1 && aromaticAtoms[b] === 1 ? '-' : BOND_SYMBOLS[order]!;
  };
  const write = (atom: number): string => {
    const { symbol } = elementOf(graph.atomicNumbers[atom]!);
    const hydrogens = graph.hydrogens[atom]!;
    const charge = graph.charges[atom]!;
    const hydrogenText = hydrogens === 0 ? 'H0' : hydrogens === 1 ? 'H' : `H${hydrogens}`;
    let text = `[${aromaticAtoms[atom] === 1 ? symbol.toLowerCase() : symbol}${hydrogenText}${charge > 0 ? '+' : charge < 0 ? '-' : ''}]`;
    for (const [pair, number] of closures) {
      const [a, b] = pair.split(',').map(Number) as [number, number];
      if (a === atom || b === atom) text += `${bond(a, b)}${number < 10 ? number : `%${number}`}`;
    }
    const list = children[atom]!;
    list.forEach((next, at) => {
      const branch = `${bond(atom, next)}${write(next)}`;
      text += at === list.length - 1 ? branch : `(${branch})`;
    });
    return text;
  };
  return write(0);
}
