import { type CarbonSignal, type CarbonWindow, HYBRIDISATIONS } from '../../shared/schemas/evidence.js';

/** Names of carbons by attached hydrogens; the last stands for signals of every kind together. */
const TYPES = ['C', 'CH', 'CH₂', 'CH₃'] as const;
const NAMES = ['quaternary carbons', 'CH carbons', 'CH₂ carbons', 'CH₃ carbons'] as const;
export const ALL_TYPES = 4;

/** Kinds of contradiction between the numbers of signals and a structure. */
export type SignalReasonKind =
  | 'tooFewCarbons'
  | 'tooFewProtonated'
  | 'carbonAbsent'
  | 'carbonCount'
  | 'carbonEnvironments'
  | 'equivalentCarbons'
  | 'protonEnvironments'
  | 'exchangeableProtons'
  | 'boundProtons'
  | 'windowAbsent'
  | 'windowsTogether';

const byType = (kind: SignalReasonKind): readonly string[] => [0, 1, 2, 3, ALL_TYPES].map((type) => `signals:${kind}:${type}`);

/** Reason codes by kind and carbon type, made once so that the hot path builds no strings. */
export const SIGNAL_REASONS: Readonly<Record<SignalReasonKind, readonly string[]>> = {
  tooFewCarbons: byType('tooFewCarbons'),
  tooFewProtonated: byType('tooFewProtonated'),
  carbonAbsent: byType('carbonAbsent'),
  carbonCount: byType('carbonCount'),
  carbonEnvironments: byType('carbonEnvironments'),
  equivalentCarbons: byType('equivalentCarbons'),
  protonEnvironments: byType('protonEnvironments'),
  exchangeableProtons: byType('exchangeableProtons'),
  boundProtons: byType('boundProtons'),
  windowAbsent: byType('windowAbsent'),
  windowsTogether: byType('windowsTogether'),
};

const WINDOW_REASON_PREFIX = 'signals:window:';
const HYBRIDISATION_NAMES = ['sp³', 'sp²', 'sp'] as const;

/** Reason code of a signal that too few carbons fit; it holds what its sentence says. */
export function windowReason({ shift, hydrogens, count }: CarbonSignal, window: CarbonWindow | null): string {
  const { hybridisations, heteroNeighbours } = window ?? { hybridisations: HYBRIDISATIONS, heteroNeighbours: { min: 0, max: 4 } };
  const bonds = HYBRIDISATIONS.filter((hybridisation) => hybridisations.includes(hybridisation)).join('+');
  return `${WINDOW_REASON_PREFIX}${[shift, hydrogens ?? ALL_TYPES, count ?? 1, bonds, heteroNeighbours.min, heteroNeighbours.max].join(':')}`;
}

function describeWindow(reason: string): string {
  const [shift, type, count, bonds, min, max] = reason.slice(WINDOW_REASON_PREFIX.length).split(':');
  const carbons = Number(type) === ALL_TYPES ? 'carbons' : NAMES[Number(type)];
  const hybridisations = bonds.split('+').map((name) => HYBRIDISATION_NAMES[HYBRIDISATIONS.findIndex((each) => each === name)]);
  const parts = hybridisations.length < HYBRIDISATIONS.length ? [hybridisations.join(' or ')] : [];
  if (min === max) parts.push(`bonded to ${min === '0' ? 'no' : min} heteroatom${min === '1' ? '' : 's'}`);
  else if (min !== '0' && max !== '4') parts.push(`bonded to ${min} to ${max} heteroatoms`);
  else if (min !== '0') parts.push(`bonded to at least ${min} heteroatom${min === '1' ? '' : 's'}`);
  else if (max !== '4') parts.push(`bonded to at most ${max} heteroatom${max === '1' ? '' : 's'}`);
  const what = parts.length === 0 ? '' : ` (${parts.join(', ')})`;
  const shortage = count === '1' ? `None of its ${carbons} fits` : `Fewer than ${count} of its ${carbons} fit`;
  return `${shortage} the ¹³C signal at ${shift} ppm${what}.`;
}

/** The sentence for a reason code of the signal stage; null when it is none. */
export function describeSignalReason(reason: string): string | null {
  if (reason.startsWith(WINDOW_REASON_PREFIX)) return describeWindow(reason);
  const [stage, kind, typeText] = reason.split(':');
  if (stage !== 'signals') return null;
  if (kind === 'correlations') return 'No assignment of the signals to its atoms meets the COSY and HMBC pairs.';
  const type = Number(typeText);
  const signals = type === ALL_TYPES ? '¹³C signals' : `${TYPES[type]} signals in the ¹³C list`;
  const carbons = type === ALL_TYPES ? 'carbons' : NAMES[type];
  switch (kind) {
    case 'tooFewCarbons':
      return `It has fewer ${carbons} than the ${signals} stand for.`;
    case 'tooFewProtonated':
      return 'It has fewer carbons with hydrogens than the ¹³C signals stand for that have attached hydrogens or an HSQC pair.';
    case 'carbonAbsent':
      return `It has ${carbons}, but the ¹³C list, taken as complete, shows none.`;
    case 'carbonCount':
      return `It has more ${carbons} than the ${signals}, taken as complete, stand for.`;
    case 'carbonEnvironments':
      return `Symmetry leaves it fewer different ${carbons} than there are ${signals}.`;
    case 'equivalentCarbons':
      return `It has more equivalent ${carbons} than any of the ${signals} stands for.`;
    case 'protonEnvironments':
      return 'Symmetry leaves it fewer different hydrogens than there are ¹H signals.';
    case 'exchangeableProtons':
      return 'It has fewer OH, NH and SH hydrogens than the ¹H signals marked as exchangeable stand for.';
    case 'boundProtons':
      return 'It has fewer hydrogens on carbon than the ¹H signals marked as not exchangeable stand for.';
    case 'windowAbsent':
      return `It has ${carbons} that fit none of the ${signals}, taken as complete, with their windows of hybridisation and heteroatoms.`;
    case 'windowsTogether':
      return 'Its different carbons cannot be shared out among the ¹³C signals so that each lies in its window of hybridisation and heteroatoms.';
    default:
      return null;
  }
}
