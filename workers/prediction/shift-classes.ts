import type { StructureAnalysis } from '../graph/analysis.js';
import { NEIGHBOUR_STRIDE } from '../graph/analysis.js';
import { ATOM_TYPES, GROUP_OF_TYPE, ATOM_GROUPS, atomTypeIndex, type AtomType } from './atom-types.js';

/** How the surroundings of an observed atom are read: along σ chains, over a π bond, or around an aromatic ring. */
export const MODE_CHAIN = 0;
export const MODE_PI = 1;
export const MODE_RING = 2;

const CARBON_TYPES = ATOM_TYPES.slice(0, ATOM_TYPES.indexOf('C:other') + 1);
/** Carbons of five-membered aromatic rings next to O, S or an N that gives its lone pair; the plain names are the others. */
const AZOLE_CLASSES = ['ar5:CH@O', 'ar5:CH@S', 'ar5:CH@N', 'ar5:C@O', 'ar5:C@S', 'ar5:C@N', 'ar5:fused@X'] as const;
/** Classes of observed carbon; each has a base shift and increments of its own. */
export const CARBON_CLASSES = [...CARBON_TYPES, ...AZOLE_CLASSES] as const;
export type CarbonClass = (typeof CARBON_CLASSES)[number];

/** Classes of observed hydrogen, by what carries it. */
export const PROTON_CLASSES = [
  'CH3',
  'CH2',
  'CH2XY',
  'CH',
  'ring3',
  '=CH2',
  '=CH',
  '#CH',
  'CHO',
  'HCOX',
  'HC=N',
  'ar6:CH',
  'ar5:CH',
  'ar5:CH@O',
  'ar5:CH@S',
  'ar5:CH@N',
  'CH:other',
  'OH:alkyl',
  'OH:sp2',
  'OH:acyl',
  'OH:other',
  'NH:alkyl',
  'NH:sp2',
  'NH:acyl',
  'NH:other',
  'nH',
  'N=H',
  'SH',
  'PH',
  'PH=O',
  'SiH',
  'XH',
] as const;
export type ProtonClass = (typeof PROTON_CLASSES)[number];

const AZOLE_START = CARBON_TYPES.length;
const AR5_CH = atomTypeIndex('ar5:CH');
const AR5_C = atomTypeIndex('ar5:C');
const AR5_FUSED = atomTypeIndex('ar5:fused');
const AROMATIC_START = atomTypeIndex('ar6:CH');
const AROMATIC_END = atomTypeIndex('ar5:C=O') + 1;
const PI_START = atomTypeIndex('=CH2');
const AR_O = atomTypeIndex('o:ar');
const AR_S = atomTypeIndex('s:ar');
const AR_NH = atomTypeIndex('nH');
const AR_NR = atomTypeIndex('nR');

/** Reading mode of an observed atom, by its type. */
export function modeOf(type: number): number {
  if (type >= AROMATIC_START && type < AROMATIC_END) return MODE_RING;
  return type >= PI_START && type < AROMATIC_START ? MODE_PI : MODE_CHAIN;
}

/** Class index of a carbon atom. @param types - atom types of the structure. */
export function carbonClassOf(analysis: StructureAnalysis, types: Uint8Array, atom: number): number {
  const type = types[atom];
  if (type !== AR5_CH && type !== AR5_C && type !== AR5_FUSED) return type;
  const donor = donorNextTo(analysis, types, atom);
  if (donor === 0) return type;
  if (type === AR5_FUSED) return AZOLE_START + 6;
  return AZOLE_START + (type === AR5_CH ? 0 : 3) + donor - 1;
}

/** 1 = aromatic O, 2 = aromatic S, 3 = pyrrole-type N beside the atom, in this order of preference; 0 = none. */
function donorNextTo(analysis: StructureAnalysis, types: Uint8Array, atom: number): number {
  let donor = 0;
  for (let k = 0; k < analysis.degrees[atom]; k++) {
    const b = analysis.neighbours[atom * NEIGHBOUR_STRIDE + k];
    if (analysis.aromaticBonds[atom * analysis.graph.atomCount + b] === 0) continue;
    const type = types[b];
    const kind = type === AR_O ? 1 : type === AR_S ? 2 : type === AR_NH || type === AR_NR ? 3 : 0;
    if (kind !== 0 && (donor === 0 || kind < donor)) donor = kind;
  }
  return donor;
}

const protonIndex = (name: ProtonClass): number => PROTON_CLASSES.indexOf(name);
const P_CH3 = protonIndex('CH3');
const P_CH2 = protonIndex('CH2');
const P_CH2XY = protonIndex('CH2XY');
const P_CH = protonIndex('CH');
const P_AR5 = protonIndex('ar5:CH');
const P_OTHER = protonIndex('XH');
/** Class by type for every type whose hydrogens need no look around; saturated carbons and azoles are told apart below. */
const PROTON_CLASS_OF_TYPE = Uint8Array.from(ATOM_TYPES, (type) => protonIndex(protonClassName(type)));

function protonClassName(type: AtomType): ProtonClass {
  if (/^sp3/.test(type)) return 'CH';
  if (/^ring3/.test(type)) return 'ring3';
  if (/^(=CH2|=CH|=C|=C=)$/.test(type)) return type === '=CH2' ? '=CH2' : '=CH';
  if (type === '#CH' || type === '#C') return '#CH';
  if (type === 'CHO' || type === 'HCOX') return type;
  if (type === 'C=N:N2') return 'CH:other';
  if (/^C=(N|S)/.test(type)) return 'HC=N';
  if (type === 'ar6:CH' || type === 'ar5:CH') return type;
  if (ATOM_TYPES.indexOf(type) < AZOLE_START) return 'CH:other';
  if (type === 'OH:alkyl' || type === 'OH:sp2' || type === 'OH:acyl') return type;
  if (/^O/.test(type)) return 'OH:other';
  if (type === 'N=C' || type === 'N=N') return 'N=H';
  if (type === 'nH') return 'nH';
  const amine = /^NH?2?:(alkyl|sp2|acyl)$/.exec(type);
  if (amine !== null) return `NH:${amine[1] as 'alkyl' | 'sp2' | 'acyl'}`;
  if (/^N/.test(type)) return 'NH:other';
  if (/^S[^i]|^SH/.test(type)) return 'SH';
  if (type === 'P5') return 'PH=O';
  if (/^P/.test(type)) return 'PH';
  return type === 'Si' ? 'SiH' : 'XH';
}

const ALKYL = ATOM_GROUPS.indexOf('alkyl');

/** Class index of the hydrogens on an atom. @param types - atom types of the structure. */
export function protonClassOf(analysis: StructureAnalysis, types: Uint8Array, atom: number): number {
  const type = types[atom];
  const plain = PROTON_CLASS_OF_TYPE[type];
  if (plain === P_CH) {
    const count = analysis.graph.hydrogens[atom];
    if (count === 1) return P_CH;
    if (count > 2) return P_CH3;
    for (let k = 0; k < analysis.degrees[atom]; k++) {
      if (GROUP_OF_TYPE[types[analysis.neighbours[atom * NEIGHBOUR_STRIDE + k]]] === ALKYL) return P_CH2;
    }
    return P_CH2XY;
  }
  if (plain === P_AR5) return P_AR5 + donorNextTo(analysis, types, atom);
  return plain < PROTON_CLASSES.length ? plain : P_OTHER;
}

/** Classes of hydrogens that exchange with water or alcohols and whose shift follows concentration. */
export const IS_EXCHANGEABLE_CLASS = Uint8Array.from(PROTON_CLASSES, (name) => (/^(OH|NH|nH|N=H|SH)/.test(name) ? 1 : 0));
