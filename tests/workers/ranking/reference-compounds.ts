import type { EvidenceInput } from '../../../shared/schemas/evidence.js';

/** A compound with published spectra in CDCl3. */
export interface ReferenceCompound {
  /** Row of SCIENCE.md 11. */
  readonly row: number;
  readonly name: string;
  readonly formula: string;
  readonly smiles: string;
  /** Constitutions of the formula (SCIENCE.md 2.6) where the table states them. */
  readonly familySize: number | null;
  readonly evidence: EvidenceInput;
}

type Carbon = readonly [shift: number, hydrogens: 0 | 1 | 2 | 3 | null];
type Proton = readonly [shift: number, count?: number | null, multiplicity?: string | null, coupling?: number];

function compound(
  row: number,
  name: string,
  formula: string,
  smiles: string,
  familySize: number | null,
  carbons: readonly Carbon[],
  protons: readonly Proton[],
): ReferenceCompound {
  return {
    row,
    name,
    formula,
    smiles,
    familySize,
    evidence: {
      formula,
      carbonSignals: carbons.map(([shift, hydrogens]) => ({ shift, ...(hydrogens === null ? {} : { hydrogens }) })),
      protonSignals: protons.map(([shift, count, multiplicity, coupling]) => ({
        shift,
        ...(count === undefined || count === null ? {} : { count }),
        ...(multiplicity === undefined || multiplicity === null ? {} : { multiplicity }),
        ...(coupling === undefined ? {} : { couplings: [coupling] }),
      })),
    },
  };
}

/**
 * SCIENCE.md 11. Source: Babij et al., Org. Process Res. Dev. 2016, 20, 661, unless marked: F10 = Fulmer et al.,
 * Organometallics 2010, 29, 2176, quoted from memory; "memory" = from memory. Numbers of hydrogens under the signals follow
 * from the compounds where the table gives none; ranges stand as their middle, OH is left out as in the table.
 */
export const REFERENCE_COMPOUNDS: readonly ReferenceCompound[] = [
  compound(
    1,
    'acetone',
    'C3H6O',
    'CC(C)=O',
    9,
    [
      [207.07, 0],
      [30.92, 3],
    ],
    [[2.17, 6, 's']],
  ),
  compound(
    2,
    'ethanol',
    'C2H6O',
    'CCO',
    2,
    [
      [58.28, 2],
      [18.41, 3],
    ],
    [
      [3.72, 2, 'q', 7],
      [1.24, 3, 't', 7],
    ],
  ),
  compound(
    3,
    '2-propanol',
    'C3H8O',
    'CC(C)O',
    3,
    [
      [64.5, 1],
      [25.14, 3],
    ],
    [
      [4.03, 1, 'sept', 6.1],
      [1.21, 6, 'd', 6.1],
    ],
  ),
  compound(
    4,
    '1-butanol',
    'C4H10O',
    'CCCCO',
    7,
    [
      [62.76, 2],
      [34.91, 2],
      [18.92, 2],
      [13.86, 3],
    ],
    [
      [3.65, 2, 't'],
      [1.56, 2, 'm'],
      [1.395, 2, 'm'],
      [0.94, 3, 't', 7.3],
    ],
  ),
  compound(
    5,
    '2-methyl-1-propanol',
    'C4H10O',
    'CC(C)CO',
    7,
    [
      [69.8, 2],
      [30.87, 1],
      [18.86, 3],
    ],
    [
      [3.41, 2, 'd', 6.5],
      [1.77, 1, 'non', 6.6],
      [0.92, 6, 'd', 6.7],
    ],
  ),
  compound(
    6,
    '2-methyl-2-propanol',
    'C4H10O',
    'CC(C)(C)O',
    7,
    [
      [69.15, 0],
      [31.25, 3],
    ],
    [[1.27, 9, 's']],
  ),
  compound(
    7,
    'diethyl ether (F10)',
    'C4H10O',
    'CCOCC',
    7,
    [
      [65.91, 2],
      [15.2, 3],
    ],
    [
      [3.48, 4, 'q', 7],
      [1.21, 6, 't', 7],
    ],
  ),
  compound(
    8,
    'tert-butyl methyl ether',
    'C5H12O',
    'COC(C)(C)C',
    14,
    [
      [72.87, 0],
      [49.45, 3],
      [26.99, 3],
    ],
    [
      [3.22, 3, 's'],
      [1.19, 9, 's'],
    ],
  ),
  compound(
    9,
    'tetrahydrofuran',
    'C4H8O',
    'C1CCOC1',
    26,
    [
      [68, 2],
      [25.68, 2],
    ],
    [
      [3.745, 4, 'm'],
      [1.855, 4, 'm'],
    ],
  ),
  compound(
    10,
    '2-butanone',
    'C4H8O',
    'CCC(C)=O',
    26,
    [
      [209.56, 0],
      [36.89, 2],
      [29.49, 3],
      [7.86, 3],
    ],
    [
      [2.46, 2, 'q', 7],
      [2.14, 3, 's'],
      [1.06, 3, 't', 7],
    ],
  ),
  compound(
    11,
    '4-methyl-2-pentanone',
    'C6H12O',
    'CC(C)CC(C)=O',
    211,
    [
      [208.83, 0],
      [52.82, 2],
      [30.34, 3],
      [24.66, 1],
      [22.55, 3],
    ],
    [
      [2.31, 2, 'd', 7],
      [2.13, 1, 'non'],
      [2.12, 3, 's'],
      [0.92, 6, 'd', 6.7],
    ],
  ),
  compound(
    12,
    'cyclohexanone',
    'C6H10O',
    'O=C1CCCCC1',
    747,
    [
      [212.57, 0],
      [41.97, 2],
      [27, 2],
      [24.97, 2],
    ],
    [
      [2.33, 4, 't'],
      [1.85, 4, 'm'],
      [1.72, 2, 'm'],
    ],
  ),
  compound(
    13,
    'acetic acid',
    'C2H4O2',
    'CC(=O)O',
    10,
    [
      [175.99, 0],
      [20.81, 3],
    ],
    [[2.1, 3, 's']],
  ),
  compound(
    14,
    'methyl acetate',
    'C3H6O2',
    'COC(C)=O',
    34,
    [
      [171.48, 0],
      [51.58, 3],
      [20.67, 3],
    ],
    [
      [3.67, 3, 's'],
      [2.06, 3, 's'],
    ],
  ),
  compound(
    15,
    'ethyl acetate',
    'C4H8O2',
    'CCOC(C)=O',
    122,
    [
      [171.36, 0],
      [60.49, 2],
      [21.04, 3],
      [14.19, 3],
    ],
    [
      [4.12, 2, 'q', 7],
      [2.05, 3, 's'],
      [1.26, 3, 't', 7],
    ],
  ),
  compound(
    16,
    'isopropyl acetate',
    'C5H10O2',
    'CC(=O)OC(C)C',
    400,
    [
      [170.63, 0],
      [67.64, 1],
      [21.84, 3],
      [21.42, 3],
    ],
    [
      [4.99, 1, 'sept', 6.3],
      [2.02, 3, 's'],
      [1.23, 6, 'd', 6.3],
    ],
  ),
  compound(
    17,
    'butyl acetate',
    'C6H12O2',
    'CCCCOC(C)=O',
    1313,
    [
      [171.2, 0],
      [64.36, 2],
      [30.7, 2],
      [19.16, 2],
      [20.99, 3],
      [13.71, 3],
    ],
    [
      [4.07, 2, 't', 6.7],
      [2.05, 3, 's'],
      [1.585, 2, 'm'],
      [1.385, 2, 'm'],
      [0.94, 3, 't', 7.4],
    ],
  ),
  compound(
    18,
    'isoamyl acetate',
    'C7H14O2',
    'CC(=O)OCCC(C)C',
    4177,
    [
      [172.15, 0],
      [63.56, 2],
      [37.29, 2],
      [25.09, 1],
      [22.45, 3],
      [21.05, 3],
    ],
    [
      [4.1, 2, 't', 6.8],
      [2.05, 3, 's'],
      [1.68, 1, 'non'],
      [1.5, 2, 'q', 6.9],
      [0.92, 6, 'd', 6.6],
    ],
  ),
  compound(
    19,
    'dimethyl carbonate',
    'C3H6O3',
    'COC(=O)OC',
    102,
    [
      [156.45, 0],
      [54.89, 3],
    ],
    [[3.79, 6, 's']],
  ),
  compound(20, 'dichloromethane', 'CH2Cl2', 'ClCCl', null, [[53.52, 2]], [[5.3, 2, 's']]),
  compound(20, 'chloroform (F10)', 'CHCl3', 'ClC(Cl)Cl', null, [[77.36, 1]], [[7.26, 1, 's']]),
  compound(
    21,
    'acetonitrile',
    'C2H3N',
    'CC#N',
    null,
    [
      [116.43, 0],
      [1.89, 3],
    ],
    [[2.1, 3, 's']],
  ),
  compound(
    21,
    'N,N-dimethylformamide (F10), two rotamer methyls',
    'C3H7NO',
    'CN(C)C=O',
    84,
    [
      [162.62, 1],
      [36.5, 3],
      [31.45, 3],
    ],
    [
      [8.02, 1, 's'],
      [2.96, 3, 's'],
      [2.88, 3, 's'],
    ],
  ),
  compound(
    23,
    'toluene',
    'C7H8',
    'Cc1ccccc1',
    1031,
    [
      [137.88, 0],
      [129.05, 1],
      [128.24, 1],
      [125.31, 1],
      [21.45, 3],
    ],
    [
      [7.26, 2, 'm'],
      [7.16, 3, 'm'],
      [2.36, 3, 's'],
    ],
  ),
  compound(
    24,
    'o-xylene',
    'C8H10',
    'Cc1ccccc1C',
    4678,
    [
      [136.49, 0],
      [129.59, 1],
      [125.79, 1],
      [19.71, 3],
    ],
    [
      [7.11, 4, 'm'],
      [2.26, 6, 's'],
    ],
  ),
  compound(
    24,
    'm-xylene',
    'C8H10',
    'Cc1cccc(C)c1',
    4678,
    [
      [137.78, 0],
      [129.91, 1],
      [128.15, 1],
      [126.04, 1],
      [21.33, 3],
    ],
    [
      [7.15, 1, 't', 7.5],
      [6.98, 3, 'm'],
      [2.32, 6, 's'],
    ],
  ),
  compound(
    24,
    'p-xylene',
    'C8H10',
    'Cc1ccc(C)cc1',
    4678,
    [
      [134.67, 0],
      [128.92, 1],
      [20.94, 3],
    ],
    [
      [7.06, 4, 's'],
      [2.31, 6, 's'],
    ],
  ),
  compound(
    24,
    'ethylbenzene (1H from memory)',
    'C8H10',
    'CCc1ccccc1',
    4678,
    [
      [144.25, 0],
      [128.31, 1],
      [127.85, 1],
      [125.58, 1],
      [28.89, 2],
      [15.6, 3],
    ],
    [
      [2.65, 2, 'q', 7.6],
      [1.24, 3, 't', 7.6],
    ],
  ),
  compound(
    25,
    'anisole',
    'C7H8O',
    'COc1ccccc1',
    13175,
    [
      [159.59, 0],
      [129.44, 1],
      [120.67, 1],
      [113.93, 1],
      [55.14, 3],
    ],
    [
      [7.295, 2, 'm'],
      [6.93, 3, 'm'],
      [3.81, 3, 's'],
    ],
  ),
  compound(
    25,
    'benzyl alcohol',
    'C7H8O',
    'OCc1ccccc1',
    13175,
    [
      [140.98, 0],
      [128.54, 1],
      [127.61, 1],
      [126.98, 1],
      [65.31, 2],
    ],
    [
      [7.33, 5, 'm'],
      [4.63, 2],
    ],
  ),
  compound(
    26,
    'p-cymene',
    'C10H14',
    'CC(C)c1ccc(C)cc1',
    null,
    [
      [145.89, 0],
      [135.14, 0],
      [128.98, 1],
      [126.28, 1],
      [33.7, 1],
      [24.1, 3],
      [20.95, 3],
    ],
    [
      [7.115, 4, 'm'],
      [2.87, 1, 'sept', 6.9],
      [2.32, 3, 's'],
      [1.24, 6, 'd', 6.9],
    ],
  ),
  compound(
    27,
    'pyridine',
    'C5H5N',
    'c1ccncc1',
    685,
    [
      [149.9, 1],
      [135.89, 1],
      [123.71, 1],
    ],
    [
      [8.615, 2],
      [7.68, 1, 'tt'],
      [7.28, 2, 'm'],
    ],
  ),
  compound(
    27,
    'chlorobenzene',
    'C6H5Cl',
    'Clc1ccccc1',
    null,
    [
      [134.29, 0],
      [129.71, 1],
      [128.62, 1],
      [126.43, 1],
    ],
    [[7.29, 5, 'm']],
  ),
  compound(
    28,
    '2-methyltetrahydrofuran',
    'C5H10O',
    'CC1CCCO1',
    74,
    [
      [75.23, 1],
      [67.72, 2],
      [33.11, 2],
      [25.92, 2],
      [20.97, 3],
    ],
    [
      [3.94, 1],
      [3.89, 1],
      [3.71, 1],
      [1.92, 3, 'm'],
      [1.41, 1],
      [1.23, 3, 'd', 6.1],
    ],
  ),
  compound(
    29,
    'benzaldehyde (memory)',
    'C7H6O',
    'O=Cc1ccccc1',
    null,
    [
      [192.4, 1],
      [136.4, 0],
      [134.5, 1],
      [129.7, 1],
      [129, 1],
    ],
    [
      [10.02, 1, 's'],
      [7.88, 2, 'd'],
      [7.63, 1, 't'],
      [7.53, 2, 't'],
    ],
  ),
];

/**
 * Rows of SCIENCE.md 11 whose full families are too large for a test or need valence states that only a fragment brings
 * (vanillin, cinnamaldehyde, caffeine; DMSO, sulfolane): with the pieces that a chemist would name.
 */
export const REFERENCE_COMPOUNDS_WITH_FRAGMENTS: readonly ReferenceCompound[] = [
  withFragments(compound(22, 'dimethyl sulfoxide', 'C2H6OS', 'CS(C)=O', null, [[40.76, 3]], [[2.62, 6, 's']]), ['*S(*)=O']),
  withFragments(
    compound(
      22,
      'sulfolane',
      'C4H8O2S',
      'O=S1(=O)CCCC1',
      null,
      [
        [51.16, 2],
        [22.79, 2],
      ],
      [
        [3.035, 4, 'm'],
        [2.23, 4, 'm'],
      ],
    ),
    ['*S(*)(=O)=O'],
  ),
  withFragments(
    compound(
      30,
      'vanillin (memory)',
      'C8H8O3',
      'COc1cc(C=O)ccc1O',
      null,
      [
        [191, 1],
        [151.8, 0],
        [147.2, 0],
        [129.9, 0],
        [127.5, 1],
        [114.4, 1],
        [108.8, 1],
        [56.1, 3],
      ],
      [
        [9.83, 1, 's'],
        [7.43, 1, 'dd'],
        [7.42, 1, 'd'],
        [7.04, 1, 'd', 8.5],
        [3.96, 3, 's'],
      ],
    ),
    ['*C=O', '*OC'],
  ),
  withFragments(
    compound(
      31,
      'trans-cinnamaldehyde (memory)',
      'C9H8O',
      'O=CC=Cc1ccccc1',
      null,
      [
        [193.7, 1],
        [152.8, 1],
        [134, 0],
        [131.3, 1],
        [129.1, 1],
        [128.6, 1],
        [128.5, 1],
      ],
      [
        [9.7, 1, 'd', 7.7],
        [7.56, null, 'm'],
        [7.48, 1, 'd', 16],
        [7.43, null, 'm'],
        [6.72, 1, 'dd'],
      ],
    ),
    ['*c1ccccc1'],
  ),
  withFragments(
    compound(
      32,
      'caffeine (memory)',
      'C8H10N4O2',
      'Cn1cnc2c1c(=O)n(C)c(=O)n2C',
      null,
      [
        [155.4, 0],
        [151.7, 0],
        [148.7, 0],
        [141.4, 1],
        [107.6, 0],
        [33.6, 3],
        [29.7, 3],
        [27.9, 3],
      ],
      [
        [7.51, 1, 's'],
        [3.99, 3, 's'],
        [3.58, 3, 's'],
        [3.4, 3, 's'],
      ],
    ),
    ['*N(C)C(=O)N(C)*'],
  ),
];

function withFragments(base: ReferenceCompound, fragments: readonly string[]): ReferenceCompound {
  return { ...base, evidence: { ...base.evidence, fragments: { required: fragments.map((smiles) => ({ smiles })) } } };
}
