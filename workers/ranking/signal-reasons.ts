/** Names of carbons by attached hydrogens; the last stands for signals of every kind together. */
const TYPES = ['C', 'CH', 'CH₂', 'CH₃'] as const;
const NAMES = ['quaternary carbons', 'CH carbons', 'CH₂ carbons', 'CH₃ carbons'] as const;
export const ALL_TYPES = 4;

/** Kinds of contradiction between the numbers of signals and a structure. */
export type SignalReasonKind =
  | 'tooFewCarbons'
  | 'carbonAbsent'
  | 'carbonCount'
  | 'carbonEnvironments'
  | 'equivalentCarbons'
  | 'protonEnvironments'
  | 'exchangeableProtons'
  | 'boundProtons';

const byType = (kind: SignalReasonKind): readonly string[] => [0, 1, 2, 3, ALL_TYPES].map((type) => `signals:${kind}:${type}`);

/** Reason codes by kind and carbon type, made once so that the hot path builds no strings. */
export const SIGNAL_REASONS: Readonly<Record<SignalReasonKind, readonly string[]>> = {
  tooFewCarbons: byType('tooFewCarbons'),
  carbonAbsent: byType('carbonAbsent'),
  carbonCount: byType('carbonCount'),
  carbonEnvironments: byType('carbonEnvironments'),
  equivalentCarbons: byType('equivalentCarbons'),
  protonEnvironments: byType('protonEnvironments'),
  exchangeableProtons: byType('exchangeableProtons'),
  boundProtons: byType('boundProtons'),
};

/** The sentence for a reason code of the signal stage; null when it is none. */
export function describeSignalReason(reason: string): string | null {
  const [stage, kind, typeText] = reason.split(':');
  if (stage !== 'signals') return null;
  if (kind === 'correlations') return 'No assignment of the signals to its atoms meets the COSY and HMBC pairs.';
  const type = Number(typeText);
  const signals = type === ALL_TYPES ? '¹³C signals' : `${TYPES[type]} signals in the ¹³C list`;
  const carbons = type === ALL_TYPES ? 'carbons' : NAMES[type];
  switch (kind) {
    case 'tooFewCarbons':
      return `It has fewer ${carbons} than the ${signals} stand for.`;
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
    default:
      return null;
  }
}
