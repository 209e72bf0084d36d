import { Canonizer, Molecule } from 'openchemlib';
import { describe, expect, it } from 'vitest';
import { parseFragment } from '../../../shared/chemistry/fragment.js';
import { FRAGMENT_GROUPS, FRAGMENT_LIBRARY } from '../../../shared/fragments/library.js';

describe('the fragment library', () => {
  it('has enough to pick from in every group', () => {
    expect(FRAGMENT_LIBRARY.length).toBeGreaterThanOrEqual(70);
    for (const group of FRAGMENT_GROUPS)
      expect(FRAGMENT_LIBRARY.filter((fragment) => fragment.group === group).length, group).toBeGreaterThanOrEqual(4);
  });

  it('names nothing twice', () => {
    expect(new Set(FRAGMENT_LIBRARY.map(({ id }) => id)).size).toBe(FRAGMENT_LIBRARY.length);
    expect(new Set(FRAGMENT_LIBRARY.map(({ name }) => name)).size).toBe(FRAGMENT_LIBRARY.length);
  });

  it('holds no fragment twice, however it is written', () => {
    const codes = FRAGMENT_LIBRARY.map(({ smiles }) => new Canonizer(Molecule.fromSmiles(smiles)).getIDCode());
    expect(new Set(codes).size).toBe(FRAGMENT_LIBRARY.length);
  });

  it.each(FRAGMENT_LIBRARY.map((fragment) => [fragment.name, fragment] as const))('can be read: %s', (_name, { smiles }) => {
    const read = parseFragment(smiles);
    if (!read.ok) throw new Error(read.message);
    expect(read.notes).toEqual([]);
    expect(read.fragment.attachments.length).toBeGreaterThan(0);

    // Astatine stands for what is attached: it occurs in no fragment.
    const library = Molecule.fromSmiles(smiles.replaceAll('*', '[At]'), { noCoordinates: true });
    const numbers = Array.from({ length: library.getAllAtoms() }, (_, atom) => library.getAtomicNo(atom));
    expect(numbers.filter((number) => number === 85)).toHaveLength(read.fragment.attachments.length);
    expect(numbers.filter((number) => number !== 85)).toEqual([...read.fragment.graph.atomicNumbers]);
  });

  it('holds every substitution pattern of the benzene ring', () => {
    // 1 mono-, 3 di-, 3 tri-, 3 tetra-, 1 penta-, 1 hexasubstituted: Pólya, Acta Math. 1937, 68, 145 (necklaces of six beads).
    const rings = FRAGMENT_LIBRARY.flatMap(({ smiles }) => {
      const read = parseFragment(smiles);
      return read.ok && read.fragment.graph.atomCount === 6 && /^[c*1()]+$/.test(smiles) ? [read.fragment] : [];
    });
    const patternCounts = [1, 2, 3, 4, 5, 6].map((count) => rings.filter(({ attachments }) => attachments.length === count).length);
    expect(patternCounts).toEqual([1, 3, 3, 3, 1, 1]);
  });
});
