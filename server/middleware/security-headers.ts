import helmet from 'helmet';
import type { RequestHandler } from 'express';

/**
 * Everything the page loads comes from this server. Inline styles are allowed because the structure editor and the
 * drawings of structures carry their own style elements; scripts stay strict. Workers and images made in the page are
 * blobs and data URLs.
 */
export function securityHeaders(options: { readonly isHttps: boolean }): RequestHandler {
  return helmet({
    contentSecurityPolicy: {
      useDefaults: false,
      directives: {
        defaultSrc: ["'none'"],
        scriptSrc: ["'self'"],
        styleSrc: ["'self'", "'unsafe-inline'"],
        imgSrc: ["'self'", 'data:', 'blob:'],
        fontSrc: ["'self'"],
        connectSrc: ["'self'"],
        workerSrc: ["'self'", 'blob:'],
        manifestSrc: ["'self'"],
        formAction: ["'self'"],
        baseUri: ["'none'"],
        frameAncestors: ["'none'"],
        // Over plain http on another host this would send every request to a port nobody listens on.
        ...(options.isHttps ? { upgradeInsecureRequests: [] } : {}),
      },
    },
    xFrameOptions: { action: 'deny' },
    referrerPolicy: { policy: 'no-referrer' },
    strictTransportSecurity: options.isHttps,
  });
}
