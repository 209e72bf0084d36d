/**
 * The plausibility rules by name: what a chemist would not expect to find in a sample tube. Pure data, so that the
 * client can show and switch them; what each one looks for in a structure is in `workers/ranking/plausibility`.
 *
 * The list follows the table of SCIENCE.md 2.4, whose authority is common practice. Valence, connectivity, formula and
 * required fragments, its first row, are no rules here: the enumeration builds nothing else.
 */
export interface PlausibilityRule {
  /** Stable: stored in evidence documents (`options.disabledRules`) and in funnels. */
  readonly id: string;
  /** `hard` rejects a constitution, `soft` costs `penalty` for each occurrence. */
  readonly kind: 'hard' | 'soft';
  /** What is looked for, for a list of switches. */
  readonly title: string;
  /** What it means for a candidate in which it was found, as one sentence. */
  readonly sentence: string;
  /** Log units (natural logarithm of prior odds) for each occurrence; 0 for hard rules. */
  readonly penalty: number;
  readonly source: string;
}

const TABLE = 'SCIENCE.md 2.4, common practice';
const TAUTOMERS = 'SCIENCE.md 2.3 (tautomers), common practice';
const STRAIN =
  'SCIENCE.md 2.4; strain energies from memory: cyclopropane 27.5, cyclobutane 26.3, cyclopropene 54, bicyclobutane 64 kcal/mol';

/**
 * Costs by the strength words of the table, "S" and "S strong". For three- and four-membered rings ("S mild per ring") the
 * odds were fitted: they fill the lists of possible constitutions far more than they fill samples (tests/bench/fit-ranking.ts).
 */
const PLAIN = 2;
const STRONG = 4;

/** Keeps the id as a literal type, so that a rule without its test in the engine does not compile. */
type Named<Id extends string> = PlausibilityRule & { readonly id: Id };
const hard = <Id extends string>(id: Id, title: string, sentence: string, source = TABLE): Named<Id> => ({
  id,
  kind: 'hard',
  title,
  sentence,
  penalty: 0,
  source,
});
const soft = <Id extends string>(id: Id, penalty: number, title: string, sentence: string, source = TABLE): Named<Id> => ({
  id,
  kind: 'soft',
  title,
  sentence,
  penalty,
  source,
});

export const PLAUSIBILITY_RULES = [
  hard(
    'alkyneInSmallRing',
    'Triple bond in a ring of fewer than 8 atoms',
    'A triple bond is bent too far in a ring of fewer than 8 atoms; cyclooctyne is the smallest that keeps.',
    `${TABLE}; limit from memory`,
  ),
  hard(
    'alleneInSmallRing',
    'Cumulated C=C=C in a ring of fewer than 9 atoms',
    'Cumulated double bonds C=C=C do not fit into a ring of fewer than 9 atoms.',
    `${TABLE}; limit from memory`,
  ),
  hard(
    'twistedRingAlkene',
    'C=C at a bridgehead, or trans in a ring of fewer than 8 atoms',
    'A C=C bond at a bridgehead would be trans in a ring of fewer than 8 atoms (Bredt).',
    `${TABLE}; J. Bredt, Liebigs Ann. Chem. 1924, 437, 1 (from memory)`,
  ),
  hard(
    'bridgedArene',
    'Aromatic ring bridged from meta or para by fewer than 5 atoms',
    'A bridge of fewer than 5 atoms over an aromatic ring from meta or para bends it too far; [5]cyclophanes are the smallest made.',
    `${TABLE} (the rule of Bredt carried over to arenes); limit from memory`,
  ),

  soft('alkyneInMediumRing', PLAIN, 'Triple bond in a ring of 8 to 11 atoms', 'A triple bond is bent in a ring of 8 to 11 atoms.', STRAIN),
  soft(
    'heterocumuleneInSmallRing',
    STRONG,
    'Cumulated C=C=N, N=C=N and the like in a ring of fewer than 9 atoms',
    'Cumulated double bonds do not fit into a ring of fewer than 9 atoms.',
  ),
  soft(
    'cumulatedDoubleBonds',
    PLAIN,
    'Cumulated double bonds of an unusual kind',
    'Cumulated double bonds other than allene, ketene, isocyanate, isothiocyanate, carbodiimide, azide or diazo are rare.',
  ),
  soft('peroxide', STRONG, 'O–O bond', 'Peroxides rarely reach the NMR tube unnoticed.'),
  soft(
    'nitrogenOxygenBond',
    STRONG,
    'N–O bond outside nitro, oxime, N-oxide and isoxazole',
    'An N–O single bond outside nitro, oxime, N-oxide and isoxazole groups is unusual.',
  ),
  soft(
    'nitrogenChain',
    STRONG,
    'Chain of three nitrogens',
    'Three nitrogens in a row outside azides and aromatic rings are rarely stable.',
  ),
  soft(
    'heteroatomHalogen',
    STRONG,
    'N–halogen, O–halogen or S–halogen bond',
    'Bonds from nitrogen, oxygen or divalent sulfur to a halogen react with most things.',
  ),
  soft(
    'geminalDiol',
    PLAIN,
    'Two OH on one saturated carbon',
    'Two OH groups on one carbon lose water, unless strong acceptors stand beside it.',
  ),
  soft(
    'hemiacetal',
    PLAIN,
    'Open-chain hemiacetal',
    'A hemiacetal outside a 5- or 6-membered ring falls apart into aldehyde or ketone and alcohol.',
  ),
  soft('geminalAminoAlcohol', PLAIN, 'OH and N on one saturated carbon', 'OH and nitrogen on one saturated carbon lose water or amine.'),
  soft(
    'geminalDiamine',
    PLAIN,
    'Two N, one with hydrogen, on one saturated carbon',
    'Two amino groups on one saturated carbon lose amine when one of them carries hydrogen.',
  ),
  soft('enol', PLAIN, 'Enol or ynol', 'An enol that no carbonyl group stabilises turns into the aldehyde or ketone.'),
  soft('enamine', PLAIN, 'Enamine with N–H', 'An enamine with N–H turns into the imine.'),
  soft('enethiol', PLAIN, 'SH on a C=C bond', 'A thiol on a C=C bond turns into the thiocarbonyl compound.'),
  soft('imidicAcid', STRONG, 'OH or SH on a C=N bond', 'An imidic acid turns into the amide (HS–C=N into the thioamide).', TAUTOMERS),
  soft(
    'nitrosoWithHydrogen',
    PLAIN,
    'Nitroso group on a carbon with hydrogen',
    'A nitroso group on a carbon with hydrogen turns into the oxime.',
    TAUTOMERS,
  ),
  soft(
    'unsubstitutedImine',
    PLAIN,
    'C=N–H of an aldehyde or ketone',
    'An imine C=N–H of an aldehyde or ketone reacts with water or with itself.',
  ),
  soft('thioaldehyde', STRONG, 'Thioaldehyde', 'Thioaldehydes polymerise.'),
  soft('thioketone', PLAIN, 'C=S of a ketone', 'Thioketones without a donor at the C=S carbon are rare.'),
  soft('antiaromaticRing', STRONG, 'Antiaromatic ring', 'A fully conjugated ring with 4, 8 … π electrons is avoided.'),
  soft('threeMemberedRing', 2.5, 'Three-membered ring', 'A three-membered ring costs strain.', `${STRAIN}; odds fitted on nmrshiftdb2`),
  soft('fourMemberedRing', 3, 'Four-membered ring', 'A four-membered ring costs strain.', `${STRAIN}; odds fitted on nmrshiftdb2`),
  soft(
    'smallRingAlkene',
    PLAIN,
    'Double bond inside a three- or four-membered ring',
    'A double bond inside a three- or four-membered ring doubles its strain.',
    STRAIN,
  ),
  soft(
    'fusedSmallRings',
    STRONG,
    'Fused three- and four-membered rings',
    'Small rings that share a bond (bicyclo[1.1.0], [2.1.0], propellanes, prismane, cubane types) are highly strained.',
    STRAIN,
  ),
  soft(
    'acylHalideWithNucleophile',
    STRONG,
    'Acid halide beside OH or NH',
    'An acid halide would react with the OH or NH of the same molecule.',
  ),
  soft(
    'aldehydeWithAmine',
    STRONG,
    'Aldehyde beside a primary amine',
    'An aldehyde would condense with the primary amine of the same molecule.',
  ),
  soft(
    'isocyanateWithNucleophile',
    STRONG,
    'Isocyanate beside OH or NH',
    'An isocyanate would react with the OH or NH of the same molecule.',
  ),
  soft('carbamicAcid', STRONG, 'Free carbamic acid', 'A free carbamic acid loses carbon dioxide.'),
  soft('betaKetoAcid', STRONG, 'β-Keto acid', 'A free β-keto acid loses carbon dioxide.'),
  soft('carbonicHalfEster', STRONG, 'Half ester of carbonic acid', 'A half ester of carbonic acid loses carbon dioxide.'),
  soft('orthoacid', STRONG, 'Orthoacid', 'A carbon with OH and two more single-bonded oxygens loses water or alcohol.'),
  soft(
    'alphaHaloHeteroatom',
    STRONG,
    'Halogen and OH, OR or N on one saturated carbon',
    'A halogen on the saturated carbon that carries OH, OR or N leaves as hydrogen halide.',
  ),
] satisfies readonly PlausibilityRule[];

export type PlausibilityRuleId = (typeof PLAUSIBILITY_RULES)[number]['id'];
