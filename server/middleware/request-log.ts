import { pinoHttp } from 'pino-http';
import type { HttpLogger } from 'pino-http';
import type { Logger } from 'pino';

/** Links that set a password carry their secret in the path: it must not reach the log. */
export const withoutSecrets = (url: string): string =>
  url.replace(/\/(invitations|password-resets)\/[^/?]+$/, '/$1/[secret]').replace(/\?.*$/, '');

/** One line a request, without headers, cookies or bodies. */
export function requestLog(logger: Logger): HttpLogger {
  return pinoHttp({
    logger,
    // Set by the request id middleware before.
    genReqId: (request) => request.id,
    serializers: {
      req: (request: { id: string; method: string; url: string }) => ({
        id: request.id,
        method: request.method,
        url: withoutSecrets(request.url),
      }),
      res: (response: { statusCode: number }) => ({ status: response.statusCode }),
    },
    customLogLevel: (_request, response, error) => (error !== undefined || response.statusCode >= 500 ? 'error' : 'info'),
  });
}
