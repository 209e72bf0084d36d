import { describe, expect, it } from 'vitest';
import { BOND, depictStructure } from '../../../../src/components/structure/depiction';
import { parseStructure, writeStructure } from '../../../../src/components/structure/parse-structure';
import { toggleAttachment } from '../../../../src/components/structure/attachment-points';
import { loadRdkit } from '../../../support/rdkit';

/** RDKit's canonical SMILES, an independent reading of both texts. */
async function canonicalSmiles(smiles: string): Promise<string> {
  const molecule = (await loadRdkit()).get_mol(smiles);
  if (molecule === null) throw new Error(`RDKit cannot read ${smiles}`);
  const canonical = molecule.get_smiles();
  molecule.delete();
  return canonical;
}

describe('a depiction', () => {
  it('keeps the order of atoms in the SMILES, so that atom numbers mean the same everywhere', () => {
    expect(depictStructure('OCC(=O)N').atoms.map((atom) => atom.symbol)).toEqual(['O', 'C', 'C', 'O', 'N']);
  });

  // Hydrogen counts by valence: methanol, acetamide, nitromethane, pyrrole.
  it.each([
    ['CO', [3, 1]],
    ['CC(=O)N', [3, 0, 0, 2]],
    ['C[N+](=O)[O-]', [3, 0, 0, 0]],
    ['c1cc[nH]c1', [1, 1, 1, 1, 1]],
  ])('counts the hydrogens of %s', (smiles, hydrogens) => {
    expect(depictStructure(smiles).atoms.map((atom) => atom.hydrogens)).toEqual(hydrogens);
  });

  it('draws bonds of about one length', () => {
    const { atoms, bonds } = depictStructure('CC(C)c1ccc(C)cc1');
    for (const { begin, end } of bonds) {
      const length = Math.hypot(atoms[begin].x - atoms[end].x, atoms[begin].y - atoms[end].y);
      expect(length).toBeGreaterThan(BOND * 0.8);
      expect(length).toBeLessThan(BOND * 1.2);
    }
  });

  it('draws as many lines as the bond order', () => {
    const lines = (smiles: string) => depictStructure(smiles).bonds.map((bond) => bond.lines.length);
    expect(lines('CC')).toEqual([1]);
    expect(lines('C=C')).toEqual([2]);
    expect(lines('C#N')).toEqual([3]);
    expect(lines('c1ccccc1').sort()).toEqual([1, 1, 1, 2, 2, 2]);
  });

  it('puts the second line of a ring bond inside the ring', () => {
    const { atoms, bonds } = depictStructure('C1=CCCCC1');
    const centre = { x: atoms.reduce((sum, atom) => sum + atom.x, 0) / 6, y: atoms.reduce((sum, atom) => sum + atom.y, 0) / 6 };
    const double = bonds.find((bond) => bond.lines.length === 2);
    const distance = ([a, b]: readonly [{ x: number; y: number }, { x: number; y: number }]) =>
      Math.hypot((a.x + b.x) / 2 - centre.x, (a.y + b.y) / 2 - centre.y);
    expect(distance(double!.lines[1])).toBeLessThan(distance(double!.lines[0]));
  });

  it('keeps attachment points apart from atoms and without hydrogens', () => {
    const { atoms } = depictStructure('*C(C)C');
    expect(atoms.map((atom) => atom.isAttachment)).toEqual([true, false, false, false]);
    expect(atoms.map((atom) => atom.hydrogens)).toEqual([0, 1, 3, 3]);
  });

  it('writes hydrogens on the side away from the bond', () => {
    const { atoms } = depictStructure('CO');
    const side = atoms[1].hydrogenSide;
    expect(side).toBe(atoms[0].x > atoms[1].x ? 'left' : 'right');
  });

  it('stacks hydrogens only where no side is free', () => {
    // Ring NH of a zigzag amine has bonds on both sides; the acid OH has not.
    expect(depictStructure('CNC').atoms[1].hydrogenSide).toMatch(/up|down/);
    expect(depictStructure('CC(=O)O').atoms[3].hydrogenSide).toMatch(/left|right/);
  });

  it('keeps charge, hydrogens, number and bonds of an atom apart', () => {
    for (const smiles of ['C[N+](=O)[O-]', '[N-]=[N+]=NCC', '[O-][n+]1ccccc1', 'NCC(=O)O']) {
      for (const atom of depictStructure(smiles).atoms) {
        if (atom.charge === 0) continue;
        const cosine = atom.chargeDirection.x * atom.gap.x + atom.chargeDirection.y * atom.gap.y;
        expect(cosine).toBeLessThan(0.9);
      }
    }
  });

  it.each(['C1CC', 'Q', '(('])('refuses %s', (smiles) => {
    expect(() => depictStructure(smiles)).toThrow();
  });
});

describe('drawing and writing', () => {
  it.each(['*c1ccc(*)cc1', '*C(=O)O*', 'C=*', '*C#*', '*C(C)C', 'CC(=O)OCCC(C)C', 'C[N+](=O)[O-]', 'c1cc[nH]c1'])(
    'gives %s back as the same structure',
    async (smiles) => {
      expect(await canonicalSmiles(writeStructure(parseStructure(smiles)))).toBe(await canonicalSmiles(smiles));
    },
  );
});

describe('attachment points', () => {
  it('replace a hydrogen and give it back', async () => {
    const opened = toggleAttachment('c1ccccc1', 0);
    expect(await canonicalSmiles(opened)).toBe(await canonicalSmiles('*c1ccccc1'));
    const wave = depictStructure(opened).atoms.findIndex((atom) => atom.isAttachment);
    expect(await canonicalSmiles(toggleAttachment(opened, wave))).toBe(await canonicalSmiles('c1ccccc1'));
  });
  it('are not opened on an atom without hydrogen', () => {
    expect(toggleAttachment('CC(C)(C)C', 1)).toBe('CC(C)(C)C');
  });
});
