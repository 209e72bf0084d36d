import type { MolecularGraph } from '../../shared/types/molecular-graph.js';
import { perceiveAromaticity } from './aromaticity.js';
import { atomColour } from './atom-colour.js';
import { canonicalForm } from './canonical.js';

/** Bond label of an aromatic bond in a key. */
const AROMATIC_LABEL = 4;

/**
 * Text that is equal exactly for equal constitutions: atoms and bonds in canonical order.
 *
 * @param graph - any Kekulé form, any atom order. Read only.
 * @param mergeResonanceForms - true: Kekulé forms of one aromatic ring give the same key.
 */
export function constitutionKey(graph: MolecularGraph, mergeResonanceForms: boolean): string {
  const n = graph.atomCount;
  let edges = graph.bondOrders;
  if (mergeResonanceForms) {
    const { bonds, hasAromaticRing } = perceiveAromaticity(graph);
    if (hasAromaticRing) {
      edges = edges.slice();
      for (let k = 0; k < edges.length; k++) if (bonds[k] === 1 && edges[k] <= 2) edges[k] = AROMATIC_LABEL;
    }
  }
  const colours = Uint16Array.from({ length: n }, (_, atom) => atomColour(graph, atom));
  const { order } = canonicalForm(n, colours, edges);
  let key = '';
  for (let i = 0; i < n; i++) key += colours[order[i]].toString(36).padStart(2, '0');
  key += '/';
  for (let i = 0; i < n; i++) {
    for (let j = i + 1; j < n; j++) {
      const label = edges[order[i] * n + order[j]];
      if (label !== 0) key += (i * 41 + j).toString(36).padStart(3, '0') + label;
    }
  }
  return key;
}
