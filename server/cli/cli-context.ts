import type { ComputeService } from '../compute/compute-service.js';
import type { Interrupt } from './interrupt.js';

/** Everything a command touches of the outside, so that tests can stand in for it. */
export interface CliContext {
  /** Writes to standard output; resolves when the reader has room again. */
  readonly write: (text: string) => Promise<void>;
  /** Writes to standard error: messages for people. */
  readonly tell: (text: string) => void;
  /** Standard input, in pieces of any size. */
  readonly input: AsyncIterable<string | Buffer>;
  /** Whether progress may be shown on standard error. */
  readonly isInteractive: boolean;
  readonly interrupt: Interrupt;
  /** Starts the compute threads; a command that needs them does so once, for a whole batch. */
  readonly openCompute: (threads: number | undefined) => Promise<ComputeService>;
}
