import type { RunEvent, RunListener } from './queue.js';

/** Who watches which run. */
export class RunListeners {
  readonly #listeners = new Map<string, Set<RunListener>>();

  /** @returns stops the listening */
  subscribe(runId: string, listener: RunListener): () => void {
    const listeners = this.#listeners.get(runId) ?? new Set();
    this.#listeners.set(runId, listeners.add(listener));
    return () => {
      listeners.delete(listener);
      if (listeners.size === 0 && this.#listeners.get(runId) === listeners) this.#listeners.delete(runId);
    };
  }

  emit(runId: string, event: RunEvent): void {
    for (const listener of [...(this.#listeners.get(runId) ?? [])]) listener(event);
  }
}
