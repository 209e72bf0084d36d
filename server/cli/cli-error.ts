import type { InputIssue } from '../../shared/schemas/problem.js';

/** Exit codes of the command line (DESIGN.md 6). */
export const EXIT = { done: 0, fault: 1, badInput: 2, stopped: 3 } as const;
export type ExitCode = (typeof EXIT)[keyof typeof EXIT];

/** Input that people can correct: ends a command with exit code 2, or one line of a batch. */
export class BadInputError extends Error {
  override readonly name = 'BadInputError';
  constructor(readonly issues: readonly InputIssue[]) {
    super(issues.map(({ path, message }) => (path === '' ? message : `${path}: ${message}`)).join('\n'));
  }
}

/** Ctrl-C came before there was anything to print. */
export class InterruptedError extends Error {
  override readonly name = 'InterruptedError';
  constructor() {
    super('stopped before anything was found');
  }
}

export interface ErrorDocument {
  readonly error: { readonly code: string; readonly message: string; readonly path: string; readonly issues?: readonly InputIssue[] };
}

/** An error as the JSON of a command or of one line of a batch. `issues` lists all when there is more than one. */
export function describeError(error: unknown): { document: ErrorDocument; exitCode: ExitCode } {
  if (error instanceof BadInputError) {
    const first = error.issues[0] ?? { path: '', message: error.message };
    const all = error.issues.length > 1 ? { issues: error.issues } : {};
    return { document: { error: { code: 'badInput', message: first.message, path: first.path, ...all } }, exitCode: EXIT.badInput };
  }
  if (error instanceof InterruptedError)
    return { document: { error: { code: 'cancelled', message: error.message, path: '' } }, exitCode: EXIT.stopped };
  const message = error instanceof Error ? error.message : String(error);
  return { document: { error: { code: 'internal', message, path: '' } }, exitCode: EXIT.fault };
}
