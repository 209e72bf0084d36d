import { parseSmiles } from '../../shared/chemistry/smiles.js';
import type { MolecularGraph } from '../../shared/types/molecular-graph.js';

/** Graph of a SMILES that the test knows to be sound. */
export function graphOf(smiles: string): MolecularGraph {
  const parsed = parseSmiles(smiles);
  if (!parsed.ok) throw new Error(`${smiles}: ${parsed.message}`);
  return parsed.graph;
}
