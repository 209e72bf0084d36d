import type { RequestHandler } from 'express';
import { ForbiddenError } from '../errors.js';

const SAFE_METHODS = new Set(['GET', 'HEAD', 'OPTIONS']);

/**
 * Refuses changes without our own header. Other sites cannot set it without a preflight, which is never granted, so
 * that cookies sent along by a browser are not enough to change anything.
 */
export function requireRequestHeader(): RequestHandler {
  return (request, _response, next) => {
    if (!SAFE_METHODS.has(request.method) && request.get('X-Isoloom-Request') !== '1') {
      throw new ForbiddenError('missingRequestHeader', 'Requests that change something carry the header "X-Isoloom-Request: 1".');
    }
    next();
  };
}
