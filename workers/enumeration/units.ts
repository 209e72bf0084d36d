import type { Attachment } from '../../shared/chemistry/smiles.js';
import type { MolecularGraph } from '../../shared/types/molecular-graph.js';
import { perceiveAromaticity } from '../graph/aromaticity.js';
import { canonicalForm } from '../graph/canonical.js';
import { createGraph } from '../graph/pack.js';
import { atomColour } from '../graph/atom-colour.js';
import { forEachKekuleForm } from './kekule.js';

/** Label of a bond inside a unit that is single in one Kekulé form and double in another. */
export const RESONANT_BOND = 4;

/** A required fragment of two or more heavy atoms (or of one atom in a higher valence state), ready for placing. */
export interface UnitKind {
  readonly smiles: string;
  /** Equal for the same fragment written differently. */
  readonly canonicalKey: string;
  readonly count: number;
  readonly graph: MolecularGraph;
  /** bondQuota[4 a + o]: bonds of order o that must leave atom a. */
  readonly bondQuota: Uint8Array;
  /** Sum of the orders that leave each atom. */
  readonly freeValence: Uint8Array;
  /** Atoms with attachment points, rising. */
  readonly openAtoms: readonly number[];
  readonly closedAtoms: readonly number[];
  /** n × n: 0 none, 1–3 the bond order, {@link RESONANT_BOND} where Kekulé forms differ. */
  readonly labels: Uint8Array;
  /** Atoms so that each but the first is bonded to an earlier one, its anchor (−1 for the first). */
  readonly searchOrder: readonly { readonly atom: number; readonly anchor: number }[];
  /** Kekulé forms (n × n bond orders) that no automorphism fixing the open atoms carries into one another; at least one. */
  readonly forms: readonly Uint8Array[];
  /** Permutations of `openAtoms` positions by automorphisms of the unit, identity first. */
  readonly openSymmetries: readonly Uint8Array[];
}

/**
 * Prepares a fragment as a pre-bonded unit.
 *
 * @param graph - atoms of the fragment without its attachment points. Kept.
 * @param attachments - bonds that leave it.
 */
export function createUnitKind(smiles: string, count: number, graph: MolecularGraph, attachments: readonly Attachment[]): UnitKind {
  const n = graph.atomCount;
  const bondQuota = new Uint8Array(4 * n);
  const freeValence = new Uint8Array(n);
  for (const { atom, order } of attachments) {
    bondQuota[4 * atom + order]++;
    freeValence[atom] += order;
  }
  const openAtoms: number[] = [];
  const closedAtoms: number[] = [];
  for (let atom = 0; atom < n; atom++) (freeValence[atom] > 0 ? openAtoms : closedAtoms).push(atom);

  const allForms = listForms(graph, attachments);
  const labels = allForms[0].slice();
  for (const form of allForms) for (let k = 0; k < n * n; k++) if (form[k] !== allForms[0][k]) labels[k] = RESONANT_BOND;

  const colours = unitColours(graph, bondQuota);
  const { automorphisms, code } = canonicalForm(n, colours, labels);
  const openSymmetries = closeGroup(automorphisms, openAtoms);
  const forms = formsApart(n, allForms, labels, colours, openAtoms);
  const searchOrder = orderForSearch(n, labels);
  return {
    smiles,
    searchOrder,
    canonicalKey: code.join(),
    count,
    graph,
    bondQuota,
    freeValence,
    openAtoms,
    closedAtoms,
    labels,
    forms,
    openSymmetries,
  };
}

function orderForSearch(n: number, labels: Uint8Array): { atom: number; anchor: number }[] {
  const order = [{ atom: 0, anchor: -1 }];
  const reached = new Set([0]);
  for (let head = 0; head < order.length; head++) {
    const { atom } = order[head];
    for (let other = 0; other < n; other++) {
      if (reached.has(other) || labels[atom * n + other] === 0) continue;
      reached.add(other);
      order.push({ atom: other, anchor: atom });
    }
  }
  return order;
}

/** Element, hydrogens, charge and attachments of each atom as one number, the same in every unit. */
function unitColours(graph: MolecularGraph, bondQuota: Uint8Array): Uint16Array {
  return Uint16Array.from({ length: graph.atomCount }, (_, a) => {
    // At most 6 attachments in all (S6), so the three counts fit into base 7; atoms, hydrogens and charge into the rest.
    const outside = bondQuota[4 * a + 1] + 7 * bondQuota[4 * a + 2] + 7 * 3 * bondQuota[4 * a + 3];
    return atomColour(graph, a) + 0x400 * outside;
  });
}

/** All Kekulé forms of the fragment; what is attached is stood in for by carbon with the valence to match. */
function listForms(graph: MolecularGraph, attachments: readonly Attachment[]): Uint8Array[] {
  const n = graph.atomCount;
  const whole = createGraph(n + attachments.length);
  const size = whole.atomCount;
  whole.atomicNumbers.set(graph.atomicNumbers);
  whole.hydrogens.set(graph.hydrogens);
  whole.charges.set(graph.charges);
  for (let i = 0; i < n; i++) for (let j = 0; j < n; j++) whole.bondOrders[i * size + j] = graph.bondOrders[i * n + j];
  attachments.forEach(({ atom, order }, k) => {
    whole.atomicNumbers[n + k] = 6;
    whole.hydrogens[n + k] = 4 - order;
    whole.bondOrders[atom * size + n + k] = whole.bondOrders[(n + k) * size + atom] = order;
  });
  const forms: Uint8Array[] = [];
  forEachKekuleForm(whole, perceiveAromaticity(whole), (bondOrders) => {
    const form = new Uint8Array(n * n);
    for (let i = 0; i < n; i++) for (let j = 0; j < n; j++) form[i * n + j] = bondOrders[i * size + j];
    forms.push(form);
    return false;
  });
  // The form as written comes first, so that a single form is the written one.
  const written = forms.findIndex((form) => form.every((order, k) => order === graph.bondOrders[k]));
  if (written > 0) forms.unshift(...forms.splice(written, 1));
  return forms;
}

/** One form of each orbit under the automorphisms that fix every open atom. */
function formsApart(
  n: number,
  forms: readonly Uint8Array[],
  labels: Uint8Array,
  colours: Uint16Array,
  openAtoms: readonly number[],
): Uint8Array[] {
  if (forms.length === 1) return [forms[0]];
  const fixed = colours.slice();
  openAtoms.forEach((atom, k) => (fixed[atom] = 0xff00 + k));
  const { automorphisms } = canonicalForm(n, fixed, labels);
  const keyOf = (form: Uint8Array): string => form.join('');
  const chosen: Uint8Array[] = [];
  const covered = new Set<string>();
  for (const form of forms) {
    if (covered.has(keyOf(form))) continue;
    chosen.push(form);
    const orbit = [form];
    covered.add(keyOf(form));
    for (let head = 0; head < orbit.length; head++) {
      for (const image of automorphisms) {
        const moved = new Uint8Array(n * n);
        for (let i = 0; i < n; i++) for (let j = 0; j < n; j++) moved[image[i] * n + image[j]] = orbit[head][i * n + j];
        if (covered.has(keyOf(moved))) continue;
        covered.add(keyOf(moved));
        orbit.push(moved);
      }
    }
  }
  return chosen;
}

/** Closes generators, restricted to some atoms, to the whole list of position permutations. */
function closeGroup(generators: readonly Uint8Array[], atoms: readonly number[]): Uint8Array[] {
  const positionOf = new Map(atoms.map((atom, k) => [atom, k]));
  const restricted = generators.map((image) => Uint8Array.from(atoms, (atom) => positionOf.get(image[atom])!));
  const identity = Uint8Array.from(atoms, (_, k) => k);
  const group = [identity];
  const seen = new Set([identity.join()]);
  for (let head = 0; head < group.length; head++) {
    for (const generator of restricted) {
      const product = Uint8Array.from(group[head], (position) => generator[position]);
      if (seen.has(product.join())) continue;
      seen.add(product.join());
      group.push(product);
    }
  }
  return group;
}
