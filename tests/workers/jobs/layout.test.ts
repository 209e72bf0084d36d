import { describe, expect, it } from 'vitest';
import { layOut } from '../../../workers/jobs/layout.js';

describe('layOut', () => {
  it('keeps the atoms in the order of the SMILES and writes one Kekulé form', () => {
    const { atoms, bonds } = layOut('Cc1ccncc1');
    expect(atoms.map(({ symbol }) => symbol)).toEqual(['C', 'C', 'C', 'C', 'N', 'C', 'C']);
    expect(bonds).toHaveLength(7);
    expect(bonds.filter(({ order }) => order === 2)).toHaveLength(3);
  });

  it('gives every atom a place of its own', () => {
    const { atoms } = layOut('CC(C)(C)c1ccc2ccccc2c1');
    for (let a = 0; a < atoms.length; a++) {
      for (let b = 0; b < a; b++) expect(Math.hypot(atoms[a].x - atoms[b].x, atoms[a].y - atoms[b].y)).toBeGreaterThan(0.4);
    }
  });

  it('keeps the charges of a neutral group with separated charges', () => {
    expect(layOut('C[N+](=O)[O-]').atoms.map(({ charge }) => charge)).toEqual([0, 1, 0, -1]);
  });

  it('gives one id code to all ways of writing a fragment, and different ones to different fragments', () => {
    const code = (smiles: string) => layOut(smiles).idcode;
    expect(code('*c1ccc(*)cc1')).toBe(code('C1=CC(*)=CC=C1*'));
    expect(code('*C(C)C')).toBe(code('CC(C)*'));
    expect(code('*CC=CC')).toBe(code('C(C)=CC*'));
    const different = ['*C(C)C', '*CCC', '*=C(C)C', '*c1ccc(*)cc1', '*c1cccc(*)c1', '*c1ccccc1*', '*C(=O)O', '*C(=O)O*'].map(code);
    expect(new Set(different).size).toBe(different.length);
  });
});
