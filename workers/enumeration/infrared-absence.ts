import type { EvidenceDocument, ValenceGroup } from '../../shared/schemas/evidence.js';

type Band = EvidenceDocument['infraredBands'][number];

interface Region {
  /** cm-1 */
  readonly high: number;
  readonly low: number;
  readonly whose: string;
}

/**
 * Where a group always has a strong band; wider than the tables, so that nitrates, nitramines and conjugated groups
 * lie inside. NO2 and N3: SCIENCE.md 5; the wider limits, diazo and isocyanide from memory. Of S=O, P=O and N–O the bands
 * lie where nearly every spectrum has others: their absence is never seen.
 */
const NECESSARY: Partial<Record<ValenceGroup, readonly Region[]>> = {
  nitro: [
    { high: 1670, low: 1490, whose: 'every NO₂ group' },
    { high: 1410, low: 1240, whose: 'every NO₂ group' },
  ],
  azide: [{ high: 2220, low: 2030, whose: 'every azide' }],
  diazo: [{ high: 2220, low: 1970, whose: 'every diazo group' }],
  isocyanide: [{ high: 2220, low: 2050, whose: 'every isocyanide' }],
};

/** Fewer bands are a selection, not a spectrum. */
const FEWEST_BANDS = 5;

/**
 * Tells why an infrared list rules a group out.
 *
 * Only a list that reads like a whole spectrum can: at least five bands, some above and some below the region, and not
 * one in it.
 *
 * @returns half a sentence for people, null when the group may be there.
 */
export function missingBandsOf(group: ValenceGroup, bands: readonly Band[]): string | null {
  if (bands.length < FEWEST_BANDS) return null;
  for (const { high, low, whose } of NECESSARY[group] ?? []) {
    const isCovered = bands.some(({ wavenumber }) => wavenumber > high) && bands.some(({ wavenumber }) => wavenumber < low);
    const isEmpty = !bands.some(({ wavenumber }) => wavenumber >= low && wavenumber <= high);
    if (isCovered && isEmpty) return `the infrared list has no band between ${high} and ${low} cm⁻¹, where ${whose} absorbs strongly`;
  }
  return null;
}
