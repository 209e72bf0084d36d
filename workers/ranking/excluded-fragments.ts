import { Molecule, SSSearcher } from 'openchemlib';
import { parseExcludedPattern } from '../../shared/chemistry/excluded-pattern.js';
import type { EvidenceDocument } from '../../shared/schemas/evidence.js';
import { ProblemError } from '../enumeration/problem.js';
import type { StructureAnalysis } from '../graph/analysis.js';
import { moleculeFromGraph } from '../graph/openchemlib.js';
import { SubstructureMatcher } from '../graph/substructure.js';

export const EXCLUDED_FRAGMENT_REASON_PREFIX = 'excludedFragment:';

/** An excluded fragment, ready to be looked for. */
export interface ExcludedFragmentTest {
  readonly reason: string;
  occursIn(structure: StructureAnalysis): boolean;
  /** Atoms of one occurrence, null if there is none. */
  findIn(structure: StructureAnalysis): readonly number[] | null;
}

/**
 * Compiles the excluded fragments of a document. Plain patterns run on the own matcher; those that need SMARTS go
 * through openchemlib, some hundred times slower, so they are tested last.
 *
 * @throws ProblemError, naming the field, on a pattern that neither can read.
 */
export function compileExcludedFragments(evidence: EvidenceDocument): readonly ExcludedFragmentTest[] {
  const plain: ExcludedFragmentTest[] = [];
  const smarts: ExcludedFragmentTest[] = [];
  evidence.fragments.excluded.forEach(({ smiles }, index) => {
    const path = `fragments.excluded[${index}].smiles`;
    const reason = `${EXCLUDED_FRAGMENT_REASON_PREFIX}${smiles}`;
    const parsed = parseExcludedPattern(smiles);
    if (parsed.kind === 'fault') throw new ProblemError([{ path, message: parsed.message }]);
    if (parsed.kind === 'query') {
      const matcher = new SubstructureMatcher(parsed.query);
      plain.push({ reason, occursIn: (structure) => matcher.occursIn(structure), findIn: (structure) => matcher.findIn(structure) });
    } else smarts.push({ reason, ...compileSmarts(smiles, path) });
  });
  return [...plain, ...smarts];
}

function readSmarts(pattern: string, path: string): Molecule {
  try {
    return Molecule.fromSmiles(pattern, { smartsMode: 'smarts', noCoordinates: true, noStereo: true });
  } catch (error) {
    const detail = error instanceof Error ? error.message : String(error);
    throw new ProblemError([{ path, message: `expected a SMILES or SMARTS; this one cannot be read (${detail})` }]);
  }
}

function compileSmarts(pattern: string, path: string): Omit<ExcludedFragmentTest, 'reason'> {
  const fragment = readSmarts(pattern, path);
  fragment.setFragment(true);
  const searcher = new SSSearcher();
  searcher.setFragment(fragment);
  return {
    occursIn(structure) {
      searcher.setMolecule(moleculeFromGraph(structure.graph));
      return searcher.isFragmentInMolecule();
    },
    findIn(structure) {
      searcher.setMolecule(moleculeFromGraph(structure.graph));
      if (searcher.findFragmentInMolecule({ countMode: 'firstMatch' }) === 0) return null;
      return searcher.getMatchList()[0].filter((atom) => atom >= 0);
    },
  };
}
