import { parseExcludedPattern, type QueryGraph } from '../../shared/chemistry/excluded-pattern.js';
import type { PlausibilityRuleId } from '../../shared/plausibility/rules.js';
import type { EvidenceDocument } from '../../shared/schemas/evidence.js';
import type { RingLimits } from './layout.js';

/** What the evidence says of rings and patterns, as far as it can be kept while structures are being built. */
export interface StructureLimits {
  readonly rings: RingLimits;
  /** Excluded patterns that a partly built structure can be known to contain. */
  readonly patterns: readonly ExcludedPattern[];
}
export interface ExcludedPattern {
  readonly smiles: string;
  readonly query: QueryGraph;
}

/** Smallest rings that keep such bonds: cyclooctyne and 1,2-cyclononadiene (SCIENCE.md 2.4). */
const SMALLEST_ALKYNE_RING = 8;
const SMALLEST_ALLENE_RING = 9;

/**
 * Reads the limits from the options and the excluded fragments. Patterns that name aromatic atoms or bonds, and those that
 * only a library reads, are left to the finished structure: whether a ring is aromatic shows when it is complete.
 */
export function structureLimits({ fragments, options }: EvidenceDocument): StructureLimits {
  const holds = (rule: PlausibilityRuleId): boolean => options.plausibility && !options.disabledRules.includes(rule);
  return {
    rings: {
      smallest: options.ringSizes.min,
      largest: options.ringSizes.max,
      alkyne: holds('alkyneInSmallRing') ? SMALLEST_ALKYNE_RING : 0,
      allene: holds('alleneInSmallRing') ? SMALLEST_ALLENE_RING : 0,
    },
    patterns: fragments.excluded.flatMap(({ smiles }) => {
      const parsed = parseExcludedPattern(smiles);
      return parsed.kind === 'query' && showsEarly(parsed.query) ? [{ smiles, query: parsed.query }] : [];
    }),
  };
}

function showsEarly({ atoms, bonds }: QueryGraph): boolean {
  return (
    atoms.every(({ isAromatic }) => isAromatic !== true) &&
    bonds.every(({ kind }) => kind === 'single' || kind === 'double' || kind === 'triple' || kind === 'any')
  );
}
