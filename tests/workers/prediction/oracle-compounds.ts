/**
 * Compounds of SCIENCE.md 11 in CDCl3. Carbon shifts with attached hydrogens; protons as shift and multiplicity,
 * hydrogens on O left out. Source: Babij et al., Org. Process Res. Dev. 2016, 20, 661, unless `source` says otherwise
 * (F10 = Fulmer et al., Organometallics 2010, 29, 2176; G97 = Gottlieb et al., J. Org. Chem. 1997, 62, 7512; both from memory).
 */
export interface OracleCompound {
  readonly name: string;
  readonly smiles: string;
  readonly carbons: ReadonlyArray<readonly [shift: number, hydrogens: number]>;
  readonly protons: ReadonlyArray<readonly [shift: number, multiplicity: string]>;
  readonly source?: string;
}

export const ORACLE_COMPOUNDS: readonly OracleCompound[] = [
  {
    name: 'acetone',
    smiles: 'CC(C)=O',
    carbons: [
      [207.07, 0],
      [30.92, 3],
    ],
    protons: [[2.17, 's']],
  },
  {
    name: 'ethanol',
    smiles: 'CCO',
    carbons: [
      [58.28, 2],
      [18.41, 3],
    ],
    protons: [
      [3.72, 'q'],
      [1.24, 't'],
    ],
  },
  {
    name: '2-propanol',
    smiles: 'CC(C)O',
    carbons: [
      [64.5, 1],
      [25.14, 3],
    ],
    protons: [
      [4.03, 'sept'],
      [1.21, 'd'],
    ],
  },
  {
    name: '1-butanol',
    smiles: 'CCCCO',
    carbons: [
      [62.76, 2],
      [34.91, 2],
      [18.92, 2],
      [13.86, 3],
    ],
    protons: [
      [3.65, 't'],
      [1.56, 'm'],
      [1.4, 'm'],
      [0.94, 't'],
    ],
  },
  {
    name: '2-methyl-1-propanol',
    smiles: 'CC(C)CO',
    carbons: [
      [69.8, 2],
      [30.87, 1],
      [18.86, 3],
    ],
    protons: [
      [3.41, 'd'],
      [1.77, 'non'],
      [0.92, 'd'],
    ],
  },
  {
    name: '2-methyl-2-propanol',
    smiles: 'CC(C)(C)O',
    carbons: [
      [69.15, 0],
      [31.25, 3],
    ],
    protons: [[1.27, 's']],
  },
  {
    name: 'diethyl ether',
    smiles: 'CCOCC',
    carbons: [
      [65.91, 2],
      [15.2, 3],
    ],
    protons: [
      [3.48, 'q'],
      [1.21, 't'],
    ],
    source: '13C F10, 1H G97',
  },
  {
    name: 'MTBE',
    smiles: 'COC(C)(C)C',
    carbons: [
      [72.87, 0],
      [49.45, 3],
      [26.99, 3],
    ],
    protons: [
      [3.22, 's'],
      [1.19, 's'],
    ],
  },
  {
    name: 'THF',
    smiles: 'C1CCOC1',
    carbons: [
      [68, 2],
      [25.68, 2],
    ],
    protons: [
      [3.745, 'm'],
      [1.855, 'm'],
    ],
  },
  {
    name: '2-butanone',
    smiles: 'CCC(C)=O',
    carbons: [
      [209.56, 0],
      [36.89, 2],
      [29.49, 3],
      [7.86, 3],
    ],
    protons: [
      [2.46, 'q'],
      [2.14, 's'],
      [1.06, 't'],
    ],
  },
  {
    name: '4-methyl-2-pentanone',
    smiles: 'CC(C)CC(C)=O',
    carbons: [
      [208.83, 0],
      [52.82, 2],
      [30.34, 3],
      [24.66, 1],
      [22.55, 3],
    ],
    protons: [
      [2.31, 'd'],
      [2.13, 'non'],
      [2.12, 's'],
      [0.92, 'd'],
    ],
  },
  {
    name: 'cyclohexanone',
    smiles: 'O=C1CCCCC1',
    carbons: [
      [212.57, 0],
      [41.97, 2],
      [27, 2],
      [24.97, 2],
    ],
    protons: [
      [2.33, 't'],
      [1.85, 'm'],
      [1.72, 'm'],
    ],
  },
  {
    name: 'acetic acid',
    smiles: 'CC(=O)O',
    carbons: [
      [175.99, 0],
      [20.81, 3],
    ],
    protons: [[2.1, 's']],
  },
  {
    name: 'methyl acetate',
    smiles: 'COC(C)=O',
    carbons: [
      [171.48, 0],
      [51.58, 3],
      [20.67, 3],
    ],
    protons: [
      [3.67, 's'],
      [2.06, 's'],
    ],
  },
  {
    name: 'ethyl acetate',
    smiles: 'CCOC(C)=O',
    carbons: [
      [171.36, 0],
      [60.49, 2],
      [21.04, 3],
      [14.19, 3],
    ],
    protons: [
      [4.12, 'q'],
      [2.05, 's'],
      [1.26, 't'],
    ],
  },
  {
    name: 'isopropyl acetate',
    smiles: 'CC(=O)OC(C)C',
    carbons: [
      [170.63, 0],
      [67.64, 1],
      [21.84, 3],
      [21.42, 3],
    ],
    protons: [
      [4.99, 'sept'],
      [2.02, 's'],
      [1.23, 'd'],
    ],
  },
  {
    name: 'butyl acetate',
    smiles: 'CCCCOC(C)=O',
    carbons: [
      [171.2, 0],
      [64.36, 2],
      [30.7, 2],
      [19.16, 2],
      [20.99, 3],
      [13.71, 3],
    ],
    protons: [
      [4.07, 't'],
      [2.05, 's'],
      [1.585, 'm'],
      [1.385, 'm'],
      [0.94, 't'],
    ],
  },
  {
    name: 'isoamyl acetate',
    smiles: 'CC(=O)OCCC(C)C',
    carbons: [
      [171.2, 0],
      [63.56, 2],
      [37.29, 2],
      [25.09, 1],
      [22.45, 3],
      [21.05, 3],
    ],
    protons: [
      [4.1, 't'],
      [2.05, 's'],
      [1.68, 'non'],
      [1.5, 'q'],
      [0.92, 'd'],
    ],
  },
  {
    name: 'dimethyl carbonate',
    smiles: 'COC(=O)OC',
    carbons: [
      [156.45, 0],
      [54.89, 3],
    ],
    protons: [[3.79, 's']],
  },
  { name: 'dichloromethane', smiles: 'ClCCl', carbons: [[53.52, 2]], protons: [[5.3, 's']] },
  { name: 'chloroform', smiles: 'ClC(Cl)Cl', carbons: [[77.36, 1]], protons: [[7.26, 's']], source: '13C F10' },
  {
    name: 'acetonitrile',
    smiles: 'CC#N',
    carbons: [
      [116.43, 0],
      [1.89, 3],
    ],
    protons: [[2.1, 's']],
  },
  {
    name: 'DMF',
    smiles: 'CN(C)C=O',
    carbons: [
      [162.62, 1],
      [36.5, 3],
      [31.45, 3],
    ],
    protons: [
      [8.02, 's'],
      [2.96, 's'],
      [2.88, 's'],
    ],
    source: 'F10',
  },
  { name: 'DMSO', smiles: 'CS(C)=O', carbons: [[40.76, 3]], protons: [[2.62, 's']] },
  {
    name: 'sulfolane',
    smiles: 'O=S1(=O)CCCC1',
    carbons: [
      [51.16, 2],
      [22.79, 2],
    ],
    protons: [
      [3.035, 'm'],
      [2.23, 'm'],
    ],
  },
  {
    name: 'toluene',
    smiles: 'Cc1ccccc1',
    carbons: [
      [137.88, 0],
      [129.05, 1],
      [128.24, 1],
      [125.31, 1],
      [21.45, 3],
    ],
    protons: [
      [7.26, 'm'],
      [7.16, 'm'],
      [7.16, 'm'],
      [2.36, 's'],
    ],
  },
  {
    name: 'o-xylene',
    smiles: 'Cc1ccccc1C',
    carbons: [
      [136.49, 0],
      [129.59, 1],
      [125.79, 1],
      [19.71, 3],
    ],
    protons: [
      [7.11, 'm'],
      [7.11, 'm'],
      [2.26, 's'],
    ],
  },
  {
    name: 'm-xylene',
    smiles: 'Cc1cccc(C)c1',
    carbons: [
      [137.78, 0],
      [129.91, 1],
      [128.15, 1],
      [126.04, 1],
      [21.33, 3],
    ],
    protons: [
      [7.15, 't'],
      [6.98, 'm'],
      [6.98, 'm'],
      [2.32, 's'],
    ],
  },
  {
    name: 'p-xylene',
    smiles: 'Cc1ccc(C)cc1',
    carbons: [
      [134.67, 0],
      [128.92, 1],
      [20.94, 3],
    ],
    protons: [
      [7.06, 's'],
      [2.31, 's'],
    ],
  },
  {
    name: 'ethylbenzene',
    smiles: 'CCc1ccccc1',
    carbons: [
      [144.25, 0],
      [128.31, 1],
      [127.85, 1],
      [125.58, 1],
      [28.89, 2],
      [15.6, 3],
    ],
    protons: [
      [2.65, 'q'],
      [1.24, 't'],
    ],
    source: '1H from memory',
  },
  {
    name: 'anisole',
    smiles: 'COc1ccccc1',
    carbons: [
      [159.59, 0],
      [129.44, 1],
      [120.67, 1],
      [113.93, 1],
      [55.14, 3],
    ],
    protons: [
      [7.295, 'm'],
      [6.93, 'm'],
      [6.93, 'm'],
      [3.81, 's'],
    ],
  },
  {
    name: 'benzyl alcohol',
    smiles: 'OCc1ccccc1',
    carbons: [
      [140.98, 0],
      [128.54, 1],
      [127.61, 1],
      [126.98, 1],
      [65.31, 2],
    ],
    protons: [
      [7.33, 'm'],
      [7.33, 'm'],
      [7.33, 'm'],
      [4.63, 's'],
    ],
  },
  {
    name: 'p-cymene',
    smiles: 'CC(C)c1ccc(C)cc1',
    carbons: [
      [145.89, 0],
      [135.14, 0],
      [128.98, 1],
      [126.28, 1],
      [33.7, 1],
      [24.1, 3],
      [20.95, 3],
    ],
    protons: [
      [7.115, 'm'],
      [7.115, 'm'],
      [2.87, 'sept'],
      [2.32, 's'],
      [1.24, 'd'],
    ],
  },
  {
    name: 'pyridine',
    smiles: 'c1ccncc1',
    carbons: [
      [149.9, 1],
      [135.89, 1],
      [123.71, 1],
    ],
    protons: [
      [8.615, 'm'],
      [7.68, 'm'],
      [7.28, 'm'],
    ],
  },
  {
    name: 'chlorobenzene',
    smiles: 'Clc1ccccc1',
    carbons: [
      [134.29, 0],
      [129.71, 1],
      [128.62, 1],
      [126.43, 1],
    ],
    protons: [
      [7.29, 'm'],
      [7.29, 'm'],
      [7.29, 'm'],
    ],
  },
  {
    name: '2-methyltetrahydrofuran',
    smiles: 'CC1CCCO1',
    carbons: [
      [75.23, 1],
      [67.72, 2],
      [33.11, 2],
      [25.92, 2],
      [20.97, 3],
    ],
    protons: [
      [3.94, 'm'],
      [3.89, 'm'],
      [3.71, 'm'],
      [1.94, 'm'],
      [1.9, 'm'],
      [1.9, 'm'],
      [1.41, 'm'],
      [1.23, 'd'],
    ],
  },
  {
    name: 'benzaldehyde',
    smiles: 'O=Cc1ccccc1',
    carbons: [
      [192.4, 1],
      [136.4, 0],
      [134.5, 1],
      [129.7, 1],
      [129, 1],
    ],
    protons: [
      [10.02, 's'],
      [7.88, 'd'],
      [7.63, 't'],
      [7.53, 't'],
    ],
    source: 'from memory',
  },
  {
    name: 'vanillin',
    smiles: 'COc1cc(C=O)ccc1O',
    carbons: [
      [191, 1],
      [151.8, 0],
      [147.2, 0],
      [129.9, 0],
      [127.5, 1],
      [114.4, 1],
      [108.8, 1],
      [56.1, 3],
    ],
    protons: [
      [9.83, 's'],
      [7.43, 'dd'],
      [7.42, 'd'],
      [7.04, 'd'],
      [3.96, 's'],
    ],
    source: 'from memory',
  },
  {
    name: 'trans-cinnamaldehyde',
    smiles: 'O=CC=Cc1ccccc1',
    carbons: [
      [193.7, 1],
      [152.8, 1],
      [134, 0],
      [131.3, 1],
      [129.1, 1],
      [128.6, 1],
      [128.5, 1],
    ],
    protons: [
      [9.7, 'd'],
      [7.56, 'm'],
      [7.48, 'd'],
      [7.43, 'm'],
      [7.43, 'm'],
      [6.72, 'dd'],
    ],
    source: 'from memory',
  },
  {
    name: 'caffeine',
    smiles: 'Cn1cnc2c1c(=O)n(C)c(=O)n2C',
    carbons: [
      [155.4, 0],
      [151.7, 0],
      [148.7, 0],
      [141.4, 1],
      [107.6, 0],
      [33.6, 3],
      [29.7, 3],
      [27.9, 3],
    ],
    protons: [
      [7.51, 's'],
      [3.99, 's'],
      [3.58, 's'],
      [3.4, 's'],
    ],
    source: 'from memory',
  },
];
