import { PLAUSIBILITY_RULES } from '../../shared/plausibility/rules.js';
import { EXCLUDED_FRAGMENT_REASON_PREFIX } from './excluded-fragments.js';
import { PLAUSIBILITY_REASON_PREFIX } from './plausibility/active-rules.js';
import { RING_TOO_LARGE, RING_TOO_SMALL } from './ring-sizes.js';
import { describeSignalReason } from './signal-reasons.js';

/**
 * The sentence a chemist reads for a reason code of the funnel.
 *
 * @param reason - code as given in a rejection.
 * @throws RangeError for a code that no stage gives.
 */
export function describeReason(reason: string): string {
  if (reason.startsWith(EXCLUDED_FRAGMENT_REASON_PREFIX))
    return `It contains the excluded fragment ${reason.slice(EXCLUDED_FRAGMENT_REASON_PREFIX.length)}.`;
  if (reason === RING_TOO_SMALL) return 'It contains a ring smaller than allowed.';
  if (reason === RING_TOO_LARGE) return 'It contains a ring larger than allowed.';
  if (reason.startsWith(PLAUSIBILITY_REASON_PREFIX)) {
    const id = reason.slice(PLAUSIBILITY_REASON_PREFIX.length);
    const rule = PLAUSIBILITY_RULES.find((candidate) => candidate.id === id);
    if (rule !== undefined) return rule.sentence;
  }
  const sentence = describeSignalReason(reason);
  if (sentence === null) throw new RangeError(`describeReason: unknown reason ${reason}`);
  return sentence;
}
