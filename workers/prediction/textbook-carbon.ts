import { ATOM_TYPES, type AtomType } from './atom-types.js';
import { CARBON_CLASSES, type CarbonClass } from './shift-classes.js';

/** One published increment: what it adds, in ppm, to atoms of these classes for each occurrence of the term. */
export interface TextbookEntry {
  readonly classes: readonly string[];
  /** A name of features.ts. */
  readonly term: string;
  readonly value: number;
}

const named = (pattern: RegExp): AtomType[] => ATOM_TYPES.filter((type) => pattern.test(type));
const SATURATED = named(/^(sp3|ring3)/);
const ALKENYL = named(/^(=CH2|=CH|=C|=C=|cumulated|C=N:.+|C=S|C:other)$/);
const ALKYNYL = named(/^#C/);
const ARYL = named(/^ar/);
const ETHER_O = named(/^O:(alkyl2|alkyl-sp2|ring3|N|other|sp2-sp2)$/);
const AMINE_N = named(/^(NH2|NH|N):|^N=|^n(5|6|H|R|:oxide)$/);
const THIOETHER = named(/^(S:alkyl2|S:sp2|S:acyl|S:S|S:other|=S|s:ar)$/);
const CHAIN_CLASSES: CarbonClass[] = CARBON_CLASSES.filter((name) => /^(sp3|ring3)/.test(name));
const ALKENE_CLASSES: CarbonClass[] = ['=CH2', '=CH', '=C'];
const BENZENE_CLASSES: CarbonClass[] = ['ar6:CH', 'ar6:C', 'ar6:fused'];

const entries: TextbookEntry[] = [];
const add = (classes: readonly CarbonClass[], term: string, value: number): void => {
  if (value !== 0) entries.push({ classes, term, value });
};
const addEach = (classes: readonly CarbonClass[], prefix: string, types: readonly AtomType[], value: number): void => {
  for (const type of types) add(classes, `${prefix} ${type}`, value);
};

/*
 * Alkanes. Grant & Paul, J. Am. Chem. Soc. 1964, 86, 2984: −2.3 + 9.1 α + 9.4 β − 2.5 γ + 0.3 δ with terms for
 * branching. "Primary" to "quaternary" count all heavy neighbours, as is common practice when groups are added.
 */
const BRANCHING: readonly (readonly number[])[] = [
  [0, 0, -1.1, -3.4],
  [0, 0, -2.5, -7.5],
  [0, -3.7, -9.5, -15],
  [-1.5, -8.4, -15, -25],
];
add(CHAIN_CLASSES, 'base', -2.3);
for (const name of CHAIN_CLASSES) {
  const own = Number(name.slice(-1)) - 1;
  for (const type of SATURATED) add([name], `α0 ${type}`, 9.1 + BRANCHING[own][Number(type.slice(-1)) - 1]);
}
addEach(CHAIN_CLASSES, 'β0', SATURATED, 9.4);
addEach(CHAIN_CLASSES, 'γ0', SATURATED, -2.5);
addEach(CHAIN_CLASSES, 'δ0', SATURATED, 0.3);

/** Functional groups on a saturated chain, α/β/γ (course compilation quoted in SCIENCE.md 4.3; those marked [mem] from memory). */
const CHAIN_GROUPS: ReadonlyArray<readonly [readonly AtomType[], number, number, number]> = [
  [ALKENYL, 20, 6.9, -2.1],
  [ALKYNYL, 4.4, 5.6, -3.4],
  [ARYL, 22.1, 9.3, -2.6],
  [['CHO'], 29.9, -0.6, -2.7],
  [['CO', 'COar'], 22.5, 3, -3],
  [['COOH'], 20.1, 2, -2.8],
  [['COOR', 'HCOX', 'carbonic', 'COS'], 22.6, 2, -2.8],
  [['CON'], 22, 2.6, -3.2],
  [['COX'], 33.1, 2.3, -3.6],
  [['nitrile', 'isonitrile'], 3.1, 2.4, -3.3],
  [named(/^OH/), 49, 10.1, -6.2],
  [ETHER_O, 58, 7.2, -5.8],
  [named(/^O:(alkyl-acyl|sp2-acyl|acyl2)$/), 54, 6.5, -6],
  [AMINE_N, 28.3, 11.3, -5.1],
  [['NO2'], 61.6, 3.1, -4.6],
  [['SH'], 10.6, 11.4, -3.6],
  [THIOETHER, 20.4, 6.2, -2.7],
  [['SO', 'SO2', 'SO2X'], 42, 0, -3], // [mem], from dimethyl sulfoxide and sulfone
  [['F'], 70.1, 7.8, -6.8],
  [['Cl'], 31, 10, -5.1],
  [['Br'], 18.9, 11, -3.8],
  [['I'], -7.2, 10.9, -1.5],
  [['P3', 'P5'], 14, 2, -2], // [mem]
  [['Si'], 2, 2, -1], // [mem], from tetramethylsilane
];
for (const [types, alpha, beta, gamma] of CHAIN_GROUPS) {
  addEach(CHAIN_CLASSES, 'α0', types, alpha);
  addEach(CHAIN_CLASSES, 'β0', types, beta);
  addEach(CHAIN_CLASSES, 'γ0', types, gamma);
}
/** Rings: shift of the cycloalkane (from memory: −2.8, 22.4, 25.6, 26.9, 28.2, 26.6) less the alkane increments. */
for (const [size, value] of [
  ['3', -18.7],
  ['4', -2.9],
  ['5', -9.1],
  ['6', -5.3],
  ['7', -1.5],
  ['8+', -3.4],
] as const) {
  for (const bonds of [2, 3, 4]) add(CHAIN_CLASSES, `ring ${size}/${bonds}`, value);
}

/** Alkenes (SCIENCE.md 4.3): 123.3 + 10.6 α + 7.2 β − 1.5 γ − 7.9 α′ − 1.8 β′ + 1.5 γ′; two α −4.8. */
add(ALKENE_CLASSES, 'base', 123.3);
addEach(ALKENE_CLASSES, 'α0', SATURATED, 10.6);
addEach(ALKENE_CLASSES, 'β0', SATURATED, 7.2);
addEach(ALKENE_CLASSES, 'γ0', SATURATED, -1.5);
addEach(ALKENE_CLASSES, 'β1', SATURATED, -7.9);
addEach(ALKENE_CLASSES, 'γ1', SATURATED, -1.8);
addEach(ALKENE_CLASSES, 'δ1', SATURATED, 1.5);
add(ALKENE_CLASSES, 'alkyl&alkyl', -4.8);
/** Groups on C1 of ethylene: what they add to C1 and to C2; textbook compilation, from memory. */
const ALKENE_GROUPS: ReadonlyArray<readonly [readonly AtomType[], number, number]> = [
  [['=CH2', '=CH', '=C'], 13.6, -7],
  [ALKYNYL, -6, 5],
  [ARYL, 12.5, -11],
  [['CHO'], 15.3, 14.5],
  [['CO', 'COar'], 13.8, 4.7],
  [['COOH'], 5, 9.8],
  [['COOR', 'CON'], 6.3, 7],
  [['nitrile'], -15.1, 14.2],
  [named(/^OH/), 25.7, -35.3],
  [ETHER_O, 28.8, -37.1],
  [named(/^O:(alkyl-acyl|sp2-acyl|acyl2)$/), 18.4, -26.7],
  [AMINE_N, 20, -30],
  [['NO2'], 22.3, -0.9],
  [THIOETHER, 9, -12],
  [['F'], 24.9, -34.3],
  [['Cl'], 2.6, -6.1],
  [['Br'], -7.9, -1.4],
  [['I'], -38.1, 7],
];
for (const [types, own, other] of ALKENE_GROUPS) {
  addEach(ALKENE_CLASSES, 'α0', types, own);
  addEach(ALKENE_CLASSES, 'β1', types, other);
}

/** Benzene ring, ipso/ortho/meta/para (Ewing, Org. Magn. Reson. 1979, 12, 499, as in SCIENCE.md 4.3; those marked [mem] from memory). */
const BENZENE_GROUPS: ReadonlyArray<readonly [readonly AtomType[], number, number, number, number]> = [
  [['sp3:1'], 9.2, 0.7, -0.1, -3],
  [['sp3:2', 'ring3:2'], 15.7, -0.6, -0.1, -2.8],
  [['sp3:3', 'ring3:3'], 20.2, -2.2, -0.3, -2.8],
  [['sp3:4', 'ring3:4'], 22.4, -3.3, -0.4, -3.1],
  [ALKENYL, 8.9, -2.3, -0.1, -0.8],
  [ALKYNYL, -6.2, 3.6, -0.4, -0.3],
  [ARYL, 12.8, -1.4, 0.2, -1.3],
  [['nitrile', 'isonitrile'], -15.7, 3.6, 0.7, 4.3],
  [['CHO'], 8.2, 1.2, 0.6, 5.8],
  [['CO', 'COar'], 8.9, -0.1, -0.1, 4.4],
  [['COOH'], 2.1, 1.6, -0.1, 5.2],
  [['COOR', 'COS'], 2, 1.2, -0.1, 4.3],
  [['CON'], 5, -1.2, 0.1, 3.4],
  [['COX'], 4.7, 2.7, 0.3, 6.6],
  [['OH:sp2', 'OH:alkyl'], 26.9, -12.8, 1.4, -7.4],
  [['O:alkyl-sp2', 'O:N', 'O:other'], 31.4, -14.4, 1, -7.7],
  [['O:sp2-sp2'], 27.6, -11.2, -0.3, -6.9],
  [['O:sp2-acyl'], 22.4, -7.1, 0.4, -3.2],
  [['NH2:sp2', 'N:N'], 18.2, -13.4, 0.8, -10],
  [['NH:sp2', 'N:sp2'], 22.3, -15.7, 0.7, -11.8],
  [['NH:acyl', 'N:acyl', 'N:SP'], 9.7, -8.1, 0.2, -4.4],
  [['N=N', 'N=C'], 23, -6, 0.5, 2], // [mem], azobenzene and benzylideneaniline
  [['NO2'], 19.9, -4.9, 0.9, 6.1],
  [['F'], 34.8, -13, 1.6, -4.4],
  [['Cl'], 6.3, 0.4, 1.4, -1.9],
  [['Br'], -5.8, 3.2, 1.6, -1.6],
  [['I'], -34.1, 8.9, 1.6, -1.1],
  [['SH'], 2.1, 0.7, 0.3, -3.2],
  [['S:sp2', 'S:acyl', 'S:S', 'S:other'], 10, -1.9, 0.2, -3.6],
  [['SO2', 'SO2X', 'SO'], 12.3, -1.4, 0.8, 5.1],
  [['Si'], 11.8, 4.9, -0.8, 0.3],
  [['P3', 'P5'], 5, 4, 0, 2], // [mem]
];
const RING_CLASSES: CarbonClass[] = CARBON_CLASSES.filter((name) => /^ar/.test(name));
add(BENZENE_CLASSES, 'base', 128.5);
for (const [types, ipso, ortho, meta, para] of BENZENE_GROUPS) {
  addEach(RING_CLASSES, 'α1', types, ipso);
  addEach(RING_CLASSES, 'β1', types, ortho);
  addEach(RING_CLASSES, 'γ1', types, meta);
  addEach(RING_CLASSES, 'δ1', types, para);
}
/** Fused rings: naphthalene 133.6, 128.0, 125.9 (from memory) less benzene. */
add(['ar6:fused'], 'ring 6/3', 5.1);
add(['ar6:CH', 'ar6:C'], 'α0 ar6:fused', -0.5);
add(['ar6:CH', 'ar6:C'], 'β0 ar6:fused', -2.6);
/** Pyridine 149.90, 123.71, 135.89 (Babij et al. 2016) less benzene; N-oxide from memory. */
for (const [type, ortho, meta, para] of [
  ['n6', 21.4, -4.8, 7.4],
  ['n:oxide', 10.5, -2.5, -2],
] as const) {
  add(BENZENE_CLASSES, `α0 ${type}`, ortho);
  add(BENZENE_CLASSES, `β0 ${type}`, meta);
  add(BENZENE_CLASSES, `γ0 ${type}`, para);
}
/** Five-membered rings, from memory: furan 142.7/109.6, thiophene 125.1/126.9, pyrrole 118.0/107.9, imidazole 135.2/121.9, pyrazole 133.3/104.7. */
add(['ar5:CH@O', 'ar5:C@O'], 'base', 142.7);
add(['ar5:CH@S', 'ar5:C@S'], 'base', 125.1);
add(['ar5:CH@N', 'ar5:C@N'], 'base', 118);
add(['ar5:CH', 'ar5:C'], 'base', 109.6);
for (const [type, value] of [
  ['s:ar', 17.3],
  ['nH', -1.7],
  ['nR', -1.7],
  ['n5', -2],
] as const)
  add(['ar5:CH', 'ar5:C'], `β0 ${type}`, value);
add(
  RING_CLASSES.filter((name) => name.startsWith('ar5')),
  'α0 n5',
  15,
);
add(['ar5:fused'], 'base', 128);
add(['ar5:fused@X'], 'base', 140);
add(['ar5:C=O', 'ar6:C=O'], 'base', 162);

/** Carbonyl and other unsaturated carbon: base and α, β on the carbon side; textbook compilation, from memory, set on SCIENCE.md 11. */
const CARBONYL: ReadonlyArray<readonly [CarbonClass, number, number, number]> = [
  ['CO', 194, 6.5, 1.5],
  ['COar', 190, 6.5, 1.5],
  ['CHO', 193.5, 6.5, 2],
  ['COOH', 165.5, 11, 3],
  ['COOR', 160.4, 11, 3],
  ['CON', 163, 8, 3],
  ['COX', 159, 11, 3],
  ['COS', 184, 11, 3],
  ['HCOX', 161.5, 0, 0],
  ['carbonic', 155.5, 0, 0],
  ['C=N:H', 148, 0, 2],
  ['C=N:C', 150, 4, 2],
  ['C=N:X', 156, 3, 1],
  // Diazo carbon, from memory: ethyl diazoacetate 46, diazoacetone 55, diphenyldiazomethane 63, diazomethane 23.
  ['C=N:N2', 50, 0, 0],
  ['C=S', 210, 10, 2],
  ['nitrile', 116.4, 0, 2.5],
  ['isonitrile', 157, 0, 0],
  ['cumulated', 126, 0, 0],
  ['=C=', 208, 0, 0],
  ['C:other', 130, 0, 0],
];
for (const [name, base, alpha, beta] of CARBONYL) {
  add([name], 'base', base);
  addEach([name], 'α0', SATURATED, alpha);
  addEach([name], 'β0', SATURATED, beta);
  if (alpha > 6) addEach([name], 'α0', [...ARYL, '=CH2', '=CH', '=C'], name === 'COar' ? 1 : 6.5);
}
/** Alkynes: 71.9 + 6.9 α + 4.8 β − 5.7 α′ + 2.3 β′; textbook compilation, from memory. */
const ALKYNE_CLASSES: CarbonClass[] = ['#CH', '#C'];
add(ALKYNE_CLASSES, 'base', 71.9);
addEach(ALKYNE_CLASSES, 'α0', SATURATED, 6.9);
addEach(ALKYNE_CLASSES, 'β0', SATURATED, 4.8);
addEach(ALKYNE_CLASSES, 'β1', SATURATED, -5.7);
addEach(ALKYNE_CLASSES, 'γ1', SATURATED, 2.3);
addEach(ALKYNE_CLASSES, 'α0', ARYL, 12.7);
addEach(ALKYNE_CLASSES, 'β1', ARYL, 6.4);

/** Published 13C increments as table entries. */
export const TEXTBOOK_CARBON: readonly TextbookEntry[] = entries;
