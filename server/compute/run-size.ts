import { ComputeBusy, ComputeFailure, type ComputeService, WorkerCrash } from './compute-service.js';
import type { RunInput } from './run-task.js';

const PROBES = 400;
const SEED = 1;
/** Nobody waits longer for a guess that only decides who goes first. */
const MAX_SECONDS = 0.3;

/** Thread seconds the whole search of a run may take, roughly; null when it cannot be told. */
export async function guessSeconds(compute: ComputeService, { evidence, settings }: RunInput): Promise<number | null> {
  try {
    const { cpuSeconds } = await compute.runJob('estimate', {
      evidence,
      mode: settings.mode,
      probes: PROBES,
      seed: SEED,
      maxSeconds: MAX_SECONDS,
    });
    return cpuSeconds;
  } catch (error) {
    // Whatever is wrong with the evidence, the plan says so.
    if (error instanceof ComputeFailure || error instanceof WorkerCrash || error instanceof ComputeBusy) return null;
    throw error;
  }
}
