import { PLAUSIBILITY_RULES, type PlausibilityRule, type PlausibilityRuleId } from '../../../shared/plausibility/rules.js';
import { countOf, parseFormula, type FormulaCounts } from '../../../shared/chemistry/formula.js';
import type { EvidenceDocument } from '../../../shared/schemas/evidence.js';
import type { StructureAnalysis } from '../../graph/analysis.js';
import { findAntiaromaticRings } from './antiaromatic-rings.js';
import type { OccurrenceReport } from './atom-queries.js';
import {
  findAlphaHaloHeteroatoms,
  findGeminalAminoAlcohols,
  findGeminalDiamines,
  findGeminalDiols,
  findHemiacetals,
  findOrthoacids,
} from './geminal-groups.js';
import {
  findCumulatedDoubleBonds,
  findHeteroatomHalogens,
  findNitrogenChains,
  findNitrogenOxygenBonds,
  findPeroxides,
} from './heteroatom-bonds.js';
import {
  findAcylHalidesWithNucleophile,
  findAldehydesWithAmine,
  findBetaKetoAcids,
  findCarbamicAcids,
  findCarbonicHalfEsters,
  findIsocyanatesWithNucleophile,
} from './incompatible-groups.js';
import {
  findAllenesInSmallRings,
  findAlkynesInMediumRings,
  findAlkynesInSmallRings,
  findBridgedArenes,
  findFourMemberedRings,
  findFusedSmallRings,
  findHeterocumulenesInSmallRings,
  findSmallRingAlkenes,
  findThreeMemberedRings,
  findTwistedRingAlkenes,
} from './ring-geometry.js';
import {
  findEnamines,
  findEnethiols,
  findEnols,
  findImidicAcids,
  findNitrosoWithHydrogens,
  findThioaldehydes,
  findThioketones,
  findUnsubstitutedImines,
} from './unstable-tautomers.js';

/** Counts the occurrences of a rule in a structure, and reports their atoms when asked. */
export type RuleTest = (structure: StructureAnalysis, report: OccurrenceReport) => number;

/** Fewest atoms of elements without which a rule has nothing to find; `X` = any halogen. */
type Needs = Readonly<Partial<Record<'C' | 'N' | 'O' | 'S' | 'X', number>>>;

const TESTS: Readonly<Record<PlausibilityRuleId, { readonly test: RuleTest; readonly needs: Needs }>> = {
  alkyneInSmallRing: { test: findAlkynesInSmallRings, needs: { C: 2 } },
  alleneInSmallRing: { test: findAllenesInSmallRings, needs: { C: 3 } },
  twistedRingAlkene: { test: findTwistedRingAlkenes, needs: { C: 2 } },
  bridgedArene: { test: findBridgedArenes, needs: {} },
  alkyneInMediumRing: { test: findAlkynesInMediumRings, needs: { C: 2 } },
  heterocumuleneInSmallRing: { test: findHeterocumulenesInSmallRings, needs: {} },
  cumulatedDoubleBonds: { test: findCumulatedDoubleBonds, needs: {} },
  peroxide: { test: findPeroxides, needs: { O: 2 } },
  nitrogenOxygenBond: { test: findNitrogenOxygenBonds, needs: { N: 1, O: 1 } },
  nitrogenChain: { test: findNitrogenChains, needs: { N: 3 } },
  heteroatomHalogen: { test: findHeteroatomHalogens, needs: { X: 1 } },
  geminalDiol: { test: findGeminalDiols, needs: { C: 1, O: 2 } },
  hemiacetal: { test: findHemiacetals, needs: { C: 1, O: 2 } },
  geminalAminoAlcohol: { test: findGeminalAminoAlcohols, needs: { C: 1, N: 1, O: 1 } },
  geminalDiamine: { test: findGeminalDiamines, needs: { C: 1, N: 2 } },
  enol: { test: findEnols, needs: { C: 2, O: 1 } },
  enamine: { test: findEnamines, needs: { C: 2, N: 1 } },
  enethiol: { test: findEnethiols, needs: { C: 2, S: 1 } },
  imidicAcid: { test: findImidicAcids, needs: { C: 1, N: 1 } },
  nitrosoWithHydrogen: { test: findNitrosoWithHydrogens, needs: { C: 1, N: 1, O: 1 } },
  unsubstitutedImine: { test: findUnsubstitutedImines, needs: { C: 1, N: 1 } },
  thioaldehyde: { test: findThioaldehydes, needs: { C: 1, S: 1 } },
  thioketone: { test: findThioketones, needs: { C: 1, S: 1 } },
  antiaromaticRing: { test: findAntiaromaticRings, needs: {} },
  threeMemberedRing: { test: findThreeMemberedRings, needs: {} },
  fourMemberedRing: { test: findFourMemberedRings, needs: {} },
  smallRingAlkene: { test: findSmallRingAlkenes, needs: {} },
  fusedSmallRings: { test: findFusedSmallRings, needs: {} },
  acylHalideWithNucleophile: { test: findAcylHalidesWithNucleophile, needs: { C: 1, O: 1, X: 1 } },
  aldehydeWithAmine: { test: findAldehydesWithAmine, needs: { C: 1, N: 1, O: 1 } },
  isocyanateWithNucleophile: { test: findIsocyanatesWithNucleophile, needs: { C: 1, N: 1, O: 1 } },
  carbamicAcid: { test: findCarbamicAcids, needs: { C: 1, N: 1, O: 2 } },
  betaKetoAcid: { test: findBetaKetoAcids, needs: { C: 3, O: 3 } },
  carbonicHalfEster: { test: findCarbonicHalfEsters, needs: { C: 1, O: 3 } },
  orthoacid: { test: findOrthoacids, needs: { C: 1, O: 3 } },
  alphaHaloHeteroatom: { test: findAlphaHaloHeteroatoms, needs: { C: 1, X: 1 } },
};

/** A rule that is switched on and that the formula leaves room for. */
export interface ActiveRule {
  readonly rule: PlausibilityRule;
  readonly test: RuleTest;
  /** Reason code of a rejection; made once, so that the hot path builds no strings. */
  readonly reason: string;
}

export const PLAUSIBILITY_REASON_PREFIX = 'plausibility:';

/**
 * Rules to apply to a document's candidates, cheapest first within each kind.
 *
 * @param evidence - options say which rules are off; an unreadable formula leaves all of them on.
 */
export function selectRules(evidence: EvidenceDocument): { readonly hard: readonly ActiveRule[]; readonly soft: readonly ActiveRule[] } {
  if (!evidence.options.plausibility) return { hard: [], soft: [] };
  const formula = parseFormula(evidence.formula);
  const active: ActiveRule[] = PLAUSIBILITY_RULES.filter(({ id }) => !evidence.options.disabledRules.includes(id))
    .filter(({ id }) => !formula.ok || hasEnough(formula.counts, TESTS[id].needs))
    .map((rule) => ({ rule, test: TESTS[rule.id].test, reason: `${PLAUSIBILITY_REASON_PREFIX}${rule.id}` }));
  return { hard: active.filter(({ rule }) => rule.kind === 'hard'), soft: active.filter(({ rule }) => rule.kind === 'soft') };
}

function hasEnough(counts: FormulaCounts, needs: Needs): boolean {
  const halogens = countOf(counts, 'F') + countOf(counts, 'Cl') + countOf(counts, 'Br') + countOf(counts, 'I');
  return (
    countOf(counts, 'C') >= (needs.C ?? 0) &&
    countOf(counts, 'N') >= (needs.N ?? 0) &&
    countOf(counts, 'O') >= (needs.O ?? 0) &&
    countOf(counts, 'S') >= (needs.S ?? 0) &&
    halogens >= (needs.X ?? 0)
  );
}
