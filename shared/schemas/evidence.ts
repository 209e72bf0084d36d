import { z } from 'zod';

/** Upper bounds of an evidence document; everything a user sends has one. */
export const EVIDENCE_LIMITS = {
  heavyAtoms: 40,
  fragments: 20,
  fragmentCount: 20,
  smilesLength: 300,
  signals: 120,
  couplings: 8,
  bands: 120,
  peaks: 400,
  correlations: 400,
  keep: 10_000,
  seconds: 86_400,
  constitutions: 1_000_000_000_000,
} as const;

const between = (low: number, high: number, unit = '') =>
  z
    .number({ error: `expected a number between ${low} and ${high}${unit}` })
    .min(low, { error: `expected a number between ${low} and ${high}${unit}` })
    .max(high, { error: `expected a number between ${low} and ${high}${unit}` });
const wholeBetween = (low: number, high: number) =>
  z
    .number({ error: `expected a whole number between ${low} and ${high}` })
    .int({ error: `expected a whole number between ${low} and ${high}` })
    .min(low, { error: `expected a whole number between ${low} and ${high}` })
    .max(high, { error: `expected a whole number between ${low} and ${high}` });

const smilesText = z
  .string({ error: 'expected a SMILES' })
  .trim()
  .min(1, { error: 'expected a SMILES' })
  .max(EVIDENCE_LIMITS.smilesLength, { error: `expected at most ${EVIDENCE_LIMITS.smilesLength} characters` });

export const requiredFragment = z.strictObject({
  smiles: smilesText,
  count: wholeBetween(1, EVIDENCE_LIMITS.fragmentCount).default(1),
  /** Name shown to people; no meaning for the engine. */
  label: z.string().max(80).optional(),
});
export const excludedFragment = z.strictObject({ smiles: smilesText, label: z.string().max(80).optional() });

export const HYBRIDISATIONS = ['sp3', 'sp2', 'sp'] as const;
/**
 * What a 13C signal says of its carbon beside the attached hydrogens. sp3: single bonds only; sp2: one double bond,
 * aromatic ones included; sp: a triple bond or two double bonds. heteroNeighbours: bonded atoms other than C and H.
 */
export const carbonWindow = z.strictObject({
  hybridisations: z.array(z.enum(HYBRIDISATIONS)).min(1, { error: 'expected at least one of sp3, sp2, sp' }).max(3),
  heteroNeighbours: z
    .strictObject({ min: wholeBetween(0, 4).default(0), max: wholeBetween(0, 4).default(4) })
    .refine(({ min, max }) => max >= min, { error: 'expected max to be at least min', path: ['max'] })
    .prefault({}),
});
export type CarbonWindow = z.infer<typeof carbonWindow>;

/** One 13C resonance. shift in ppm; hydrogens = attached H of each such carbon; count = carbons under it, absent = not known. */
export const carbonSignal = z.strictObject({
  shift: between(-50, 300, ' ppm'),
  hydrogens: wholeBetween(0, 3).optional(),
  count: wholeBetween(1, 40).optional(),
  /** Absent: follows from the shift where `options.shiftWindows` holds. null: no window for this signal. */
  window: carbonWindow.nullable().optional(),
});

export const MULTIPLICITY_PATTERN = /^(br )?(s|m|br|([dtq]|quint|sext|sept|oct|non){1,4})$/;
/** One 1H resonance. shift in ppm, count = number of H, couplings in Hz. */
export const protonSignal = z.strictObject({
  shift: between(-5, 25, ' ppm'),
  count: wholeBetween(1, 90).optional(),
  multiplicity: z
    .string()
    .trim()
    .regex(MULTIPLICITY_PATTERN, {
      error: 'expected the usual letters: s d t q quint sext sept oct non m br, or combinations such as dd, dt, br s',
    })
    .optional(),
  couplings: z
    .array(between(0, 100, ' Hz'))
    .max(EVIDENCE_LIMITS.couplings)
    .optional(),
  /** Set when people know that the proton exchanges (OH, NH, SH). */
  exchangeable: z.boolean().optional(),
});

export const infraredBand = z.strictObject({
  wavenumber: between(200, 4500, ' cm-1'),
  intensity: z.enum(['weak', 'medium', 'strong', 'broad']).optional(),
});
export const massPeak = z.strictObject({ mz: between(1, 5000, ' Th'), intensity: between(0, 1e12).optional() });

const protonShift = between(-5, 25, ' ppm');
const carbonShift = between(-50, 300, ' ppm');
export const correlations = z.strictObject({
  cosy: z
    .array(z.tuple([protonShift, protonShift]))
    .max(EVIDENCE_LIMITS.correlations)
    .default([]),
  hsqc: z
    .array(z.tuple([carbonShift, protonShift]))
    .max(EVIDENCE_LIMITS.correlations)
    .default([]),
  hmbc: z
    .array(z.tuple([protonShift, carbonShift]))
    .max(EVIDENCE_LIMITS.correlations)
    .default([]),
  /** Most bonds between the proton and the carbon of an HMBC pair. */
  hmbcBonds: wholeBetween(2, 5).default(3),
  /** Most bonds between the protons of a COSY pair. */
  cosyBonds: wholeBetween(2, 5).default(3),
  /** How many COSY and HMBC pairs together may span more bonds than that. */
  exceptions: wholeBetween(0, 50).default(0),
});

export const ringSizeLimits = z
  .strictObject({
    min: wholeBetween(3, 40).default(3),
    max: wholeBetween(3, 40).nullable().default(null),
  })
  .refine((sizes) => sizes.max === null || sizes.max >= sizes.min, { error: 'expected max to be at least min', path: ['max'] });

/**
 * Groups with a higher or charge-separated valence that the search can form by itself; the atoms as in a fragment.
 */
export const VALENCE_GROUPS = ['nitro', 'nOxide', 'azide', 'diazo', 'isocyanide', 'sulfoxide', 'sulfone', 'phosphorusOxide'] as const;
export type ValenceGroup = (typeof VALENCE_GROUPS)[number];

export const evidenceOptions = z.strictObject({
  solvent: z.string().trim().max(60).default('CDCl3'),
  mergeResonanceForms: z.boolean().default(true),
  /** Master switch of the plausibility rules (hard and soft). */
  plausibility: z.boolean().default(true),
  /** Ids of plausibility rules switched off one by one (workers/ranking/plausibility lists them). */
  disabledRules: z.array(z.string().max(60)).max(80).default([]),
  ringSizes: ringSizeLimits.default({ min: 3, max: null }),
  /**
   * Whether every protonated carbon shows in the 13C list. `complete`: a CHn type without a signal is absent
   * from the molecule; quaternary carbons may be missing either way. `partial`: signals are only a lower bound.
   */
  carbonList: z.enum(['complete', 'partial']).default('complete'),
  /**
   * Groups of a higher or charge-separated valence that may be formed. Absent: all of them in a ranking, none when
   * constitutions are only counted or listed. What fragments bring is always allowed.
   */
  valenceGroups: z.array(z.enum(VALENCE_GROUPS)).max(VALENCE_GROUPS.length).optional(),
  /** Whether 13C shifts without a window of their own get one. Absent: yes in a ranking, no when counting or listing. */
  shiftWindows: z.boolean().optional(),
  keep: wholeBetween(1, EVIDENCE_LIMITS.keep).default(1000),
  maxSeconds: between(0.1, EVIDENCE_LIMITS.seconds, ' s').nullable().default(null),
  /** Constitutions after which a run ends, incomplete. Absent: no limit. */
  maxConstitutions: wholeBetween(1, EVIDENCE_LIMITS.constitutions).optional(),
});
export type EvidenceOptions = z.infer<typeof evidenceOptions>;

const list = <T extends z.ZodType>(item: T, max: number, what: string) =>
  z
    .array(item)
    .max(max, { error: `expected at most ${max} ${what}` })
    .default([]);

/**
 * The evidence document (DESIGN.md 6): what API, command line, tests and export use. Only `formula` is needed.
 * Shape only; whether the pieces agree with one another is `checkEvidence` (shared/chemistry/check-evidence).
 */
export const evidenceDocument = z.strictObject({
  formula: z
    .string({ error: 'expected a molecular formula such as C9H10O2' })
    .trim()
    .min(1, { error: 'expected a molecular formula such as C9H10O2' })
    .max(60),
  fragments: z
    .strictObject({
      required: list(requiredFragment, EVIDENCE_LIMITS.fragments, 'fragments'),
      excluded: list(excludedFragment, EVIDENCE_LIMITS.fragments, 'fragments'),
    })
    .prefault({}),
  carbonSignals: list(carbonSignal, EVIDENCE_LIMITS.signals, 'signals'),
  protonSignals: list(protonSignal, EVIDENCE_LIMITS.signals, 'signals'),
  infraredBands: list(infraredBand, EVIDENCE_LIMITS.bands, 'bands'),
  massPeaks: list(massPeak, EVIDENCE_LIMITS.peaks, 'peaks'),
  correlations: correlations.prefault({}),
  options: evidenceOptions.prefault({}),
});
/** What people may send: defaults still missing. */
export type EvidenceInput = z.input<typeof evidenceDocument>;
/** A parsed document: every list and option present. */
export type EvidenceDocument = z.infer<typeof evidenceDocument>;
export type CarbonSignal = z.infer<typeof carbonSignal>;
export type ProtonSignal = z.infer<typeof protonSignal>;
export type RequiredFragment = z.infer<typeof requiredFragment>;
export type ExcludedFragment = z.infer<typeof excludedFragment>;
