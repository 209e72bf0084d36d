import type { RankedCandidate, RunSettings } from '../../../shared/jobs/contract.js';
import type { EvidenceDocument } from '../../../shared/schemas/evidence.js';
import type { ComputeService } from '../../compute/compute-service.js';
import type { CliContext } from '../cli-context.js';
import type { ExitCode } from '../cli-error.js';
import { runEvidenceCommand } from '../evidence-command.js';
import { runLocally, type LocalProgress, type LocalRun } from '../local-run.js';
import { MAX_COUNT, MAX_SECONDS, MAX_THREADS, OptionReader, type RawOptions } from '../options.js';
import { alignColumns, countOf, describeCuts, describeFunnel, formatSeconds } from '../text-output.js';

const DEFAULT_TOP = 20;
const MAX_TOP = 10_000;

/** `isoloom rank`: enumerate, predict, score; the best candidates with their probabilities. */
export async function rankCommand(argument: string, raw: RawOptions, context: CliContext): Promise<ExitCode> {
  const options = new OptionReader(raw);
  const threads = options.number('threads', 'threads', 1, MAX_THREADS, 'whole number');
  const maxSeconds = options.number('maxSeconds', 'max-seconds', 0.1, MAX_SECONDS);
  const maxCount = options.number('maxCount', 'max-count', 1, MAX_COUNT, 'whole number');
  const top = options.number('top', 'top', 1, MAX_TOP, 'whole number') ?? DEFAULT_TOP;
  options.check();

  const run = (compute: ComputeService, evidence: EvidenceDocument, onProgress?: (progress: LocalProgress) => void): Promise<LocalRun> => {
    // Only what is printed has to be kept: the order does not depend on how many are.
    const settings: RunSettings = {
      keep: top,
      maxSeconds: maxSeconds ?? evidence.options.maxSeconds,
      maxConstitutions: maxCount ?? evidence.options.maxConstitutions ?? null,
      mode: 'rank',
    };
    return runLocally(compute, evidence, settings, top, context.interrupt, onProgress);
  };
  return runEvidenceCommand(argument, context, {
    threads,
    maxSeconds,
    wantsJson: options.has('json'),
    run,
    toDocument: rankingDocument,
    print: async (result, evidence) => {
      await context.write(describeRanking(result, evidence));
      context.tell('Best of this list under this model, not an identification: confirm against an authentic standard.\n');
    },
  });
}

function rankingDocument({ survivorCount, isComplete, funnel, cuts, seconds, noneOfTheseProbability, candidates }: LocalRun): object {
  return {
    count: survivorCount,
    complete: isComplete,
    funnel,
    cuts,
    seconds,
    noneOfTheseProbability,
    candidates: candidates.map(candidateDocument),
  };
}

function candidateDocument({ rank, smiles, idcode, probability, score, terms }: RankedCandidate): object {
  return { rank, smiles, idcode, probability, score, terms };
}

function describeRanking(
  { survivorCount, isComplete, funnel, cuts, seconds, noneOfTheseProbability, candidates }: LocalRun,
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
  return `${formula}: ${countOf(survivorCount, 'candidate')}, ${formatSeconds(seconds)}${stopped}\n\n${table}${describeFunnel(funnel)}${describeCuts(cuts)}`;
}
