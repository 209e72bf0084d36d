import type { z } from 'zod';
import type { estimateResponse, runStartRequest } from '../../shared/schemas/runs.js';
import type { AppContext } from '../app-context.js';
import { ask } from '../compute/ask.js';
import type { Unknown } from '../models/unknown.js';
import { chooseRevision } from './choose-revision.js';

const PROBES = 2_000;
const SEED = 1;
const MAX_SECONDS = 3;

/** Size of the search that a run with these settings would make, by random probing. Saves nothing. */
export async function estimateRun(
  context: AppContext,
  unknown: Unknown,
  input: z.output<typeof runStartRequest>,
): Promise<z.input<typeof estimateResponse>> {
  const { evidence } = await chooseRevision(unknown, input.revisionId);
  return await ask(context, 'estimate', { evidence, mode: 'rank', probes: PROBES, seed: SEED, maxSeconds: MAX_SECONDS }, 'evidence.');
}
