import type { EvidenceDocument } from '../../shared/schemas/evidence.js';
import type { ComputeService } from '../compute/compute-service.js';
import { runBatch } from './batch.js';
import type { CliContext } from './cli-context.js';
import { EXIT, type ExitCode } from './cli-error.js';
import type { LocalProgress, LocalRun } from './local-run.js';
import { createProgressLine } from './progress-line.js';
import { evidenceOfLine, kindOfInput, passedThrough, readEvidenceArgument } from './read-input.js';
import { withWarmCompute } from './with-compute.js';

/** What a command over evidence documents does with one of them. */
export interface EvidenceCommand {
  readonly threads: number | undefined;
  /** Given = each document has the limit to itself, so a batch runs one after the other. */
  readonly maxSeconds: number | undefined;
  readonly wantsJson: boolean;
  run(compute: ComputeService, evidence: EvidenceDocument, onProgress?: (progress: LocalProgress) => void): Promise<LocalRun>;
  /** The JSON document of a result. */
  toDocument(result: LocalRun): object;
  /** The same for people. */
  print(result: LocalRun, evidence: EvidenceDocument): Promise<void>;
}

const exitCodeOf = ({ isComplete }: LocalRun): ExitCode => (isComplete ? EXIT.done : EXIT.stopped);

/** Runs a command over a formula, a document or a batch of documents. */
export async function runEvidenceCommand(argument: string, context: CliContext, command: EvidenceCommand): Promise<ExitCode> {
  if (kindOfInput(argument) === 'batch') {
    return withWarmCompute(context, command.threads, (compute) =>
      runBatch(
        argument,
        context,
        async (line) => {
          const result = await command.run(compute, evidenceOfLine(line).evidence);
          return { document: { ...passedThrough(line), ...command.toDocument(result) }, exitCode: exitCodeOf(result) };
        },
        passedThrough,
        // Documents side by side fill the gaps in which one of them has nothing for all threads.
        command.maxSeconds === undefined ? compute.threadCount : 1,
      ),
    );
  }
  const { evidence, notes } = await readEvidenceArgument(argument);
  const line = createProgressLine(context);
  const result = await withWarmCompute(context, command.threads, (compute) => command.run(compute, evidence, line.show));
  line.clear();
  if (command.wantsJson) await context.write(`${JSON.stringify(command.toDocument(result))}\n`);
  else {
    for (const note of [...notes, ...result.notes]) context.tell(`note: ${note}\n`);
    await command.print(result, evidence);
  }
  return exitCodeOf(result);
}
