import { NEIGHBOUR_STRIDE, type StructureAnalysis } from '../graph/analysis.js';

const TYPE_NAMES = ['C', 'CH', 'CH₂', 'CH₃', 'CH₄'] as const;
const SYMBOLS: Readonly<Record<number, string>> = { 7: 'N', 8: 'O', 9: 'F', 14: 'Si', 15: 'P', 16: 'S', 17: 'Cl', 35: 'Br', 53: 'I' };
/** Neighbours that shape a shift, strongest first. */
const TELLING = [8, 9, 7, 17, 35, 16, 53, 15, 14];

/** What a chemist calls a carbon: "ester C=O", "OCH₃", "aromatic CH", "CH₂". */
export function nameCarbon(s: StructureAnalysis, atom: number): string {
  const type = TYPE_NAMES[s.graph.hydrogens[atom]];
  const carbonyl = nameCarbonyl(s, atom);
  if (carbonyl !== null) return carbonyl;
  const hetero = heteroatomPrefix(s, atom);
  if (s.aromaticAtoms[atom] === 1) return hetero === '' || s.graph.hydrogens[atom] > 0 ? `aromatic ${type}` : `aromatic C–${hetero}`;
  if (s.hybridisation[atom] === 1) {
    if (hasBond(s, atom, 7, 3)) return 'nitrile C≡N';
    return hasBond(s, atom, 6, 3) ? `alkyne ${type}` : `cumulated ${type}`;
  }
  if (s.hybridisation[atom] === 2) {
    if (hasBond(s, atom, 7, 2)) return `C=N ${type}`;
    if (hasBond(s, atom, 16, 2)) return 'C=S';
    return `alkene ${type}${hetero === '' ? '' : ` on ${hetero}`}`;
  }
  if (hetero === '') return type;
  return s.graph.hydrogens[atom] === 0 ? `C–${hetero}` : `${hetero}${type}`;
}

/** What carries a hydrogen: the carbon's name, or OH, NH, NH₂, SH. */
export function nameProton(s: StructureAnalysis, atom: number): string {
  const z = s.graph.atomicNumbers[atom];
  if (z === 6) return s.graph.hydrogens[atom] === 1 && hasBond(s, atom, 8, 2) ? 'CHO' : nameCarbon(s, atom);
  const count = s.graph.hydrogens[atom];
  return `${SYMBOLS[z] ?? ''}H${count === 2 ? '₂' : count === 3 ? '₃' : ''}`;
}

function nameCarbonyl(s: StructureAnalysis, atom: number): string | null {
  if (s.graph.atomicNumbers[atom] !== 6 || !hasBond(s, atom, 8, 2) || s.aromaticAtoms[atom] === 1) return null;
  if (s.hybridisation[atom] === 1) return hasBond(s, atom, 7, 2) ? 'isocyanate C' : 'ketene C=O';
  let oxygens = 0;
  let nitrogens = 0;
  let hydroxyls = 0;
  let inRing = false;
  let acyloxy = false;
  for (let k = 0; k < s.degrees[atom]; k++) {
    const b = s.neighbours[atom * NEIGHBOUR_STRIDE + k];
    if (s.graph.bondOrders[atom * s.graph.atomCount + b] !== 1) continue;
    const z = s.graph.atomicNumbers[b];
    if (z === 7) nitrogens++;
    if (z === 17 || z === 35 || z === 9 || z === 53) return 'acid halide C=O';
    if (z === 16) return 'thioester C=O';
    if (z !== 8) continue;
    oxygens++;
    if (s.graph.hydrogens[b] > 0) hydroxyls++;
    if (s.smallestRingOfBond[atom * s.graph.atomCount + b] > 0) inRing = true;
    if (isBesideCarbonyl(s, b, atom)) acyloxy = true;
  }
  if (nitrogens > 0) return oxygens > 0 ? 'carbamate C=O' : nitrogens > 1 ? 'urea C=O' : 'amide C=O';
  if (oxygens > 1) return 'carbonate C=O';
  if (hydroxyls > 0) return 'acid C=O';
  if (acyloxy) return 'anhydride C=O';
  if (oxygens > 0) return inRing ? 'lactone C=O' : 'ester C=O';
  return s.graph.hydrogens[atom] > 0 ? 'aldehyde C=O' : 'ketone C=O';
}

function isBesideCarbonyl(s: StructureAnalysis, oxygen: number, except: number): boolean {
  for (let k = 0; k < s.degrees[oxygen]; k++) {
    const b = s.neighbours[oxygen * NEIGHBOUR_STRIDE + k];
    if (b !== except && hasBond(s, b, 8, 2)) return true;
  }
  return false;
}

function hasBond(s: StructureAnalysis, atom: number, element: number, order: number): boolean {
  for (let k = 0; k < s.degrees[atom]; k++) {
    const b = s.neighbours[atom * NEIGHBOUR_STRIDE + k];
    if (s.graph.atomicNumbers[b] === element && s.graph.bondOrders[atom * s.graph.atomCount + b] === order) return true;
  }
  return false;
}

/** Symbol of the strongest heteroatom bound by a single or aromatic bond, '' if there is none. */
function heteroatomPrefix(s: StructureAnalysis, atom: number): string {
  let best = TELLING.length;
  for (let k = 0; k < s.degrees[atom]; k++) {
    const b = s.neighbours[atom * NEIGHBOUR_STRIDE + k];
    const rank = TELLING.indexOf(s.graph.atomicNumbers[b]);
    const isOutside = s.aromaticBonds[atom * s.graph.atomCount + b] === 0 && s.graph.bondOrders[atom * s.graph.atomCount + b] === 1;
    if (rank !== -1 && rank < best && isOutside) best = rank;
  }
  return best === TELLING.length ? '' : SYMBOLS[TELLING[best]];
}
