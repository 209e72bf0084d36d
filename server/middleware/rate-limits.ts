import type { RequestHandler } from 'express';
import { rateLimit } from 'express-rate-limit';
import { TooManyRequestsError } from '../errors.js';

const MINUTE_MS = 60_000;

interface Limit {
  readonly windowMs: number;
  readonly limit: number;
  /** Count only what failed. */
  readonly failuresOnly?: boolean;
}

/**
 * Requests from one address. The first is far above what a group behind one address sends (DESIGN.md 8 asks for 200 a
 * second); the others keep guessing of passwords and links, and mail to strangers, slow.
 */
const LIMITS = {
  everything: { windowMs: MINUTE_MS, limit: 60_000 },
  signIn: { windowMs: 15 * MINUTE_MS, limit: 50, failuresOnly: true },
  secretLink: { windowMs: 15 * MINUTE_MS, limit: 50, failuresOnly: true },
  passwordReset: { windowMs: 15 * MINUTE_MS, limit: 20 },
} as const satisfies Record<string, Limit>;

export type RateLimitName = keyof typeof LIMITS;

function limitByAddress({ windowMs, limit, failuresOnly }: Limit): RequestHandler {
  return rateLimit({
    windowMs,
    limit,
    skipSuccessfulRequests: failuresOnly ?? false,
    standardHeaders: 'draft-7',
    legacyHeaders: false,
    handler: (_request, _response, next) => {
      next(new TooManyRequestsError(Math.ceil(windowMs / 1000)));
    },
  });
}

/** Fresh counters, one set for each app. */
export function createRateLimits(): Record<RateLimitName, RequestHandler> {
  return {
    everything: limitByAddress(LIMITS.everything),
    signIn: limitByAddress(LIMITS.signIn),
    secretLink: limitByAddress(LIMITS.secretLink),
    passwordReset: limitByAddress(LIMITS.passwordReset),
  };
}
