import type { CliContext } from '../cli-context.js';
import { EXIT, type ExitCode } from '../cli-error.js';
import { abortable } from '../local-run.js';
import { MAX_SECONDS, OptionReader, type RawOptions } from '../options.js';
import { readEvidenceArgument } from '../read-input.js';
import { formatSeconds, groupDigits } from '../text-output.js';
import { withCompute } from '../with-compute.js';

const DEFAULT_PROBES = 20_000;
const DEFAULT_SECONDS = 10;
const MAX_PROBES = 10_000_000;
const MAX_SEED = 2 ** 31 - 1;

/** `isoloom estimate`: how many constitutions a run will meet, and how long it will take, by random probing. */
export async function estimateCommand(argument: string, raw: RawOptions, context: CliContext): Promise<ExitCode> {
  const options = new OptionReader(raw);
  const maxSeconds = options.number('maxSeconds', 'max-seconds', 0.1, MAX_SECONDS) ?? DEFAULT_SECONDS;
  const probes = options.number('probes', 'probes', 1, MAX_PROBES, 'whole number') ?? DEFAULT_PROBES;
  const seed = options.number('seed', 'seed', 0, MAX_SEED, 'whole number') ?? 1;
  options.check();
  const { evidence, notes } = await readEvidenceArgument(argument);
  const result = await withCompute(context, 1, (compute) =>
    abortable(context.interrupt, (signal) => compute.runJob('estimate', { evidence, mode: 'count', probes, seed, maxSeconds }, { signal })),
  );
  if (options.has('json')) await context.write(`${JSON.stringify(result)}\n`);
  else {
    for (const note of notes) context.tell(`note: ${note}\n`);
    const round = (value: number): string => groupDigits(Math.round(value));
    await context.write(
      `about ${round(result.estimate)} constitutions (${round(result.low)} to ${round(result.high)}), ${formatSeconds(result.cpuSeconds)} on one core\n`,
    );
  }
  return EXIT.done;
}
