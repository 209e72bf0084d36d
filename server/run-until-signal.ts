import { createShutdown, type Shutdown } from './shutdown.js';

export interface LongRunningProgram {
  /** Opens what the program needs; `stop` ends the program from within. */
  readonly start: (shutdown: Shutdown, stop: (exitCode: number) => void) => Promise<void>;
  /** What to print when the start fails. */
  readonly explain: (error: unknown) => unknown;
}

/** A start under way fails soon once its parts are closed; only a database that is just being made takes a while. */
const LONGEST_START_TO_WAIT_FOR_MS = 20_000;

/** Runs a program until Ctrl-C, a signal of the system or a fault ends it, and closes whatever it has opened by then. */
export function runUntilSignal({ start, explain }: LongRunningProgram): void {
  const shutdown = createShutdown((step, error) => console.error(`Could not close the ${step} cleanly:`, error));
  let starting: Promise<unknown> = Promise.resolve();
  let isStopping = false;

  async function close(exitCode: number): Promise<void> {
    await shutdown.run();
    await Promise.race([starting, new Promise((resolve) => setTimeout(resolve, LONGEST_START_TO_WAIT_FOR_MS))]);
    await shutdown.run();
    process.exit(exitCode);
  }
  function stop(exitCode: number): void {
    // A terminal and npm may both pass on the same Ctrl-C.
    if (isStopping) return;
    isStopping = true;
    void close(exitCode);
  }

  for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP'] as const) {
    process.on(signal, () => {
      if (!isStopping) console.log('Stopping …');
      stop(0);
    });
  }
  process.on('uncaughtException', (error) => {
    console.error('Fault, stopping:', error);
    stop(1);
  });
  starting = start(shutdown, stop).catch((error: unknown) => {
    // Closing what a start under way needs makes it fail: that is no news.
    if (!isStopping) console.error(explain(error));
    stop(1);
  });
}
