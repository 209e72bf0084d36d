import { Molecule } from 'openchemlib';

/**
 * Reads a SMILES for drawing. `*` becomes an atom with atomic number 0, because the library would otherwise read it
 * as a query for any atom and turn the whole molecule into a query without hydrogens.
 *
 * @throws Error when the text is no SMILES.
 */
export function parseStructure(smiles: string): Molecule {
  // Astatine stands in while reading: it occurs in no formula the product accepts.
  const molecule = Molecule.fromSmiles(smiles.replaceAll(/\[\*\]|\*/g, '[At]'));
  // The library reads "((" as an empty molecule.
  if (molecule.getAllAtoms() === 0) throw new Error(`no structure in "${smiles}"`);
  for (let atom = 0; atom < molecule.getAllAtoms(); atom++) {
    if (molecule.getAtomicNo(atom) === ASTATINE) molecule.setAtomicNo(atom, ATTACHMENT);
  }
  molecule.ensureHelperArrays(Molecule.cHelperRings);
  return molecule;
}

const ASTATINE = 85;
/** Atomic number that stands for an attachment point. */
export const ATTACHMENT = 0;

/** SMILES of a drawn molecule, attachment points as `*`; stereo is dropped, only constitution counts. */
export function writeStructure(molecule: Molecule): string {
  const flat = molecule.getCompactCopy();
  flat.stripStereoInformation();
  for (let atom = 0; atom < flat.getAllAtoms(); atom++) flat.setAtomCustomLabel(atom, null);
  return flat.toIsomericSmiles().replaceAll('[?]', '*');
}
