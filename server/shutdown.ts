/** What must be undone at the end, in reverse order of its making. */
export interface Shutdown {
  /** Registers something that was opened; `close` runs once, at most `STEP_TIMEOUT_MS` long. */
  add(name: string, close: () => Promise<unknown> | void): void;
  /**
   * Closes everything, newest first. A step that fails or hangs is reported and does not stop the others. May be called
   * again for what was added since.
   */
  run(): Promise<void>;
}

const STEP_TIMEOUT_MS = 35_000;

export function createShutdown(onError: (step: string, error: unknown) => void, stepTimeoutMs: number = STEP_TIMEOUT_MS): Shutdown {
  const steps: Array<{ name: string; close: () => Promise<unknown> | void }> = [];
  let running: Promise<void> = Promise.resolve();

  async function closeAll(): Promise<void> {
    for (let step = steps.pop(); step !== undefined; step = steps.pop()) {
      try {
        await withTimeout(step.close, stepTimeoutMs);
      } catch (error) {
        onError(step.name, error);
      }
    }
  }

  return {
    add: (name, close) => void steps.push({ name, close }),
    run: () => (running = running.then(closeAll)),
  };
}

async function withTimeout(close: () => Promise<unknown> | void, milliseconds: number): Promise<void> {
  let timer: NodeJS.Timeout | undefined;
  const timeout = new Promise<never>((_resolve, reject) => {
    timer = setTimeout(() => reject(new Error(`not done after ${milliseconds} ms`)), milliseconds);
  });
  try {
    await Promise.race([Promise.resolve().then(close), timeout]);
  } finally {
    clearTimeout(timer);
  }
}
