/** A wish to stop (Ctrl-C) that commands look at and react to. */
export class Interrupt {
  readonly #controller = new AbortController();

  get isRequested(): boolean {
    return this.#controller.signal.aborted;
  }
  request(): void {
    this.#controller.abort();
  }
  /** @returns stops the listening */
  onRequest(react: () => void): () => void {
    const { signal } = this.#controller;
    if (signal.aborted) react();
    signal.addEventListener('abort', react, { once: true });
    return () => signal.removeEventListener('abort', react);
  }
}
