import type { ErrorRequestHandler, RequestHandler } from 'express';
import type { Logger } from 'pino';
import type { ProblemResponse } from '../../shared/schemas/problem.js';
import { ConflictError, HttpError, InvalidInputError, NotFoundError, TooManyRequestsError } from '../errors.js';

/** Whatever no route answered. */
export function notFound(): RequestHandler {
  return () => {
    throw new NotFoundError();
  };
}

/** Turns every failure into a status and a problem body; what is not one of ours is logged in full and answered with 500. */
export function answerErrors(logger: Logger): ErrorRequestHandler {
  return (error: unknown, request, response, next) => {
    const problem = describe(error);
    if (problem.status >= 500) logger.error({ err: error, requestId: request.id }, 'request failed');
    if (response.headersSent) {
      // A stream that broke half-way: only closing it tells the other side.
      next(error);
      return;
    }
    if (error instanceof TooManyRequestsError) response.setHeader('Retry-After', String(error.retryAfterSeconds));
    const body: ProblemResponse = { error: { ...problem.error, ...(problem.status >= 500 ? { requestId: String(request.id) } : {}) } };
    response.status(problem.status).json(body);
  };
}

function describe(error: unknown): { status: number; error: ProblemResponse['error'] } {
  if (error instanceof HttpError) {
    return {
      status: error.status,
      error: {
        code: error.code,
        message: error.message,
        ...(error instanceof InvalidInputError ? { issues: [...error.issues] } : {}),
        ...(error instanceof ConflictError && error.figures !== undefined ? { figures: { ...error.figures } } : {}),
      },
    };
  }
  return (
    describeBodyError(error) ?? { status: 500, error: { code: 'internal', message: 'Something went wrong on our side. Please try again.' } }
  );
}

/** Failures of the body parser, which tells them by `type`. */
function describeBodyError(error: unknown): { status: number; error: ProblemResponse['error'] } | null {
  const type = typeof error === 'object' && error !== null && 'type' in error ? error.type : null;
  switch (type) {
    case 'entity.parse.failed':
      return { status: 400, error: { code: 'invalidJson', message: 'The body is not valid JSON.' } };
    case 'entity.too.large':
      return { status: 413, error: { code: 'tooLarge', message: 'The body is larger than allowed.' } };
    case 'charset.unsupported':
    case 'encoding.unsupported':
      return { status: 415, error: { code: 'unsupportedEncoding', message: 'Send JSON in UTF-8.' } };
    case 'request.aborted':
    case 'request.size.invalid':
      return { status: 400, error: { code: 'incompleteBody', message: 'The body arrived incomplete.' } };
    default:
      return null;
  }
}
