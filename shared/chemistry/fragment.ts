import type { MolecularGraph } from '../types/molecular-graph.js';
import { listPerfectMatchings } from './kekule.js';
import { compositionOf, parseSmiles, type Attachment } from './smiles.js';

/**
 * A piece of structure with attachment points (DESIGN.md 4): every written atom has exactly the bonds and hydrogens
 * written, each `*` stands for one bond to a heavy atom outside the fragment, and nothing else is bonded to it.
 */
export interface Fragment {
  /** As given, without surrounding space. */
  readonly smiles: string;
  /** Written atoms in the order of the text, one Kekulé form; bonds to `*` are not in it. */
  readonly graph: MolecularGraph;
  /** Empty when the text is a whole molecule. */
  readonly attachments: readonly Attachment[];
  /** Length n, 1 = written in lower case. */
  readonly aromaticAtoms: Uint8Array;
  /** n × n, row-major, 1 = bond of a ring written in lower case. */
  readonly aromaticBonds: Uint8Array;
  /** Element symbol → number of atoms, hydrogens included. */
  readonly composition: ReadonlyMap<string, number>;
}

export type FragmentResult =
  | { readonly ok: true; readonly fragment: Fragment; readonly notes: readonly string[] }
  | { readonly ok: false; readonly message: string; readonly position: number };

/**
 * Parses a required fragment. Without any `*` the text must be the whole molecule; whether it is, only the formula
 * can tell (see check-evidence), so such a text is accepted here with a note.
 *
 * @param text - SMILES with `*` for each attachment point; surrounding space is ignored.
 */
export function parseFragment(text: string): FragmentResult {
  const smiles = text.trim();
  const parsed = parseSmiles(smiles);
  if (!parsed.ok) return parsed;
  const { graph, attachments, aromaticAtoms, aromaticBonds } = parsed;
  const notes = attachments.length === 0 ? [...parsed.notes, 'no attachment point: read as a whole molecule'] : parsed.notes;
  return { ok: true, fragment: { smiles, graph, attachments, aromaticAtoms, aromaticBonds, composition: compositionOf(graph) }, notes };
}

/**
 * Lists every Kekulé form of the part written in lower case: all ways to place its double bonds, atoms and other
 * bonds fixed. Text with upper-case rings has the one form it shows.
 *
 * @returns `bondOrders` arrays laid out as in the graph, at least one; the fragment's own form is among them.
 */
export function kekuleForms(fragment: Pick<Fragment, 'graph' | 'aromaticBonds'>): Uint8Array[] {
  const { graph, aromaticBonds } = fragment;
  const { atomCount: n, bondOrders } = graph;
  const members: number[] = [];
  for (let atom = 0; atom < n; atom++) {
    for (let to = 0; to < n; to++) {
      if (aromaticBonds[atom * n + to] === 1 && bondOrders[atom * n + to] === 2) members.push(atom);
    }
  }
  const neighbours = members.map((atom) => members.flatMap((to, i) => (aromaticBonds[atom * n + to] === 1 ? [i] : [])));
  return listPerfectMatchings({ size: members.length, neighbours }).map((partner) => {
    const form = bondOrders.slice();
    for (let cell = 0; cell < form.length; cell++) if (aromaticBonds[cell] === 1) form[cell] = 1;
    partner.forEach((to, i) => {
      form[members[i]! * n + members[to]!] = 2;
    });
    return form;
  });
}
