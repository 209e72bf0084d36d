import { BadInputError, describeError, EXIT, type ExitCode } from './cli-error.js';
import type { CliContext } from './cli-context.js';
import { readLines } from './read-input.js';
import { asCliError } from './with-compute.js';

/** Answer to one line: the document to print, and how it ended. */
export interface LineAnswer {
  readonly document: object;
  readonly exitCode: ExitCode;
}

/** Worst first: a fault of ours, bad input, stopped by a limit. */
const SEVERITY: readonly ExitCode[] = [EXIT.fault, EXIT.badInput, EXIT.stopped, EXIT.done];
const worseOf = (a: ExitCode, b: ExitCode): ExitCode => (SEVERITY.indexOf(a) < SEVERITY.indexOf(b) ? a : b);

/**
 * Answers a batch line by line: one JSON document a line, in input order, a few lines under way at a time. What is
 * wrong with a line is said in its place, and the batch goes on.
 *
 * @param answer - answers a line; whatever it throws becomes the line's error document
 * @param passThrough - keys to repeat in the error document of a line; must not throw
 * @param width - lines under way at once
 * @returns the worst exit code of all lines; an interrupted batch counts as stopped
 */
export async function runBatch(
  argument: string,
  context: CliContext,
  answer: (line: string) => Promise<LineAnswer>,
  passThrough: (line: string) => object,
  width: number,
): Promise<ExitCode> {
  let exitCode: ExitCode = EXIT.done;
  const underWay: Promise<LineAnswer>[] = [];
  const answerSafely = async (line: string): Promise<LineAnswer> => {
    try {
      return await answer(line);
    } catch (error) {
      const described = describeError(asCliError(error));
      return { document: { ...passThrough(line), ...described.document }, exitCode: described.exitCode };
    }
  };
  const printNext = async (): Promise<void> => {
    const next = await underWay.shift()!;
    exitCode = worseOf(exitCode, next.exitCode);
    await context.write(`${JSON.stringify(next.document)}\n`);
  };
  let lineCount = 0;
  for await (const line of readLines(argument, context)) {
    if (context.interrupt.isRequested) {
      exitCode = worseOf(exitCode, EXIT.stopped);
      break;
    }
    lineCount++;
    underWay.push(answerSafely(line));
    if (underWay.length >= width) await printNext();
  }
  while (underWay.length > 0) await printNext();
  if (lineCount === 0 && !context.interrupt.isRequested)
    throw new BadInputError([{ path: 'input', message: 'no lines to read; expected one document a line' }]);
  return exitCode;
}
