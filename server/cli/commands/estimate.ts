import type { RunEstimate } from '../../../shared/jobs/contract.js';
import { outlookOf } from '../../../shared/estimates/outlook.js';
import type { EvidenceDocument } from '../../../shared/schemas/evidence.js';
import type { CliContext } from '../cli-context.js';
import { EXIT, type ExitCode } from '../cli-error.js';
import { abortable } from '../local-run.js';
import { MAX_SECONDS, OptionReader, type RawOptions } from '../options.js';
import { readEvidenceArgument } from '../read-input.js';
import { formatSeconds, groupDigits } from '../text-output.js';
import { withCompute } from '../with-compute.js';

const DEFAULT_PROBES = 1_000_000;
const DEFAULT_SECONDS = 2;
const MAX_PROBES = 10_000_000;
const MAX_SEED = 2 ** 31 - 1;
/** Without quota or limit a run of a day on one core is taken for hopeless. */
const SECONDS_OF_A_DAY = 86_400;

/** `isoloom estimate`: how many constitutions a run will meet, how long it will take, and what would make it smaller. */
export async function estimateCommand(argument: string, raw: RawOptions, context: CliContext): Promise<ExitCode> {
  const options = new OptionReader(raw);
  const maxSeconds = options.number('maxSeconds', 'max-seconds', 0.1, MAX_SECONDS) ?? DEFAULT_SECONDS;
  const probes = options.number('probes', 'probes', 1, MAX_PROBES, 'whole number') ?? DEFAULT_PROBES;
  const seed = options.number('seed', 'seed', 0, MAX_SEED, 'whole number') ?? 1;
  const mode = options.text('mode') ?? 'count';
  if (mode !== 'count' && mode !== 'rank') options.report('mode', 'expected count or rank');
  options.check();
  const { evidence, notes } = await readEvidenceArgument(argument);
  const result = await withCompute(context, 1, (compute) =>
    abortable(context.interrupt, (signal) =>
      compute.runJob('estimate', { evidence, mode: mode === 'rank' ? 'rank' : 'count', probes, seed, maxSeconds }, { signal }),
    ),
  );
  if (options.has('json')) await context.write(`${JSON.stringify(result)}\n`);
  else {
    for (const note of notes) context.tell(`note: ${note}\n`);
    await context.write(describeEstimate(result, evidence));
  }
  return EXIT.done;
}

function describeEstimate(result: RunEstimate, { options }: EvidenceDocument): string {
  const cpu = { estimate: result.cpuSeconds, low: result.cpuSecondsLow, high: result.cpuSecondsHigh };
  const { kind } = outlookOf(cpu, result, {
    cpuSecondsLeft: SECONDS_OF_A_DAY,
    maxSeconds: options.maxSeconds,
    maxConstitutions: options.maxConstitutions ?? null,
    threadCount: 1,
  });
  const size = result.isExact
    ? `${roundedCount(result.estimate)} constitutions (counted)`
    : `about ${roundedCount(result.estimate)} constitutions (${roundedCount(result.low)} to ${roundedCount(result.high)})`;
  const cost = `about ${describeTime(cpu.estimate)} on one core (${describeTime(cpu.low)} to ${describeTime(cpu.high)})`;
  const warning = kind === 'hopeless' ? 'hopeless as it is: the run will not come to its end\n' : '';
  return `${size}\n${cost}\n${warning}${result.hints.map(({ text }) => `${text}\n`).join('')}`;
}

/** Digits up to a million millions, powers of ten beyond. */
const roundedCount = (value: number): string => (value < 1e12 ? groupDigits(Math.round(value)) : value.toExponential(1));

function describeTime(seconds: number): string {
  if (seconds < 600) return formatSeconds(seconds);
  if (seconds < 172_800) return `${(seconds / 3_600).toFixed(1)} h`;
  const years = seconds / 31_557_600;
  return years < 2
    ? `${Math.round(seconds / 86_400)} days`
    : years < 10_000
      ? `${Math.round(years)} years`
      : `${years.toExponential(1)} years`;
}
