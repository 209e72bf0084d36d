import type { z } from 'zod';
import type { predictRequest, predictResponse } from '../../shared/schemas/runs.js';
import type { AppContext } from '../app-context.js';
import { ask } from '../compute/ask.js';

/** Spectra of a structure that somebody drew; nothing is saved. */
export async function predictSpectra(
  context: AppContext,
  input: z.output<typeof predictRequest>,
): Promise<z.input<typeof predictResponse>> {
  const { carbons, protons, smiles, notes } = await ask(context, 'predict', input);
  return {
    smiles,
    notes: [...notes],
    carbons: carbons.map((carbon) => ({ ...carbon, atoms: [...carbon.atoms] })),
    protons: protons.map((proton) => ({ ...proton, atoms: [...proton.atoms], couplings: [...proton.couplings] })),
  };
}
