import { ATOM_TYPE_COUNT, atomTypeIndex } from './atom-types.js';
import { ALKENE_Z } from './textbook-proton.js';

/** Zcis − Ztrans by type of the group across the double bond, ppm; 0 for groups without increments. */
const CIS_LESS_TRANS = new Float64Array(ATOM_TYPE_COUNT);
for (const [types, , cis, trans] of ALKENE_Z) for (const type of types) CIS_LESS_TRANS[atomTypeIndex(type)] = cis - trans;

/**
 * Shift of the hydrogen of =CH2 that is cis to the first group on the other carbon, less that of the hydrogen cis to
 * the second (or to hydrogen), ppm, by the increments for alkenes.
 *
 * @param first - atom type of the first group. @param second - of the second, null = hydrogen.
 */
export function vinylPlaceDifference(first: number, second: number | null): number {
  return CIS_LESS_TRANS[first] - (second === null ? 0 : CIS_LESS_TRANS[second]);
}
