import type { StructureAnalysis } from '../graph/analysis.js';
import { neighboursOf } from '../graph/automorphism.js';
import type { Equivalence } from '../graph/equivalence.js';

/** Hydrogens that share one shift: those of a class of atoms, or one half of them where a CH2 is diastereotopic. */
export interface ProtonGroup {
  /** Heavy atoms that carry them. */
  readonly atoms: readonly number[];
  readonly count: number;
  /** 0 = all hydrogens of the atoms; 1, 2 = the two halves of a diastereotopic CH2. */
  readonly half: 0 | 1 | 2;
}

/** Bonds to the next branching atom within which a diastereotopic CH2 shows two signals (SCIENCE.md 2.5: far away they coincide). */
const VISIBLE_DISTANCE = 2;

/** Lists the groups of a structure in order of their first atom. */
export function listProtonGroups(analysis: StructureAnalysis, equivalence: Equivalence): ProtonGroup[] {
  const { hydrogens, atomCount: n } = analysis.graph;
  const groups: ProtonGroup[] = [];
  const done = new Set<number>();
  for (let a = 0; a < n; a++) {
    const shiftClass = equivalence.shiftClasses[a];
    if (hydrogens[a] === 0 || done.has(shiftClass)) continue;
    done.add(shiftClass);
    const atoms: number[] = [];
    for (let b = a; b < n; b++) if (equivalence.shiftClasses[b] === shiftClass) atoms.push(b);
    if (isSplit(analysis, equivalence, a)) {
      groups.push({ atoms, count: atoms.length, half: 1 }, { atoms, count: atoms.length, half: 2 });
    } else groups.push({ atoms, count: atoms.length * hydrogens[a], half: 0 });
  }
  return groups;
}

/** Are the two hydrogens of this CH2 expected apart? */
export function isSplit(analysis: StructureAnalysis, equivalence: Equivalence, atom: number): boolean {
  if (equivalence.hydrogenTopicity[atom] !== 'diastereotopic') return false;
  if (analysis.hybridisation[atom] !== 3) return true;
  let shell = [atom];
  const seen = new Set(shell);
  for (let distance = 0; distance < VISIBLE_DISTANCE; distance++) {
    shell = shell.flatMap((a) => neighboursOf(analysis, a)).filter((b) => !seen.has(b) && seen.add(b) !== undefined);
    if (shell.some((b) => analysis.hybridisation[b] === 3 && analysis.degrees[b] >= 3 && analysis.graph.hydrogens[b] <= 1)) return true;
  }
  return false;
}
