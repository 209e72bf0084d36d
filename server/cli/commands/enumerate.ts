import type { RunSettings } from '../../../shared/jobs/contract.js';
import type { EvidenceDocument } from '../../../shared/schemas/evidence.js';
import type { ComputeService } from '../../compute/compute-service.js';
import { runBatch } from '../batch.js';
import type { CliContext } from '../cli-context.js';
import { EXIT, type ExitCode } from '../cli-error.js';
import { runLocally, type LocalProgress, type LocalRun } from '../local-run.js';
import { MAX_SECONDS, MAX_THREADS, OptionReader, type RawOptions } from '../options.js';
import { createProgressLine } from '../progress-line.js';
import { evidenceOfLine, kindOfInput, passedThrough, readEvidenceArgument } from '../read-input.js';
import { countOf, describeFunnel, formatSeconds, groupDigits } from '../text-output.js';
import { withWarmCompute } from '../with-compute.js';

/** SMILES listed at most; every one is held in memory until the end. */
const DEFAULT_LISTED = 100_000;
const MAX_LISTED = 1_000_000;

/** `isoloom enumerate`: every constitution that a formula or an evidence document allows. */
export async function enumerateCommand(argument: string, raw: RawOptions, context: CliContext): Promise<ExitCode> {
  const options = new OptionReader(raw);
  const threads = options.number('threads', 'threads', 1, MAX_THREADS, 'whole number');
  const maxSeconds = options.number('maxSeconds', 'max-seconds', 0.1, MAX_SECONDS);
  const listed = options.number('keep', 'keep', 1, MAX_LISTED, 'whole number') ?? DEFAULT_LISTED;
  const mergeResonanceForms = options.boolean('mergeResonance', 'merge-resonance');
  options.check();
  const wantsSmiles = options.has('smiles');

  const run = (compute: ComputeService, given: EvidenceDocument, onProgress?: (progress: LocalProgress) => void): Promise<LocalRun> => {
    const evidence = mergeResonanceForms === undefined ? given : { ...given, options: { ...given.options, mergeResonanceForms } };
    const settings: RunSettings = {
      keep: wantsSmiles ? listed : 1,
      maxSeconds: maxSeconds ?? given.options.maxSeconds,
      mode: wantsSmiles ? 'list' : 'count',
    };
    return runLocally(compute, evidence, settings, listed, context.interrupt, onProgress);
  };
  if (kindOfInput(argument) === 'batch') {
    return withWarmCompute(context, threads, (compute) =>
      runBatch(
        argument,
        context,
        async (line) => {
          const result = await run(compute, evidenceOfLine(line).evidence);
          return { document: { ...passedThrough(line), ...enumerationDocument(result) }, exitCode: exitCodeOf(result) };
        },
        passedThrough,
        maxSeconds === undefined ? compute.threadCount : 1,
      ),
    );
  }
  const { evidence, notes } = await readEvidenceArgument(argument);
  const line = createProgressLine(context);
  const result = await withWarmCompute(context, threads, (compute) => run(compute, evidence, line.show));
  line.clear();
  if (options.has('json')) await context.write(`${JSON.stringify(enumerationDocument(result))}\n`);
  else {
    for (const note of notes) context.tell(`note: ${note}\n`);
    await printEnumeration(result, evidence, { wantsSmiles, wantsCountOnly: options.has('count') }, context);
  }
  return exitCodeOf(result);
}

const exitCodeOf = ({ isComplete }: LocalRun): ExitCode => (isComplete ? EXIT.done : EXIT.stopped);

function enumerationDocument({ survivorCount, multigraphCount, isComplete, funnel, seconds, candidates }: LocalRun): object {
  return { count: survivorCount, multigraphCount, complete: isComplete, funnel, seconds, smiles: candidates.map(({ smiles }) => smiles) };
}

/** SMILES or the bare count go to standard output alone, so that they can be piped; the rest is for people. */
async function printEnumeration(
  { survivorCount, multigraphCount, isComplete, funnel, seconds, candidates }: LocalRun,
  { formula }: EvidenceDocument,
  { wantsSmiles, wantsCountOnly }: { wantsSmiles: boolean; wantsCountOnly: boolean },
  context: CliContext,
): Promise<void> {
  const stopped = isComplete ? '' : ', stopped before the end';
  const summary = `${formula}: ${countOf(survivorCount, 'constitution')} (${countOf(multigraphCount, 'valence multigraph')} before filters), ${formatSeconds(seconds)}${stopped}\n`;
  if (wantsSmiles) {
    await context.write(candidates.map(({ smiles }) => `${smiles}\n`).join(''));
    context.tell(summary);
    if (candidates.length < survivorCount) context.tell(`listed ${groupDigits(candidates.length)} of them; --keep N lists more\n`);
  } else if (wantsCountOnly) {
    await context.write(`${survivorCount}\n`);
    if (!isComplete) context.tell(summary);
  } else await context.write(`${summary}${describeFunnel(funnel)}`);
}
