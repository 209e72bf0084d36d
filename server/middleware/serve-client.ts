import { existsSync } from 'node:fs';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import express, { type Router } from 'express';

/** dist/client as seen from dist/server/middleware, or from the sources. */
function builtClient(): string {
  const isSource = import.meta.url.endsWith('.ts');
  return fileURLToPath(new URL(isSource ? '../../dist/client' : '../../client', import.meta.url));
}

/**
 * Serves the built client. Every address that is neither a file nor below /api gets the page, so that a deep link opens
 * and the client's router takes over. Without a build (development, API tests) it serves nothing.
 */
export function serveClient(directory: string = builtClient()): Router {
  const router = express.Router();
  const page = join(directory, 'index.html');
  // Names of built assets carry a hash of their content: they never change.
  router.use('/assets', express.static(join(directory, 'assets'), { immutable: true, maxAge: '1y', index: false, redirect: false }));
  router.use('/assets', (_request, response) => void response.status(404).end());
  router.use(
    express.static(directory, {
      index: false,
      redirect: false,
      cacheControl: false,
      setHeaders: (response) => void response.setHeader('Cache-Control', 'no-cache'),
    }),
  );
  router.get('/{*path}', (request, response, next) => {
    if (request.path === '/api' || request.path.startsWith('/api/') || !request.accepts('html') || !existsSync(page)) {
      next();
      return;
    }
    response.setHeader('Cache-Control', 'no-cache');
    response.sendFile(page);
  });
  return router;
}
