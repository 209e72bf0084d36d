import { Command, CommanderError } from 'commander';
import type { CliContext } from './cli-context.js';
import { BadInputError, describeError, EXIT, type ExitCode } from './cli-error.js';
import { enumerateCommand } from './commands/enumerate.js';
import { estimateCommand } from './commands/estimate.js';
import { formulaCommand } from './commands/formula.js';
import { predictCommand } from './commands/predict.js';
import { rankCommand } from './commands/rank.js';
import type { RawOptions } from './options.js';

const JSON_FLAG = ['--json', 'print one JSON document on standard output and nothing else'] as const;
const THREADS_FLAG = ['--threads <number>', 'threads that work side by side; default: one per core'] as const;
const SECONDS_FLAG = ['--max-seconds <number>', 'stop after so many seconds with what was found (exit code 3)'] as const;
const COUNT_FLAG = ['--max-count <number>', 'stop after so many constitutions with what was found (exit code 3)'] as const;

function buildProgram(context: CliContext, finish: (code: ExitCode) => void): Command {
  const program = new Command('isoloom')
    .description('Every constitution that a molecular formula and fragments allow, with predicted and ranked NMR.')
    .exitOverride()
    .configureOutput({ writeOut: (text) => void context.write(text), writeErr: () => undefined });
  const add = (name: string, description: string): Command =>
    program
      .command(name)
      .description(description)
      .option(...JSON_FLAG)
      .exitOverride();
  const withArgument =
    (command: (argument: string, raw: RawOptions, context: CliContext) => Promise<ExitCode>) => async (argument: string, raw: RawOptions) =>
      finish(await command(argument, raw, context));

  add('formula', 'molecular formulas for an accurate mass, best first')
    .option('--mz <number>', 'observed m/z')
    .option('--adduct <ion>', 'ion, such as "[M+H]+", "[M-H]-", "[M]+."; M = neutral mass (default "[M+H]+")')
    .option('--ppm <number>', 'half width of the window (default 5)')
    .option('--isotopes <heights>', 'heights of M, M+1, M+2 …, such as "100,9.9,0.8"')
    .option('--elements <symbols>', 'elements to try, such as CHNO; default: all supported')
    .option('--limit <number>', 'formulas to print (default 50)')
    .action(async (raw: RawOptions) => finish(await formulaCommand(raw, context)));
  add('enumerate', 'count or list all constitutions')
    .argument(
      '<input>',
      'formula, evidence document (.json), batch of one document a line (.jsonl), or - for such a batch on standard input',
    )
    .option('--count', 'print the count only')
    .option('--smiles', 'list the constitutions as SMILES')
    .option('--keep <number>', 'list at most so many (default 100000)')
    .option(
      '--merge-resonance <true|false>',
      'whether resonance forms of aromatic rings count once; default: as the document says, else true',
    )
    .option(...THREADS_FLAG)
    .option(...SECONDS_FLAG)
    .option(...COUNT_FLAG)
    .action(withArgument(enumerateCommand));
  add('estimate', 'estimate the number of constitutions and the time by random probing, and what would make it smaller')
    .argument('<input>', 'evidence document (.json) or formula')
    .option('--mode <count|rank>', 'what the run will do: count as enumerate does (default), or rank')
    .option('--probes <number>', 'random descents at most (default 1000000)')
    .option('--seed <number>', 'start of the random sequence (default 1)')
    .option('--max-seconds <number>', 'estimate for so many seconds at most (default 2)')
    .action(withArgument(estimateCommand));
  add('predict', 'predict 13C and 1H signals')
    .argument('<smiles>', 'structure as SMILES, or - for one SMILES a line on standard input')
    .option('--solvent <name>', 'solvent (default CDCl3)')
    .action(withArgument(predictCommand));
  add('rank', 'enumerate and rank against observed signals')
    .argument('<input>', 'evidence document (.json), batch of one document a line (.jsonl), or - for such a batch on standard input')
    .option('--top <number>', 'candidates to print (default 20)')
    .option(...THREADS_FLAG)
    .option(...SECONDS_FLAG)
    .option(...COUNT_FLAG)
    .action(withArgument(rankCommand));
  return program;
}

/** Faults of the command line itself as bad input; help and the like are no fault. */
function asCommandLineError(error: unknown): unknown {
  if (!(error instanceof CommanderError)) return error;
  const message = error.message.replace(/^error: /, '');
  return new BadInputError([{ path: 'arguments', message: `${message}; see isoloom --help` }]);
}

/**
 * Runs one command.
 *
 * @param args - arguments behind the name of the program
 * @returns the exit code (DESIGN.md 6); nothing is thrown
 */
export async function runCli(args: readonly string[], context: CliContext): Promise<ExitCode> {
  let exitCode: ExitCode = EXIT.done;
  const program = buildProgram(context, (code) => (exitCode = code));
  try {
    await program.parseAsync([...args], { from: 'user' });
    return exitCode;
  } catch (error) {
    if (error instanceof CommanderError && error.exitCode === 0) return EXIT.done;
    if (error instanceof CommanderError && error.code === 'commander.help') {
      context.tell(program.helpInformation());
      return EXIT.badInput;
    }
    const described = describeError(asCommandLineError(error));
    const { issues, path, message } = described.document.error;
    for (const issue of issues ?? [{ path, message }]) context.tell(`${issue.path === '' ? '' : `${issue.path}: `}${issue.message}\n`);
    if (args.includes('--json')) await context.write(`${JSON.stringify(described.document)}\n`);
    return described.exitCode;
  }
}
