import type { ValenceGroup } from '../schemas/evidence.js';

/** What chemists call the groups of higher or charge-separated valence, for switches and messages. */
export const VALENCE_GROUP_NAMES: Readonly<Record<ValenceGroup, { readonly name: string; readonly covers: string }>> = {
  nitro: { name: 'Nitro', covers: 'C–NO₂, nitrate, nitramine' },
  nOxide: { name: 'N-Oxide', covers: 'amine and pyridine N-oxide, nitrone, azoxy, nitrile oxide' },
  azide: { name: 'Azide', covers: '–N₃' },
  diazo: { name: 'Diazo', covers: 'C=N₂' },
  isocyanide: { name: 'Isocyanide', covers: '–N≡C' },
  sulfoxide: { name: 'Sulfoxide', covers: 'S=O, sulfinate, sulfite' },
  sulfone: { name: 'Sulfone', covers: 'SO₂: sulfone, sulfonamide, sulfonate, sulfonyl halide, sulfate' },
  phosphorusOxide: { name: 'Phosphorus oxide', covers: 'P=O: phosphine oxide, phosphonate, phosphate' },
};
