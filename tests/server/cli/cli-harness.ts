import type { CliContext } from '../../../server/cli/cli-context.js';
import type { ExitCode } from '../../../server/cli/cli-error.js';
import { Interrupt } from '../../../server/cli/interrupt.js';
import { runCli } from '../../../server/cli/program.js';
import type { ComputeService } from '../../../server/compute/compute-service.js';
import { createComputePool } from '../../../server/compute/pool.js';

export interface CliOutcome {
  readonly exitCode: ExitCode;
  readonly stdout: string;
  readonly stderr: string;
  /** Standard output as one JSON document. */
  readonly json: () => Record<string, unknown>;
  /** Standard output as one JSON document a line. */
  readonly jsonLines: () => Record<string, unknown>[];
  /** How often compute threads were started. */
  readonly openedCount: number;
}
export interface CliRun {
  readonly input?: string;
  readonly interrupt?: Interrupt;
  /** Instead of the real threads. */
  readonly compute?: ComputeService;
}

/** Real compute threads that outlive single commands, so that each test does not load the engine again. */
export class CliHarness {
  readonly #pools = new Map<number, ComputeService>();

  async run(args: readonly string[], { input = '', interrupt = new Interrupt(), compute }: CliRun = {}): Promise<CliOutcome> {
    let stdout = '';
    let stderr = '';
    let openedCount = 0;
    const context: CliContext = {
      write: (text) => {
        stdout += text;
        return Promise.resolve();
      },
      tell: (text) => void (stderr += text),
      input: inPieces(input),
      isInteractive: false,
      interrupt,
      openCompute: (threads = 2) => {
        openedCount++;
        return Promise.resolve({ ...(compute ?? this.#pool(threads)), close: () => Promise.resolve() });
      },
    };
    const exitCode = await runCli(args, context);
    return {
      exitCode,
      stdout,
      stderr,
      json: () => JSON.parse(stdout) as Record<string, unknown>,
      jsonLines: () =>
        stdout
          .trimEnd()
          .split('\n')
          .map((line) => JSON.parse(line) as Record<string, unknown>),
      openedCount,
    };
  }

  async close(): Promise<void> {
    await Promise.all([...this.#pools.values()].map((pool) => pool.close()));
  }

  #pool(threads: number): ComputeService {
    const known = this.#pools.get(threads) ?? createComputePool({ threads });
    this.#pools.set(threads, known);
    return known;
  }
}

/** Text as a stream delivers it: cut at places that do not care for lines or characters. */
async function* inPieces(text: string): AsyncGenerator<Buffer> {
  const bytes = Buffer.from(text);
  for (let start = 0; start < bytes.length; start += 7) yield await Promise.resolve(bytes.subarray(start, start + 7));
}
