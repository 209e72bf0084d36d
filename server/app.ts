import cookieParser from 'cookie-parser';
import express, { type Express } from 'express';
import type { AppContext } from './app-context.js';
import { compress } from './middleware/compress.js';
import { requireRequestHeader } from './middleware/csrf.js';
import { answerErrors, notFound } from './middleware/errors.js';
import { createRateLimits } from './middleware/rate-limits.js';
import { requestId } from './middleware/request-id.js';
import { requestLog } from './middleware/request-log.js';
import { securityHeaders } from './middleware/security-headers.js';
import { serveClient } from './middleware/serve-client.js';
import { apiRoutes } from './routes/api.js';
import { mountRoutes } from './routes/route.js';

/** Far above an evidence document at all its limits (shared/schemas/evidence.ts). */
const LARGEST_BODY = '512kb';

/** The whole application: API below /api/v1, the client everywhere else. Starts nothing and listens nowhere. */
export function createApp(context: AppContext): Express {
  const { config, logger } = context;
  const app = express();
  app.disable('x-powered-by');
  app.set('trust proxy', config.trustedProxies);
  app.use(requestId(), requestLog(logger), securityHeaders({ isHttps: config.publicUrl.startsWith('https:') }), compress());

  const api = express.Router();
  api.use((_request, response, next) => {
    response.setHeader('Cache-Control', 'no-store');
    next();
  });
  const limits = createRateLimits();
  api.use(limits.everything, requireRequestHeader(), cookieParser(), express.json({ limit: LARGEST_BODY }));
  mountRoutes(api, context, apiRoutes(context), limits);
  api.use(notFound());
  app.use('/api/v1', api);
  app.use('/api', notFound());

  app.use(serveClient());
  app.use(notFound());
  app.use(answerErrors(logger));
  return app;
}
