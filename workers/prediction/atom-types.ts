import type { StructureAnalysis } from '../graph/analysis.js';
import { NEIGHBOUR_STRIDE } from '../graph/analysis.js';

/**
 * Kinds of atom that increments tell apart, seen as a substituent. `sp3:k` = saturated carbon with k heavy
 * neighbours; `ring3` = saturated carbon in a three-membered ring; `ar5`, `ar6` = aromatic by smallest ring;
 * behind O, N and S stand the partners: `sp2` aryl or vinyl, `acyl` C=O or C=S.
 */
export const ATOM_TYPES = [
  'sp3:1',
  'sp3:2',
  'sp3:3',
  'sp3:4',
  'ring3:2',
  'ring3:3',
  'ring3:4',
  '=CH2',
  '=CH',
  '=C',
  '=C=',
  '#CH',
  '#C',
  'nitrile',
  'isonitrile',
  'cumulated',
  'CHO',
  'CO',
  'COar',
  'COOH',
  'COOR',
  'CON',
  'COX',
  'HCOX',
  'carbonic',
  'COS',
  'C=N:H',
  'C=N:C',
  'C=N:X',
  'C=N:N2',
  'C=S',
  'ar6:CH',
  'ar6:C',
  'ar6:fused',
  'ar6:C=O',
  'ar5:CH',
  'ar5:C',
  'ar5:fused',
  'ar5:C=O',
  'C:other',
  'OH:alkyl',
  'OH:sp2',
  'OH:acyl',
  'OH:other',
  'O:alkyl2',
  'O:alkyl-sp2',
  'O:sp2-sp2',
  'O:alkyl-acyl',
  'O:sp2-acyl',
  'O:acyl2',
  'O:N',
  'O:other',
  'O:ring3',
  '=O:C',
  '=O:other',
  'O:minus',
  'o:ar',
  'NH2:alkyl',
  'NH:alkyl',
  'N:alkyl',
  'NH2:sp2',
  'NH:sp2',
  'N:sp2',
  'NH2:acyl',
  'NH:acyl',
  'N:acyl',
  'N:SP',
  'N:N',
  'N:O',
  'N=C',
  'N=N',
  'N=O',
  'NO2',
  'N:oxide',
  'N:plus',
  'N:cumulated',
  'nitrileN',
  'n6',
  'n5',
  'nH',
  'nR',
  'n:oxide',
  'SH',
  'S:alkyl2',
  'S:sp2',
  'S:acyl',
  'S:S',
  'SO',
  'SO2',
  'SO2X',
  '=S',
  's:ar',
  'S:other',
  'F',
  'Cl',
  'Br',
  'I',
  'P3',
  'P5',
  'Si',
  'other',
] as const;
export type AtomType = (typeof ATOM_TYPES)[number];
export const ATOM_TYPE_COUNT = ATOM_TYPES.length;

const INDEX = Object.fromEntries(ATOM_TYPES.map((name, index) => [name, index])) as Readonly<Record<AtomType, number>>;
/** Position of a type in {@link ATOM_TYPES}. */
export function atomTypeIndex(type: AtomType): number {
  return INDEX[type];
}

/** Coarse kinds for pair terms. */
export const ATOM_GROUPS = [
  'alkyl',
  'vinyl',
  'linear',
  'aryl',
  'acyl',
  'O',
  '=O',
  'N',
  '=N',
  'arN',
  'arNR',
  'arX',
  'S',
  'F',
  'Cl',
  'Br',
  'I',
  'Si',
] as const;
export type AtomGroup = (typeof ATOM_GROUPS)[number];
export const ATOM_GROUP_COUNT = ATOM_GROUPS.length;

function groupOf(type: AtomType): AtomGroup {
  if (type === 'F' || type === 'Cl' || type === 'Br' || type === 'I') return type;
  if (/^(sp3|ring3)/.test(type)) return 'alkyl';
  if (/^(#CH|#C|nitrile|isonitrile)$/.test(type)) return 'linear';
  if (/^(=CH2|=CH|=C|=C=|cumulated|C:other)$/.test(type)) return 'vinyl';
  if (/^ar/.test(type)) return 'aryl';
  if (/^(CHO|CO|COar|COOH|COOR|CON|COX|HCOX|carbonic|COS|C=N:.+|C=S)$/.test(type)) return 'acyl';
  if (/^(=O:|O:minus|=S)/.test(type)) return '=O';
  if (type === 'o:ar' || type === 's:ar') return 'arX';
  if (/^O/.test(type)) return 'O';
  if (type === 'n6' || type === 'n5' || type === 'n:oxide') return 'arN';
  if (type === 'nH' || type === 'nR') return 'arNR';
  if (/^(N=|N:cumulated|nitrileN)/.test(type)) return '=N';
  if (/^N/.test(type)) return 'N';
  if (/^S[^i]|^SH|^P/.test(type)) return 'S';
  return 'Si';
}
/** Group of each type, by type index. */
export const GROUP_OF_TYPE = Uint8Array.from(ATOM_TYPES, (type) => ATOM_GROUPS.indexOf(groupOf(type)));

const SP3_1 = INDEX['sp3:1'];
const RING3_2 = INDEX['ring3:2'];
const CH2_DOUBLE = INDEX['=CH2'];
const AR6_CH = INDEX['ar6:CH'];
const AR5_CH = INDEX['ar5:CH'];
const NH2_ALKYL = INDEX['NH2:alkyl'];

/**
 * Types every atom of a constitution. Depends on aromatic marks and on single and double bonds outside aromatic
 * rings only, so that resonance forms agree.
 *
 * @param analysis - read only.
 * @param types - [0, n) overwritten with indexes into {@link ATOM_TYPES}.
 */
export function fillAtomTypes(analysis: StructureAnalysis, types: Uint8Array): void {
  const n = analysis.graph.atomCount;
  const z = analysis.graph.atomicNumbers;
  for (let a = 0; a < n; a++) {
    switch (z[a]) {
      case 6:
        types[a] = carbonType(analysis, a);
        break;
      case 7:
        types[a] = nitrogenType(analysis, a);
        break;
      case 8:
        types[a] = oxygenType(analysis, a);
        break;
      case 16:
        types[a] = sulfurType(analysis, a);
        break;
      case 9:
        types[a] = INDEX.F;
        break;
      case 17:
        types[a] = INDEX.Cl;
        break;
      case 35:
        types[a] = INDEX.Br;
        break;
      case 53:
        types[a] = INDEX.I;
        break;
      case 15:
        types[a] = analysis.hybridisation[a] === 3 && analysis.degrees[a] + analysis.graph.hydrogens[a] > 3 ? INDEX.P5 : INDEX.P3;
        break;
      case 14:
        types[a] = INDEX.Si;
        break;
      default:
        types[a] = INDEX.other;
    }
  }
}

function carbonType(analysis: StructureAnalysis, a: number): number {
  const { graph, neighbours, degrees, aromaticAtoms, aromaticBonds, hybridisation, smallestRingOfAtom } = analysis;
  const { atomCount: n, atomicNumbers: z, bondOrders, hydrogens } = graph;
  const degree = degrees[a];
  const base = a * NEIGHBOUR_STRIDE;
  if (aromaticAtoms[a] === 1) {
    const first = smallestRingOfAtom[a] === 5 ? AR5_CH : AR6_CH;
    if (hydrogens[a] > 0) return first;
    let aromaticCount = 0;
    let hasOxo = false;
    for (let k = 0; k < degree; k++) {
      const b = neighbours[base + k];
      if (aromaticBonds[a * n + b] === 1) aromaticCount++;
      else if (bondOrders[a * n + b] === 2 && z[b] !== 6) hasOxo = true;
    }
    // Order of the names: CH, C, fused, C=O.
    return first + (hasOxo ? 3 : aromaticCount > 2 ? 2 : 1);
  }
  if (hybridisation[a] === 3) {
    if (smallestRingOfAtom[a] === 3) return RING3_2 + degree - 2;
    return SP3_1 + (degree === 0 ? 0 : degree - 1);
  }
  let oxo = 0,
    thio = 0,
    imino = 0,
    doubleCarbon = 0,
    tripleNitrogen = 0,
    tripleCarbon = 0,
    doubleOther = 0;
  let singleO = 0,
    singleN = 0,
    singleS = 0,
    halogen = 0,
    conjugated = 0,
    hydroxyl = 0;
  for (let k = 0; k < degree; k++) {
    const b = neighbours[base + k];
    const order = bondOrders[a * n + b];
    const element = z[b];
    if (order === 1) {
      if (element === 8) {
        singleO++;
        if (hydrogens[b] > 0) hydroxyl++;
      } else if (element === 7) singleN++;
      else if (element === 16) singleS++;
      else if (element === 9 || element === 17 || element === 35 || element === 53) halogen++;
      else if (element === 6 && hybridisation[b] !== 3) conjugated++;
    } else if (order === 2) {
      if (element === 8) oxo++;
      else if (element === 16) thio++;
      else if (element === 7) imino++;
      else if (element === 6) doubleCarbon++;
      else doubleOther++;
    } else if (element === 7) tripleNitrogen++;
    else tripleCarbon++;
  }
  if (tripleNitrogen > 0) return degree === 1 ? INDEX.isonitrile : INDEX.nitrile;
  if (tripleCarbon > 0) return hydrogens[a] > 0 ? INDEX['#CH'] : INDEX['#C'];
  if (hybridisation[a] === 1) return doubleCarbon === 2 ? INDEX['=C='] : INDEX.cumulated;
  if (doubleCarbon > 0) return CH2_DOUBLE + (degree === 0 ? 0 : degree - 1);
  const heteroCount = singleO + singleN + singleS + halogen;
  if (oxo > 0) {
    if (hydrogens[a] > 0) return heteroCount > 0 ? INDEX.HCOX : INDEX.CHO;
    if (heteroCount === 0) return conjugated > 0 ? INDEX.COar : INDEX.CO;
    if (heteroCount > 1) return INDEX.carbonic;
    if (halogen > 0) return INDEX.COX;
    if (singleS > 0) return INDEX.COS;
    if (singleN > 0) return INDEX.CON;
    return hydroxyl > 0 ? INDEX.COOH : INDEX.COOR;
  }
  if (thio > 0) return INDEX['C=S'];
  if (imino > 0 && isDiazoCarbon(analysis, a)) return INDEX['C=N:N2'];
  if (imino > 0) return heteroCount > 0 ? INDEX['C=N:X'] : hydrogens[a] > 0 ? INDEX['C=N:H'] : INDEX['C=N:C'];
  return doubleOther > 0 ? INDEX['C:other'] : INDEX.cumulated;
}

/** C=N⁺=N⁻: far upfield of every other C=N. */
function isDiazoCarbon(analysis: StructureAnalysis, a: number): boolean {
  const { graph, neighbours, degrees, hybridisation } = analysis;
  for (let k = 0; k < degrees[a]; k++) {
    const b = neighbours[a * NEIGHBOUR_STRIDE + k];
    if (graph.charges[b] === 1 && hybridisation[b] === 1 && graph.bondOrders[a * graph.atomCount + b] === 2) return true;
  }
  return false;
}

/** What a heteroatom's carbon neighbour is to it: 0 saturated, 1 aryl, vinyl or imine, 2 acyl. */
function partnerKind(analysis: StructureAnalysis, b: number): number {
  const { graph, neighbours, degrees, hybridisation } = analysis;
  const { atomCount: n, atomicNumbers: z, bondOrders } = graph;
  if (hybridisation[b] === 3) return 0;
  for (let k = 0; k < degrees[b]; k++) {
    const c = neighbours[b * NEIGHBOUR_STRIDE + k];
    if (bondOrders[b * n + c] === 2 && (z[c] === 8 || z[c] === 16) && analysis.aromaticBonds[b * n + c] === 0) return 2;
  }
  return 1;
}

function oxygenType(analysis: StructureAnalysis, a: number): number {
  const { graph, neighbours, degrees, aromaticAtoms, smallestRingOfAtom } = analysis;
  const { atomCount: n, atomicNumbers: z, bondOrders, hydrogens, charges } = graph;
  if (aromaticAtoms[a] === 1) return INDEX['o:ar'];
  if (charges[a] < 0) return INDEX['O:minus'];
  const degree = degrees[a];
  const base = a * NEIGHBOUR_STRIDE;
  if (degree === 0) return INDEX['OH:other'];
  const b = neighbours[base];
  if (degree === 1) {
    if (bondOrders[a * n + b] === 2) return z[b] === 6 ? INDEX['=O:C'] : INDEX['=O:other'];
    if (z[b] !== 6 || hydrogens[a] === 0) return INDEX['OH:other'];
    return INDEX['OH:alkyl'] + partnerKind(analysis, b);
  }
  const c = neighbours[base + 1];
  if (z[b] === 7 || z[c] === 7) return INDEX['O:N'];
  if (z[b] !== 6 || z[c] !== 6) return INDEX['O:other'];
  if (smallestRingOfAtom[a] === 3) return INDEX['O:ring3'];
  const one = partnerKind(analysis, b);
  const two = partnerKind(analysis, c);
  const low = one < two ? one : two;
  const high = one < two ? two : one;
  if (high === 0) return INDEX['O:alkyl2'];
  if (low === 0) return high === 1 ? INDEX['O:alkyl-sp2'] : INDEX['O:alkyl-acyl'];
  if (low === 1) return high === 1 ? INDEX['O:sp2-sp2'] : INDEX['O:sp2-acyl'];
  return INDEX['O:acyl2'];
}

function nitrogenType(analysis: StructureAnalysis, a: number): number {
  const { graph, neighbours, degrees, aromaticAtoms, hybridisation, smallestRingOfAtom } = analysis;
  const { atomCount: n, atomicNumbers: z, bondOrders, hydrogens, charges } = graph;
  const degree = degrees[a];
  const base = a * NEIGHBOUR_STRIDE;
  let oxides = 0,
    doubleTo = 0,
    hasTriple = false,
    nitrogen = false,
    oxygen = false,
    sulfurOrPhosphorus = false,
    kind = 0;
  for (let k = 0; k < degree; k++) {
    const b = neighbours[base + k];
    const order = bondOrders[a * n + b];
    if (z[b] === 8 && (order === 2 || charges[b] < 0)) oxides++;
    if (order === 3) hasTriple = true;
    if (order === 2) doubleTo = z[b];
    else if (z[b] === 7) nitrogen = true;
    else if (z[b] === 8) oxygen = true;
    else if (z[b] === 16 || z[b] === 15) sulfurOrPhosphorus = true;
    else if (z[b] === 6) {
      const partner = partnerKind(analysis, b);
      if (partner > kind) kind = partner;
    }
  }
  if (aromaticAtoms[a] === 1) {
    if (charges[a] > 0) return INDEX['n:oxide'];
    if (hydrogens[a] > 0) return INDEX.nH;
    if (degree === 3) return INDEX.nR;
    return smallestRingOfAtom[a] === 5 ? INDEX.n5 : INDEX.n6;
  }
  if (hasTriple && charges[a] === 0) return INDEX.nitrileN;
  if (hybridisation[a] === 1) return hasTriple ? INDEX.isonitrile : INDEX['N:cumulated'];
  if (charges[a] < 0) return INDEX['N:cumulated'];
  if (charges[a] > 0) return oxides === 2 ? INDEX.NO2 : oxides === 1 ? INDEX['N:oxide'] : INDEX['N:plus'];
  if (doubleTo === 6) return isHeterocumuleneEnd(analysis, a) ? INDEX['N:cumulated'] : INDEX['N=C'];
  if (doubleTo === 8) return INDEX['N=O'];
  if (doubleTo !== 0) return INDEX['N=N'];
  if (sulfurOrPhosphorus) return INDEX['N:SP'];
  if (oxygen) return INDEX['N:O'];
  if (nitrogen) return INDEX['N:N'];
  // Order of the names: NH2, NH, N of alkyl, then of sp2, then of acyl.
  const heavy = degree === 0 ? 1 : degree;
  return NH2_ALKYL + 3 * kind + (heavy > 3 ? 2 : heavy - 1);
}

function isHeterocumuleneEnd(analysis: StructureAnalysis, a: number): boolean {
  const { graph, neighbours, degrees, hybridisation } = analysis;
  for (let k = 0; k < degrees[a]; k++) {
    const b = neighbours[a * NEIGHBOUR_STRIDE + k];
    if (graph.bondOrders[a * graph.atomCount + b] === 2) return hybridisation[b] === 1;
  }
  return false;
}

function sulfurType(analysis: StructureAnalysis, a: number): number {
  const { graph, neighbours, degrees, aromaticAtoms } = analysis;
  const { atomCount: n, atomicNumbers: z, bondOrders, hydrogens } = graph;
  if (aromaticAtoms[a] === 1) return INDEX['s:ar'];
  const degree = degrees[a];
  let oxo = 0,
    otherDouble = 0,
    hetero = 0,
    sulfur = 0,
    kind = 0,
    isCyano = false;
  for (let k = 0; k < degree; k++) {
    const b = neighbours[a * NEIGHBOUR_STRIDE + k];
    if (bondOrders[a * n + b] === 2) {
      if (z[b] === 8) oxo++;
      else otherDouble++;
    } else if (z[b] === 16) sulfur++;
    else if (z[b] !== 6) hetero++;
    else {
      const partner = partnerKind(analysis, b);
      if (partner > kind) kind = partner;
      if (analysis.hybridisation[b] === 1) isCyano = true;
    }
  }
  if (oxo >= 2) return hetero > 0 ? INDEX.SO2X : INDEX.SO2;
  if (oxo === 1) return INDEX.SO;
  if (otherDouble > 0) return degree === 1 ? INDEX['=S'] : INDEX['S:other'];
  if (hydrogens[a] > 0) return INDEX.SH;
  if (sulfur > 0) return INDEX['S:S'];
  if (hetero > 0 || isCyano || degree > 2) return INDEX['S:other'];
  return INDEX['S:alkyl2'] + kind;
}
