/** A set of equivalent coupling partners: nuclei of spin ½ with one J. */
export interface CouplingPartners {
  /** Hz, ≥ 0. */
  readonly coupling: number;
  readonly count: number;
}

/** First-order pattern: its usual name and one J a letter, falling; no J for `s` and `m`. */
export interface SignalPattern {
  readonly multiplicity: string;
  readonly couplings: readonly number[];
}

/** Couplings closer than this merge into one, Hz (SCIENCE.md 3.4). */
const MERGE_WIDTH = 1;
/** Smaller couplings, the allylic ones above all, are as a rule not reported, Hz (common practice for routine spectra). */
const RESOLVED = 1.5;
const LETTERS = ['s', 'd', 't', 'q', 'quint', 'sext', 'sept', 'oct', 'non'];

/**
 * Name of the multiplet of a proton by the n + 1 rule, set by set (SCIENCE.md 3.4).
 *
 * Sets whose J agree within about 1 Hz act as one; letters follow falling J. Called `m`: more than nine lines in one
 * set, compound patterns with a quintet or more, three different couplings unless at least two are doublets
 * (`ddd`, `ddt`, `ddq`), and four or more.
 *
 * @param partners - in any order; those below 1.5 Hz are ignored.
 */
export function namePattern(partners: readonly CouplingPartners[]): SignalPattern {
  const resolved = partners.filter(({ coupling, count }) => coupling >= RESOLVED && count > 0).sort((a, b) => b.coupling - a.coupling);
  const sets: { coupling: number; count: number }[] = [];
  for (const { coupling, count } of resolved) {
    const last = sets.at(-1);
    if (last !== undefined && last.coupling - coupling <= MERGE_WIDTH) {
      last.coupling = (last.coupling * last.count + coupling * count) / (last.count + count);
      last.count += count;
    } else sets.push({ coupling, count });
  }
  if (sets.length === 0) return { multiplicity: 's', couplings: [] };
  const many = { multiplicity: 'm', couplings: [] };
  if (sets.some(({ count }) => count >= LETTERS.length)) return many;
  const isCompound = sets.length > 1;
  if (isCompound && sets.some(({ count }) => count > 3)) return many;
  if (sets.length > 3 || (sets.length === 3 && sets.filter(({ count }) => count === 1).length < 2)) return many;
  return {
    multiplicity: sets.map(({ count }) => LETTERS[count]).join(''),
    couplings: sets.map(({ coupling }) => Math.round(coupling * 10) / 10),
  };
}
