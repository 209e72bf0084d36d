import { Canonizer, Molecule } from 'openchemlib';
import type { LaidOutStructure } from '../../shared/jobs/contract.js';

/**
 * Lays a structure out on a plane.
 *
 * @param smiles - a SMILES that was checked before; `*` is an atom of its own, with the symbol `*`
 * @returns atoms in the order of the SMILES, hydrogens left implicit
 * @throws Error on text that is no SMILES
 */
export function layOut(smiles: string): LaidOutStructure {
  const molecule = Molecule.fromSmiles(smiles, { noStereo: true });
  const atoms = Array.from({ length: molecule.getAllAtoms() }, (_, atom) => ({
    // The library calls an unspecified atom "?".
    symbol: molecule.getAtomicNo(atom) === 0 ? '*' : molecule.getAtomLabel(atom),
    charge: molecule.getAtomCharge(atom),
    x: molecule.getAtomX(atom),
    // The library's y axis points down, as on a screen.
    y: -molecule.getAtomY(atom),
  }));
  const bonds = Array.from({ length: molecule.getAllBonds() }, (_, bond) => ({
    from: molecule.getBondAtom(0, bond),
    to: molecule.getBondAtom(1, bond),
    order: molecule.getBondOrder(bond),
  }));
  return { idcode: new Canonizer(molecule, { neglectAnyStereoInformation: true }).getIDCode(), atoms, bonds };
}
