import { describe, expect, it } from 'vitest';
import { parseExcludedPattern, type QueryGraph } from '../../../shared/chemistry/excluded-pattern.js';
import { parseFragment } from '../../../shared/chemistry/fragment.js';
import { doesPatternOccurIn } from '../../../shared/chemistry/pattern-in-fragment.js';

function queryOf(text: string): QueryGraph {
  const parsed = parseExcludedPattern(text);
  if (parsed.kind !== 'query') throw new Error(`${text}: ${parsed.kind}`);
  return parsed.query;
}
const kindsOf = (text: string): string[] => queryOf(text).bonds.map(({ kind }) => kind);

describe('parseExcludedPattern', () => {
  it('reads elements, wildcards and bond orders', () => {
    expect(queryOf('*C#N').atoms.map(({ atomicNumber }) => atomicNumber)).toEqual([0, 6, 7]);
    expect(kindsOf('C-C=CC#C~C')).toEqual(['single', 'double', 'single', 'triple', 'any']);
    expect(kindsOf('c:c')).toEqual(['aromatic']);
    expect(kindsOf('cc')).toEqual(['singleOrAromatic']);
    expect(kindsOf('cC')).toEqual(['single']);
  });

  it('fixes hydrogens and charges only where they are written', () => {
    expect(queryOf('[OH]').atoms[0]).toMatchObject({ atomicNumber: 8, hydrogens: 1, charge: null });
    expect(queryOf('O').atoms[0]).toMatchObject({ hydrogens: null, minHydrogens: 0 });
    expect(queryOf('[H]N').atoms[0]).toMatchObject({ atomicNumber: 7, minHydrogens: 1, hydrogens: null });
    expect(queryOf('[N+]=O').atoms[0]).toMatchObject({ charge: 1 });
  });

  it('takes rings drawn with alternating bonds for aromatic, fused ones and azoles too', () => {
    for (const smiles of ['C1=CC=CC=C1', 'C1=CC=C2C=CC=CC2=C1', 'C1=COC=C1', 'C1=CNC=C1', 'C1=CC2=CC=CC=C2N1']) {
      expect(new Set(kindsOf(smiles)), smiles).toEqual(new Set(['aromatic']));
    }
    for (const smiles of ['C1=CCC=CC1', 'O=C1C=CC(=O)C=C1', 'C1=CC=C1', 'C1=CCC=C1'])
      expect(kindsOf(smiles), smiles).not.toContain('aromatic');
  });

  it('brings the drawings of nitro groups and sulfoxides to one form', () => {
    expect(queryOf('CN(=O)=O')).toEqual(queryOf('C[N+]([O-])=O'));
    expect(queryOf('C[S+](C)[O-]')).toEqual(queryOf('CS(C)=O'));
  });

  it.each(['[#6]', '[C,N]', '[NX3;H2]', '[R]', '[!C]C', 'a', '[O;D1]', 'C!=C', '[CX4]', '[R2]', '[A]', 'C@C-@C'])(
    'leaves %s to a SMARTS library',
    (text) => {
      expect(parseExcludedPattern(text).kind).toBe('smarts');
    },
  );

  it.each([
    ['C(', /position 2: branch is not closed/],
    ['[Xx]', /"Xx" is not supported/],
    ['C.C', /several components/],
    ['', /expected a SMILES/],
    ['**', /at least one named atom/],
    ['[13CH3]', /isotope/],
    ['C(C)(C)(C)(C)C', /5 bonds.*never matches/],
    ['[#6', /add \]/],
    ['[D]', /isotopes are not supported/],
  ])('refuses %j', (text, message) => {
    const parsed = parseExcludedPattern(text);
    expect(parsed.kind).toBe('fault');
    expect(parsed.kind === 'fault' ? parsed.message : '').toMatch(message);
  });
});

describe('doesPatternOccurIn', () => {
  const occurs = (pattern: string, smiles: string): boolean => {
    const read = parseFragment(smiles);
    if (!read.ok) throw new Error(read.message);
    return doesPatternOccurIn(queryOf(pattern), read.fragment);
  };

  it('finds what is certainly inside a fragment', () => {
    expect(occurs('c1ccccc1', '*c1ccc(*)cc1')).toBe(true);
    expect(occurs('C1=CC=CC=C1', '*c1ccc(*)cc1')).toBe(true);
    expect(occurs('c1ccccc1', '*C1=CC=CC=C1')).toBe(true);
    expect(occurs('C=O', '*C(=O)OC')).toBe(true);
    expect(occurs('[OH]', '*C(=O)O')).toBe(true);
    expect(occurs('OO', '*OO*')).toBe(true);
    expect(occurs('*O*', '*O*')).toBe(true);
    expect(occurs('N(=O)=O', '*[N+](=O)[O-]')).toBe(true);
  });

  it('finds nothing that depends on the rest of the molecule', () => {
    expect(occurs('CO', '*O')).toBe(false);
    expect(occurs('C=C', '*c1ccccc1')).toBe(false);
    expect(occurs('[OH]', '*C(=O)OC')).toBe(false);
    expect(occurs('CC', '*C')).toBe(false);
    expect(occurs('C1CC1', '*CCC*')).toBe(false);
  });
});
