import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { elementOf } from '../../../shared/chemistry/elements.js';
import type { MolecularGraph } from '../../../shared/types/molecular-graph.js';
import { enumerateAll } from '../../support/enumerate.js';
import { loadRdkit, molfileOf } from '../../support/rdkit.js';

const FORMULAS = ['C5H8O', 'C4H7NO', 'C5H6', 'C4H6O2', 'C3H5ClO2', 'C4H8OS', 'C6H12', 'C3H6N2'] as const;
const families = new Map(
  FORMULAS.map((formula) => [formula, enumerateAll({ formula, options: { mergeResonanceForms: false } }, { keep: true })]),
);

/** A connected set of atoms cut out of a molecule, written as the SMILES of a fragment and as SMARTS for the matcher. */
interface Cut {
  smiles: string;
  smarts: string;
  /** Per written atom, in the order of the text: orders of the bonds that leave the cut, rising. */
  quotas: string[];
  bondsInside: number;
}

function cutOut(graph: MolecularGraph, picks: readonly number[], wanted: number): Cut {
  const n = graph.atomCount;
  const inside = [picks[0] % n];
  for (let k = 1; k < wanted; k++) {
    const border = Array.from({ length: n }, (_, v) => v).filter(
      (v) => !inside.includes(v) && inside.some((u) => graph.bondOrders[u * n + v] > 0),
    );
    if (border.length === 0) break;
    inside.push(border[picks[k] % border.length]);
  }
  const bond = (order: number): string => ['', '-', '=', '#'][order];
  // Written as a tree with ring closures for the rest of the bonds.
  const closures = new Map<string, number>();
  const done = new Set<number>();
  const treeBond = new Set<string>();
  const pair = (a: number, b: number): string => (a < b ? `${a},${b}` : `${b},${a}`);
  const grow = (atom: number): void => {
    done.add(atom);
    for (const next of inside) {
      if (graph.bondOrders[atom * n + next] === 0 || done.has(next)) continue;
      treeBond.add(pair(atom, next));
      grow(next);
    }
  };
  grow(inside[0]);
  for (const a of inside)
    for (const b of inside)
      if (a < b && graph.bondOrders[a * n + b] > 0 && !treeBond.has(pair(a, b))) closures.set(pair(a, b), closures.size + 1);
  const written: number[] = [];
  const write = (atom: number, from: number, asSmarts: boolean): string => {
    written.push(atom);
    const h = graph.hydrogens[atom];
    let degree = 0;
    for (let v = 0; v < n; v++) if (graph.bondOrders[atom * n + v] > 0) degree++;
    const symbol = elementOf(graph.atomicNumbers[atom]);
    let text = asSmarts ? `[#${symbol.atomicNumber};H${h};D${degree}]` : `[${symbol.symbol}${h === 0 ? '' : h === 1 ? 'H' : `H${h}`}]`;
    for (const [key, number] of closures) {
      const [a, b] = key.split(',').map(Number);
      if (a === atom || b === atom) text += `${bond(graph.bondOrders[a * n + b])}${number}`;
    }
    if (!asSmarts) {
      for (let v = 0; v < n; v++) {
        const order = graph.bondOrders[atom * n + v];
        if (order > 0 && !inside.includes(v)) text += `(${bond(order)}*)`;
      }
    }
    for (const next of inside) {
      if (next === from || !treeBond.has(pair(atom, next)) || graph.bondOrders[atom * n + next] === 0) continue;
      text += `(${bond(graph.bondOrders[atom * n + next])}${write(next, atom, asSmarts)})`;
    }
    return text;
  };
  const smiles = write(inside[0], -1, false);
  written.length = 0;
  const smarts = write(inside[0], -1, true);
  return { smiles, smarts, quotas: written.map((atom) => outsideOrders(graph, atom, inside)), bondsInside: treeBond.size + closures.size };
}

/** Orders of the bonds from an atom to atoms outside a set. */
function outsideOrders(graph: MolecularGraph, atom: number, inside: readonly number[]): string {
  const orders: number[] = [];
  for (let v = 0; v < graph.atomCount; v++) {
    const order = graph.bondOrders[atom * graph.atomCount + v];
    if (order > 0 && !inside.includes(v)) orders.push(order);
  }
  return orders.sort().join();
}

describe('required fragments', () => {
  it('keep exactly what generating everything and matching with RDKit keeps', async () => {
    const rdkit = await loadRdkit();
    const asWritten = JSON.stringify({ kekulize: false, setAromaticity: false });
    fc.assert(
      fc.property(
        fc.constantFrom(...FORMULAS),
        fc.nat(1e6),
        fc.array(fc.nat(1e6), { minLength: 5, maxLength: 5 }),
        fc.integer({ min: 1, max: 4 }),
        fc.integer({ min: 1, max: 2 }),
        (formula, which, picks, wanted, count) => {
          const family = families.get(formula)!;
          const cut = cutOut(family.graphs[which % family.graphs.length], picks, wanted);
          fc.pre(cut.smiles.includes('*'));
          const query = rdkit.get_qmol(cut.smarts)!;
          /** Matches whose atoms have the cut's bonds to the outside and no further bond among themselves. */
          const placements = (graph: MolecularGraph): number[][] => {
            const molecule = rdkit.get_mol(molfileOf(graph), asWritten)!;
            const found = JSON.parse(molecule.get_substruct_matches(query)) as { atoms: number[] }[];
            molecule.delete();
            return (Array.isArray(found) ? found : [])
              .map((match) => match.atoms)
              .filter((atoms) => atoms.every((atom, k) => outsideOrders(graph, atom, atoms) === cut.quotas[k]));
          };
          const expected = family.keys.filter((_, k) => {
            const sets = placements(family.graphs[k]);
            if (count === 1) return sets.length > 0;
            return sets.some((first) => sets.some((second) => !second.some((atom) => first.includes(atom))));
          });
          query.delete();
          let found: string[] = [];
          try {
            const input = { formula, fragments: { required: [{ smiles: cut.smiles, count }] }, options: { mergeResonanceForms: false } };
            found = enumerateAll(input, { keep: true, shards: 3 }).keys;
          } catch (error) {
            expect(String(error)).toContain('needs more');
          }
          if (count === 1) expect(found.length).toBeGreaterThan(0);
          expect(found.sort()).toEqual(expected.sort());
        },
      ),
      { numRuns: 80 },
    );
  }, 120_000);
});
