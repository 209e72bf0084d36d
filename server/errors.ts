import type { InputIssue } from '../shared/schemas/problem.js';

/** A failure with a message that is safe to show. `code` is stable: clients and tests may rely on it. */
export abstract class HttpError extends Error {
  abstract readonly status: number;
  readonly code: string;

  constructor(code: string, message: string) {
    super(message);
    this.name = new.target.name;
    this.code = code;
  }
}

export class UnauthenticatedError extends HttpError {
  readonly status = 401;

  constructor(code = 'notSignedIn', message = 'Please sign in.') {
    super(code, message);
  }
}

export class ForbiddenError extends HttpError {
  readonly status = 403;

  constructor(code = 'forbidden', message = 'Your role does not allow this.') {
    super(code, message);
  }
}

/** Also for rows that exist but may not be read by the caller: the answer does not tell which. */
export class NotFoundError extends HttpError {
  readonly status = 404;

  constructor(code = 'notFound', message = 'There is nothing at this address, or you may not see it.') {
    super(code, message);
  }
}

/** The same answer for links that never were, have run out, were used or withdrawn. */
export const linkUsedUp = (): NotFoundError => new NotFoundError('linkUsedUp', 'This link does not work any more. Ask for a new one.');

/** The request is fine by itself but does not go with the present state. */
export class ConflictError extends HttpError {
  readonly status = 409;
  /** Figures behind the refusal, e.g. of a quota. */
  readonly figures: Readonly<Record<string, number>> | undefined;

  constructor(code: string, message: string, figures?: Readonly<Record<string, number>>) {
    super(code, message);
    this.figures = figures;
  }
}

/** Bad input: every issue with the field and the cure. */
export class InvalidInputError extends HttpError {
  readonly status = 422;
  readonly issues: readonly InputIssue[];

  constructor(issues: readonly InputIssue[]) {
    super('invalidInput', 'Some of what was sent is not right.');
    this.issues = issues;
  }
}

export class TooManyRequestsError extends HttpError {
  readonly status = 429;
  readonly retryAfterSeconds: number;

  constructor(retryAfterSeconds: number, message = 'Too many attempts. Please wait and try again.') {
    super('tooManyRequests', message);
    this.retryAfterSeconds = retryAfterSeconds;
  }
}

/** For the moment too busy, e.g. the queue of the workers is full. */
export class UnavailableError extends HttpError {
  readonly status = 503;

  constructor(code = 'busy', message = 'The server is busy. Please try again in a moment.') {
    super(code, message);
  }
}
