import { describe, expect, it } from 'vitest';
import { enumerateAll } from '../../support/enumerate.js';
import { loadRdkit, rdkitSmiles } from '../../support/rdkit.js';

/** Fused, hetero-aromatic and strained rings among them; C8H2 is the hardest small formula. */
const FORMULAS = ['C8H2', 'C7H4', 'C4H4N2', 'C5H5N', 'C4H3NS', 'C5H4O2', 'C3H3N3O', 'C6H8Si'] as const;

describe('merged constitutions', () => {
  it.each(FORMULAS)('of %s are the distinct canonical SMILES of RDKit over all multigraphs', async (formula) => {
    const rdkit = await loadRdkit();
    const apart = enumerateAll({ formula, options: { mergeResonanceForms: false } }, { keep: true }).graphs;
    const merged = enumerateAll({ formula }, { keep: true }).graphs;
    const expected = [...new Set(apart.map((graph) => rdkitSmiles(rdkit, graph)))].sort();
    const found = merged.map((graph) => rdkitSmiles(rdkit, graph)).sort();
    expect(found).toEqual(expected);
  });
});
