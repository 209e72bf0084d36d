import type { InputIssue } from '../../shared/schemas/problem';

/** A failed call to the API, with what the server says about it. `status` 0 = no answer arrived. */
export class ApiError extends Error {
  readonly status: number;
  /** Stable, for code to decide on. */
  readonly code: string;
  /** Fields that are wrong and what they should be; only with 422. */
  readonly issues: readonly InputIssue[];
  /** Numbers behind a refusal, for instance of a quota. */
  readonly figures: Readonly<Record<string, number>>;
  readonly requestId: string | undefined;

  constructor(init: {
    status: number;
    code: string;
    message: string;
    issues?: readonly InputIssue[] | undefined;
    figures?: Readonly<Record<string, number>> | undefined;
    requestId?: string | undefined;
  }) {
    super(init.message);
    this.name = 'ApiError';
    this.status = init.status;
    this.code = init.code;
    this.issues = init.issues ?? [];
    this.figures = init.figures ?? {};
    this.requestId = init.requestId;
  }
}

/** The session has ended; the shell asks to sign in again, so nobody else has to say so. */
export const isSessionEnd = (error: unknown): boolean => error instanceof ApiError && error.status === 401;

/** The sentence to show for anything that was thrown. */
export function errorMessage(error: unknown): string {
  if (error instanceof ApiError) return error.message;
  if (error instanceof Error && error.message !== '') return error.message;
  return 'Something went wrong. Try again.';
}

/** What the server says about one field, or undefined. */
export function issueFor(error: unknown, path: string): string | undefined {
  if (!(error instanceof ApiError)) return undefined;
  return error.issues.find((issue) => issue.path === path)?.message;
}
