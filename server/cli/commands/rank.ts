import type { RankedCandidate, RunSettings } from '../../../shared/jobs/contract.js';
import type { EvidenceDocument } from '../../../shared/schemas/evidence.js';
import type { ComputeService } from '../../compute/compute-service.js';
import { runBatch } from '../batch.js';
import type { CliContext } from '../cli-context.js';
import { EXIT, type ExitCode } from '../cli-error.js';
import { runLocally, type LocalProgress, type LocalRun } from '../local-run.js';
import { MAX_SECONDS, MAX_THREADS, OptionReader, type RawOptions } from '../options.js';
import { createProgressLine } from '../progress-line.js';
import { evidenceOfLine, kindOfInput, passedThrough, readEvidenceArgument } from '../read-input.js';
import { alignColumns, countOf, describeFunnel, formatSeconds } from '../text-output.js';
import { withWarmCompute } from '../with-compute.js';

const DEFAULT_TOP = 20;
const MAX_TOP = 10_000;

/** `isoloom rank`: enumerate, predict, score; the best candidates with their probabilities. */
export async function rankCommand(argument: string, raw: RawOptions, context: CliContext): Promise<ExitCode> {
  const options = new OptionReader(raw);
  const threads = options.number('threads', 'threads', 1, MAX_THREADS, 'whole number');
  const maxSeconds = options.number('maxSeconds', 'max-seconds', 0.1, MAX_SECONDS);
  const top = options.number('top', 'top', 1, MAX_TOP, 'whole number') ?? DEFAULT_TOP;
  options.check();

  const run = (compute: ComputeService, evidence: EvidenceDocument, onProgress?: (progress: LocalProgress) => void): Promise<LocalRun> => {
    // Only what is printed has to be kept: the order does not depend on how many are.
    const settings: RunSettings = { keep: top, maxSeconds: maxSeconds ?? evidence.options.maxSeconds, mode: 'rank' };
    return runLocally(compute, evidence, settings, top, context.interrupt, onProgress);
  };
  if (kindOfInput(argument) === 'batch') {
    return withWarmCompute(context, threads, (compute) =>
      runBatch(
        argument,
        context,
        async (line) => {
          const result = await run(compute, evidenceOfLine(line).evidence);
          return { document: { ...passedThrough(line), ...rankingDocument(result) }, exitCode: exitCodeOf(result) };
        },
        passedThrough,
        // Documents side by side fill the gaps in which one of them has nothing for all threads; a time limit each has to
        // be the document's own.
        maxSeconds === undefined ? compute.threadCount : 1,
      ),
    );
  }
  const { evidence, notes } = await readEvidenceArgument(argument);
  const line = createProgressLine(context);
  const result = await withWarmCompute(context, threads, (compute) => run(compute, evidence, line.show));
  line.clear();
  if (options.has('json')) await context.write(`${JSON.stringify(rankingDocument(result))}\n`);
  else {
    for (const note of notes) context.tell(`note: ${note}\n`);
    await context.write(describeRanking(result, evidence));
    context.tell('Best of this list under this model, not an identification: confirm against an authentic standard.\n');
  }
  return exitCodeOf(result);
}

const exitCodeOf = ({ isComplete }: LocalRun): ExitCode => (isComplete ? EXIT.done : EXIT.stopped);

function rankingDocument({ survivorCount, isComplete, funnel, seconds, noneOfTheseProbability, candidates }: LocalRun): object {
  return {
    count: survivorCount,
    complete: isComplete,
    funnel,
    seconds,
    noneOfTheseProbability,
    candidates: candidates.map(candidateDocument),
  };
}

function candidateDocument({ rank, smiles, idcode, probability, score, terms }: RankedCandidate): object {
  return { rank, smiles, idcode, probability, score, terms };
}

function describeRanking(
  { survivorCount, isComplete, funnel, seconds, noneOfTheseProbability, candidates }: LocalRun,
  { formula }: EvidenceDocument,
): string {
  const percent = (probability: number): string => `${(100 * probability).toFixed(1)} %`;
  const rows = candidates.map(({ rank, probability, score, carbonDeviation, protonDeviation, smiles }) => [
    String(rank),
    percent(probability),
    score.toFixed(2),
    carbonDeviation === null ? '' : carbonDeviation.toFixed(2),
    protonDeviation === null ? '' : protonDeviation.toFixed(2),
    smiles,
  ]);
  const stopped = isComplete ? '' : ', stopped before the end: the list is incomplete';
  const none = noneOfTheseProbability === null ? '' : `none of these: ${percent(noneOfTheseProbability)}\n`;
  const table =
    rows.length === 0
      ? ''
      : `${alignColumns([['rank', 'probability', 'score', '13C / ppm', '1H / ppm', 'structure'], ...rows], [0, 1, 2, 3, 4])}${none}\n`;
  return `${formula}: ${countOf(survivorCount, 'candidate')}, ${formatSeconds(seconds)}${stopped}\n\n${table}${describeFunnel(funnel)}`;
}
