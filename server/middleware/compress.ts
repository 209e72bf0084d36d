import compression from 'compression';
import type { RequestHandler } from 'express';

/** Compresses answers, but leaves event streams alone: compression would hold their events back. */
export function compress(): RequestHandler {
  return compression({
    filter: (request, response) =>
      !String(response.getHeader('Content-Type') ?? '').startsWith('text/event-stream') && compression.filter(request, response),
  });
}
