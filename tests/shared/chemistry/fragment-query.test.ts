import { describe, expect, it } from 'vitest';
import { parseExcludedPattern } from '../../../shared/chemistry/excluded-pattern.js';
import { parseFragment } from '../../../shared/chemistry/fragment.js';
import { exactQueryOf } from '../../../shared/chemistry/fragment-query.js';
import { FRAGMENT_LIBRARY } from '../../../shared/fragments/library.js';

const queryOf = (smiles: string): string => {
  const parsed = parseFragment(smiles);
  if (!parsed.ok) throw new Error(parsed.message);
  return exactQueryOf(parsed.fragment);
};

describe('a fragment as a query for exclusion', () => {
  it('keeps hydrogens, so that excluding hydroxy does not exclude ethers', () => {
    expect(queryOf('*O')).toBe('[OH]');
    expect(queryOf('*C(=O)O')).toBe('[CH0](=[OH0])[OH]');
  });

  it('can be read back for every fragment of the library, atom for atom', () => {
    for (const { smiles } of FRAGMENT_LIBRARY) {
      const parsed = parseFragment(smiles);
      const pattern = parseExcludedPattern(queryOf(smiles));
      expect(pattern.kind, smiles).toBe('query');
      if (pattern.kind !== 'query' || !parsed.ok) continue;
      expect(pattern.query.atoms.map((atom) => atom.atomicNumber).sort(), smiles).toEqual([...parsed.fragment.graph.atomicNumbers].sort());
    }
  });
});
