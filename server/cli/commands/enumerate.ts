import type { RunSettings } from '../../../shared/jobs/contract.js';
import type { EvidenceDocument } from '../../../shared/schemas/evidence.js';
import type { ComputeService } from '../../compute/compute-service.js';
import type { CliContext } from '../cli-context.js';
import type { ExitCode } from '../cli-error.js';
import { runEvidenceCommand } from '../evidence-command.js';
import { runLocally, type LocalProgress, type LocalRun } from '../local-run.js';
import { MAX_COUNT, MAX_SECONDS, MAX_THREADS, OptionReader, type RawOptions } from '../options.js';
import { countOf, describeCuts, describeFunnel, formatSeconds, groupDigits } from '../text-output.js';

/** SMILES listed at most; every one is held in memory until the end. */
const DEFAULT_LISTED = 100_000;
const MAX_LISTED = 1_000_000;

/** `isoloom enumerate`: every constitution that a formula or an evidence document allows. */
export async function enumerateCommand(argument: string, raw: RawOptions, context: CliContext): Promise<ExitCode> {
  const options = new OptionReader(raw);
  const threads = options.number('threads', 'threads', 1, MAX_THREADS, 'whole number');
  const maxSeconds = options.number('maxSeconds', 'max-seconds', 0.1, MAX_SECONDS);
  const maxCount = options.number('maxCount', 'max-count', 1, MAX_COUNT, 'whole number');
  const listed = options.number('keep', 'keep', 1, MAX_LISTED, 'whole number') ?? DEFAULT_LISTED;
  const mergeResonanceForms = options.boolean('mergeResonance', 'merge-resonance');
  options.check();
  const wantsSmiles = options.has('smiles');

  const run = (compute: ComputeService, given: EvidenceDocument, onProgress?: (progress: LocalProgress) => void): Promise<LocalRun> => {
    const evidence = mergeResonanceForms === undefined ? given : { ...given, options: { ...given.options, mergeResonanceForms } };
    const settings: RunSettings = {
      keep: wantsSmiles ? listed : 1,
      maxSeconds: maxSeconds ?? given.options.maxSeconds,
      maxConstitutions: maxCount ?? given.options.maxConstitutions ?? null,
      mode: wantsSmiles ? 'list' : 'count',
    };
    return runLocally(compute, evidence, settings, listed, context.interrupt, onProgress);
  };
  return runEvidenceCommand(argument, context, {
    threads,
    maxSeconds,
    wantsJson: options.has('json'),
    run,
    toDocument: enumerationDocument,
    print: (result, evidence) => printEnumeration(result, evidence, { wantsSmiles, wantsCountOnly: options.has('count') }, context),
  });
}

function enumerationDocument({ survivorCount, multigraphCount, isComplete, funnel, cuts, seconds, candidates }: LocalRun): object {
  return {
    count: survivorCount,
    multigraphCount,
    complete: isComplete,
    funnel,
    cuts,
    seconds,
    smiles: candidates.map(({ smiles }) => smiles),
  };
}

/** SMILES or the bare count go to standard output alone, so that they can be piped; the rest is for people. */
async function printEnumeration(
  { survivorCount, multigraphCount, isComplete, funnel, cuts, seconds, candidates }: LocalRun,
  { formula }: EvidenceDocument,
  { wantsSmiles, wantsCountOnly }: { wantsSmiles: boolean; wantsCountOnly: boolean },
  context: CliContext,
): Promise<void> {
  const stopped = isComplete ? '' : ', stopped before the end: incomplete';
  const summary = `${formula}: ${countOf(survivorCount, 'constitution')} (${countOf(multigraphCount, 'valence multigraph')} before filters), ${formatSeconds(seconds)}${stopped}\n`;
  if (wantsSmiles) {
    await context.write(candidates.map(({ smiles }) => `${smiles}\n`).join(''));
    context.tell(summary);
    if (candidates.length < survivorCount) context.tell(`listed ${groupDigits(candidates.length)} of them; --keep N lists more\n`);
  } else if (wantsCountOnly) {
    await context.write(`${survivorCount}\n`);
    if (!isComplete) context.tell(summary);
  } else await context.write(`${summary}${describeFunnel(funnel)}${describeCuts(cuts)}`);
}
