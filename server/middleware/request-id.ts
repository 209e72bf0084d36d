import { randomUUID } from 'node:crypto';
import type { RequestHandler } from 'express';

/** Gives every request an id that stands in the log, in the response header and in messages about faults. */
export function requestId(): RequestHandler {
  return (request, response, next) => {
    request.id = randomUUID();
    response.setHeader('X-Request-Id', String(request.id));
    next();
  };
}
