import type { LaidOutStructure } from '../../shared/jobs/contract.js';
import type { AppContext } from '../app-context.js';
import { ask } from '../compute/ask.js';

/** Lays structures out on a plane, in the order given. */
export async function layOutStructures(context: AppContext, smiles: readonly string[]): Promise<readonly LaidOutStructure[]> {
  const { structures } = await ask(context, 'layout', { smiles });
  return structures;
}
