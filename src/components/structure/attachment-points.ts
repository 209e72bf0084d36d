import { Molecule } from 'openchemlib';
import { ATTACHMENT, parseStructure, writeStructure } from './parse-structure';

/**
 * Opens a bond at an atom (one hydrogen becomes an attachment point) or, on an attachment point, closes it.
 *
 * @param smiles - the fragment; `atom` counts its atoms from 0.
 * @returns the changed SMILES, or the same one when the atom has no hydrogen to give.
 */
export function toggleAttachment(smiles: string, atom: number): string {
  const molecule = parseStructure(smiles);
  if (molecule.getAtomicNo(atom) === ATTACHMENT) {
    molecule.deleteAtom(atom);
  } else {
    if (molecule.getImplicitHydrogens(atom) === 0) return smiles;
    const open = molecule.addAtom(ATTACHMENT);
    const bond = molecule.addBond(atom, open);
    molecule.setBondType(bond, Molecule.cBondTypeSingle);
  }
  molecule.ensureHelperArrays(Molecule.cHelperRings);
  return writeStructure(molecule);
}
