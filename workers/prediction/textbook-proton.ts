import { ATOM_TYPES, type AtomType } from './atom-types.js';
import { PROTON_CLASSES, type ProtonClass } from './shift-classes.js';
import type { TextbookEntry } from './textbook-carbon.js';

const named = (pattern: RegExp): AtomType[] => ATOM_TYPES.filter((type) => pattern.test(type));
const SATURATED = named(/^(sp3|ring3)/);
const ALKENYL = named(/^(=CH2|=CH|=C|=C=|cumulated|C=N:.+|C=S|C:other)$/);
const ALKYNYL = named(/^#C/);
const ARYL = named(/^ar/);
const AMINE_N = named(/^(NH2|NH|N):(alkyl|sp2|N|O|oxide|plus|cumulated)$|^N=/);
const AMIDE_N = named(/^(NH2|NH|N):(acyl|SP)$|^n(5|6|H|R|:oxide)$/);
const SULFIDE = named(/^(SH|S:alkyl2|S:sp2|S:acyl|S:S|S:other|=S|s:ar)$/);

const entries: TextbookEntry[] = [];
const add = (classes: readonly ProtonClass[], term: string, value: number): void => {
  if (value !== 0) entries.push({ classes, term, value });
};
const addEach = (classes: readonly ProtonClass[], prefix: string, types: readonly AtomType[], value: number): void => {
  for (const type of types) add(classes, `${prefix} ${type}`, value);
};

/**
 * Saturated C–H with one functional group: CH3 0.9, CH2 1.2, CH 1.5 and α/β/γ increments. Beauchamp & Marquez,
 * J. Chem. Educ. 1997, 74, 1483, as in SCIENCE.md 3.2; groups marked [mem] set to the nearest one of the table.
 */
const CHAIN_CLASSES: ProtonClass[] = ['CH3', 'CH2', 'CH', 'ring3'];
add(['CH3'], 'base', 0.9);
add(['CH2'], 'base', 1.2);
add(['CH'], 'base', 1.5);
add(['ring3'], 'base', 0.6); // [mem] cyclopropane 0.22, its CH higher
const CHAIN_GROUPS: ReadonlyArray<readonly [readonly AtomType[], number, number, number]> = [
  [ALKENYL, 0.8, 0.2, 0.1],
  [ALKYNYL, 0.9, 0.3, 0.1],
  [ARYL, 1.4, 0.4, 0.1],
  [['F'], 3.2, 0.5, 0.2],
  [['Cl'], 2.2, 0.5, 0.2],
  [['Br'], 2.1, 0.7, 0.2],
  [['I'], 2, 0.9, 0.1],
  [named(/^OH/), 2.3, 0.3, 0.1],
  [['O:alkyl2', 'O:ring3', 'O:other', 'O:N'], 2.1, 0.3, 0.1],
  [['O:alkyl-sp2', 'O:sp2-sp2'], 2.8, 0.5, 0.3],
  [['O:alkyl-acyl', 'O:sp2-acyl', 'O:acyl2'], 2.8, 0.5, 0.1],
  [['CHO', 'HCOX'], 1.1, 0.4, 0.1],
  [['CO'], 1.2, 0.3, 0],
  [['COar'], 1.7, 0.3, 0.1],
  [['COOH', 'COOR', 'COS', 'carbonic'], 1.1, 0.3, 0.1],
  [['COX'], 1.8, 0.4, 0.1],
  [['CON'], 1, 0.3, 0.1],
  [['nitrile', 'isonitrile'], 1.1, 0.4, 0.2],
  [AMINE_N, 1.5, 0.2, 0.1],
  [AMIDE_N, 2.1, 0.3, 0.1],
  [['NO2'], 3.2, 0.8, 0.1],
  [SULFIDE, 1.3, 0.4, 0.1],
  [['SO'], 1.6, 0.5, 0.3],
  [['SO2', 'SO2X'], 1.8, 0.5, 0.3],
  [['P3', 'P5'], 0.6, 0.2, 0], // [mem]
  [['Si'], -0.8, -0.2, 0], // [mem], from tetramethylsilane
];
for (const [types, alpha, beta, gamma] of CHAIN_GROUPS) {
  addEach(CHAIN_CLASSES, 'α0', types, alpha);
  addEach(CHAIN_CLASSES, 'β0', types, beta);
  addEach(CHAIN_CLASSES, 'γ0', types, gamma);
}

/**
 * X–CH2–Y between two groups: 0.23 + σX + σY. Shoolery's rule with the constants of Friedrich & Runkle,
 * J. Chem. Educ. 1984, 61, 830, as in SCIENCE.md 3.2.
 */
add(['CH2XY'], 'base', 0.23);
const SHOOLERY: ReadonlyArray<readonly [readonly AtomType[], number]> = [
  [ALKENYL, 1.32],
  [ALKYNYL, 1.44],
  [ARYL, 1.85],
  [AMINE_N, 1.57],
  [AMIDE_N, 2.27],
  [['NO2'], 3.8],
  [SULFIDE, 1.64],
  [['CHO', 'CO', 'HCOX'], 1.7],
  [['COar'], 1.84],
  [named(/^OH/), 2.56],
  [['O:alkyl2', 'O:ring3', 'O:other', 'O:N'], 2.36],
  [['O:alkyl-acyl', 'O:sp2-acyl', 'O:acyl2'], 3.13],
  [['O:alkyl-sp2', 'O:sp2-sp2'], 3.23],
  [['F'], 4],
  [['Cl', 'COX'], 2.53],
  [['Br'], 2.33],
  [['I'], 1.82],
  [['COOR', 'COOH', 'COS', 'carbonic'], 1.55],
  [['CON'], 1.59],
  [['nitrile', 'isonitrile'], 1.7],
  [['SO', 'SO2', 'SO2X'], 1.9], // [mem]
  [['P3', 'P5', 'Si'], 0.9], // [mem]
];
for (const [types, sigma] of SHOOLERY) addEach(['CH2XY'], 'α0', types, sigma);

/** Alkenes, 5.25 + Zgem + the mean of Zcis and Ztrans. Pascual, Meier & Simon, Helv. Chim. Acta 1966, 49, 164, values from memory (SCIENCE.md 3.2). */
const ALKENE_CLASSES: ProtonClass[] = ['=CH2', '=CH'];
export const ALKENE_Z: ReadonlyArray<readonly [readonly AtomType[], gem: number, cis: number, trans: number]> = [
  [SATURATED, 0.45, -0.22, -0.28],
  [['=CH2', '=CH', '=C'], 1, -0.09, -0.23],
  [ALKYNYL, 0.47, 0.38, 0.12],
  [ARYL, 1.38, 0.36, -0.07],
  [['nitrile'], 0.27, 0.75, 0.55],
  [['CHO'], 1.02, 0.95, 1.17],
  [['CO', 'COar'], 1.1, 1.12, 0.87],
  [['COOH'], 0.97, 1.41, 0.71],
  [['COOR'], 0.8, 1.18, 0.55],
  [['CON'], 1.37, 0.98, 0.46],
  [['COX'], 1.11, 1.46, 1.01],
  [['O:alkyl-sp2', 'OH:sp2', 'O:sp2-sp2'], 1.22, -1.07, -1.21],
  [['O:sp2-acyl'], 2.11, -0.35, -0.64],
  [['F'], 1.54, -0.4, -1.02],
  [['Cl'], 1.08, 0.18, 0.13],
  [['Br'], 1.07, 0.45, 0.55],
  [['I'], 1.14, 0.81, 0.88],
  [['NH2:sp2', 'NH:sp2', 'N:sp2'], 0.8, -1.26, -1.21],
  [['NH:acyl', 'N:acyl'], 2.08, -0.57, -0.72],
  [['S:sp2'], 1.11, -0.29, -0.13],
  [['SO2'], 1.55, 1.16, 0.93],
];
add(ALKENE_CLASSES, 'base', 5.25);
for (const [types, gem, cis, trans] of ALKENE_Z) {
  addEach(ALKENE_CLASSES, 'α0', types, gem);
  addEach(ALKENE_CLASSES, 'β1', types, (cis + trans) / 2);
}

/** Benzene ring H, ortho/meta/para. Textbook compilations after Beeby et al., Anal. Chem. 1973, 45, 1571, from memory (SCIENCE.md 3.2). */
const BENZENE_GROUPS: ReadonlyArray<readonly [readonly AtomType[], number, number, number]> = [
  [['sp3:1'], -0.18, -0.1, -0.2],
  [['sp3:2', 'ring3:2'], -0.15, -0.06, -0.18],
  [['sp3:3', 'ring3:3'], -0.13, -0.08, -0.18],
  [['sp3:4', 'ring3:4'], 0.02, -0.09, -0.22],
  [ALKENYL, 0.06, -0.03, -0.1],
  [ALKYNYL, 0.15, -0.02, -0.01],
  [ARYL, 0.3, 0.12, 0.1],
  [['nitrile', 'isonitrile'], 0.36, 0.18, 0.28],
  [['CHO'], 0.56, 0.22, 0.29],
  [['CO', 'COar'], 0.62, 0.14, 0.21],
  [['COOH'], 0.85, 0.18, 0.27],
  [['COOR', 'COS'], 0.71, 0.11, 0.21],
  [['CON'], 0.61, 0.1, 0.17],
  [['COX'], 0.84, 0.22, 0.36],
  [['OH:sp2'], -0.56, -0.12, -0.45],
  [['O:alkyl-sp2', 'O:N', 'O:other'], -0.48, -0.09, -0.44],
  [['O:sp2-sp2'], -0.29, -0.05, -0.23],
  [['O:sp2-acyl'], -0.25, 0.03, -0.13],
  [['NH2:sp2', 'N:N'], -0.75, -0.25, -0.65],
  [['NH:sp2', 'N:sp2'], -0.66, -0.18, -0.67],
  [['NH:acyl', 'N:acyl', 'N:SP'], 0.12, -0.07, -0.28],
  [['NO2'], 0.95, 0.26, 0.38],
  [['S:sp2', 'SH', 'S:S', 'S:acyl'], -0.08, -0.1, -0.24],
  [['SO2', 'SO2X', 'SO'], 0.6, 0.3, 0.35], // [mem]
  [['F'], -0.26, 0, -0.2],
  [['Cl'], 0.03, -0.02, -0.09],
  [['Br'], 0.18, -0.08, -0.04],
  [['I'], 0.39, -0.21, 0],
  [['Si'], 0.2, 0, 0], // [mem]
];
const RING_CLASSES: ProtonClass[] = PROTON_CLASSES.filter((name) => name.startsWith('ar'));
add(['ar6:CH'], 'base', 7.27);
for (const [types, ortho, meta, para] of BENZENE_GROUPS) {
  addEach(RING_CLASSES, 'β1', types, ortho);
  addEach(RING_CLASSES, 'γ1', types, meta);
  addEach(RING_CLASSES, 'δ1', types, para);
}
/** Naphthalene 7.84, 7.48 and pyridine 8.61, 7.28, 7.68 (Babij et al. 2016 for pyridine, the other from memory) less benzene. */
add(['ar6:CH'], 'α0 ar6:fused', 0.55);
add(['ar6:CH'], 'β0 ar6:fused', 0.2);
for (const type of ['n6', 'n:oxide'] as const) {
  add(['ar6:CH'], `α0 ${type}`, 1.34);
  add(['ar6:CH'], `β0 ${type}`, 0);
  add(['ar6:CH'], `γ0 ${type}`, 0.4);
}
/** Azoles and their kin, from memory: furan 7.42/6.37, thiophene 7.33/7.10, pyrrole 6.7/6.2; an N of pyridine type beside adds about 0.6. */
add(['ar5:CH@O'], 'base', 7.42);
add(['ar5:CH@S'], 'base', 7.33);
add(['ar5:CH@N'], 'base', 6.75);
add(['ar5:CH'], 'base', 6.3);
add(['ar5:CH'], 'β0 s:ar', 0.8);
add(['ar5:CH', 'ar5:CH@O', 'ar5:CH@S', 'ar5:CH@N'], 'α0 n5', 0.7);

/** Middles of the textbook ranges (SCIENCE.md 3.1) for everything without additive rules; exchangeable ones in CDCl3. */
const MIDDLES: ReadonlyArray<readonly [ProtonClass, number]> = [
  ['#CH', 2.4],
  ['CHO', 9.8],
  ['HCOX', 8.05],
  ['HC=N', 7.9],
  ['CH:other', 5],
  ['OH:alkyl', 2.5],
  ['OH:sp2', 6],
  ['OH:acyl', 11],
  ['OH:other', 8],
  ['NH:alkyl', 1.8],
  ['NH:sp2', 3.9],
  ['NH:acyl', 6.5],
  ['NH:other', 6],
  ['nH', 9.5],
  ['N=H', 9],
  ['SH', 2],
  ['PH', 5],
  // Dialkyl phosphonates 6.8, secondary phosphine oxides 6.5 to 8, from memory.
  ['PH=O', 7],
  ['SiH', 4],
  ['XH', 3],
];
for (const [name, value] of MIDDLES) add([name], 'base', value);

/** Published 1H increments as table entries. */
export const TEXTBOOK_PROTON: readonly TextbookEntry[] = entries;
