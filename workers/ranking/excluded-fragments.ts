import { Molecule, SSSearcher } from 'openchemlib';
import { parseExcludedPattern } from '../../shared/chemistry/excluded-pattern.js';
import type { EvidenceDocument } from '../../shared/schemas/evidence.js';
import type { StructureAnalysis } from '../graph/analysis.js';
import { moleculeFromGraph } from '../graph/openchemlib.js';
import { SubstructureMatcher } from './substructure.js';

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
 * @throws RangeError on a pattern that neither can read; documents are checked before they come here.
 */
export function compileExcludedFragments(evidence: EvidenceDocument): readonly ExcludedFragmentTest[] {
  const plain: ExcludedFragmentTest[] = [];
  const smarts: ExcludedFragmentTest[] = [];
  for (const { smiles } of evidence.fragments.excluded) {
    const reason = `${EXCLUDED_FRAGMENT_REASON_PREFIX}${smiles}`;
    const parsed = parseExcludedPattern(smiles);
    if (parsed.kind === 'fault') throw new RangeError(`excluded fragment ${smiles}: ${parsed.message}`);
    if (parsed.kind === 'query') {
      const matcher = new SubstructureMatcher(parsed.query);
      plain.push({ reason, occursIn: (structure) => matcher.occursIn(structure), findIn: (structure) => matcher.findIn(structure) });
    } else smarts.push({ reason, ...compileSmarts(smiles) });
  }
  return [...plain, ...smarts];
}

function compileSmarts(pattern: string): Omit<ExcludedFragmentTest, 'reason'> {
  const fragment = Molecule.fromSmiles(pattern, { smartsMode: 'smarts', noCoordinates: true, noStereo: true });
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
