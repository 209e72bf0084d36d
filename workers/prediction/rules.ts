/** Names of the rules behind carbon shifts, for people. */
export const CARBON_RULES = [
  'alkane increments',
  'cyclopropane increments',
  'alkene increments',
  'alkyne increments',
  'nitrile rule',
  'cumulated double bonds',
  'carbonyl rule',
  'imine rule',
  'benzene increments',
  'five-ring heteroarene increments',
  'range',
] as const;

/** Names of the rules behind proton shifts, for people. */
export const PROTON_RULES = [
  'alkyl increments',
  'CH2XY rule',
  'cyclopropane increments',
  'alkene increments',
  'alkyne range',
  'aldehyde rule',
  'benzene increments',
  'five-ring heteroarene increments',
  'exchangeable, range',
  'range',
] as const;

/** Rule index of a carbon class name. */
export function ruleOfCarbonClass(name: string): number {
  const rule = ((): (typeof CARBON_RULES)[number] => {
    if (name.startsWith('sp3')) return 'alkane increments';
    if (name.startsWith('ring3')) return 'cyclopropane increments';
    if (/^=C(H2|H)?$/.test(name)) return 'alkene increments';
    if (name.startsWith('#C')) return 'alkyne increments';
    if (/^(nitrile|isonitrile)$/.test(name)) return 'nitrile rule';
    if (/^(=C=|cumulated)$/.test(name)) return 'cumulated double bonds';
    if (name === 'C=N:N2') return 'range';
    if (name.startsWith('C=')) return 'imine rule';
    if (name.startsWith('ar6')) return 'benzene increments';
    if (name.startsWith('ar5')) return 'five-ring heteroarene increments';
    return name === 'C:other' ? 'range' : 'carbonyl rule';
  })();
  return CARBON_RULES.indexOf(rule);
}

/** Rule index of a proton class name. */
export function ruleOfProtonClass(name: string): number {
  const rule = ((): (typeof PROTON_RULES)[number] => {
    if (/^(CH3|CH2|CH)$/.test(name)) return 'alkyl increments';
    if (name === 'CH2XY') return 'CH2XY rule';
    if (name === 'ring3') return 'cyclopropane increments';
    if (name === '=CH2' || name === '=CH') return 'alkene increments';
    if (name === '#CH') return 'alkyne range';
    if (name === 'CHO' || name === 'HCOX') return 'aldehyde rule';
    if (name === 'ar6:CH') return 'benzene increments';
    if (name.startsWith('ar5')) return 'five-ring heteroarene increments';
    return /^(OH|NH|nH|N=H|SH)/.test(name) ? 'exchangeable, range' : 'range';
  })();
  return PROTON_RULES.indexOf(rule);
}
