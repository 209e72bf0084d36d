import { setTimeout as wait } from 'node:timers/promises';
import type { AppContext } from '../../app-context.js';
import { requestPasswordReset } from '../../commands/request-password-reset.js';
import { resetPassword } from '../../commands/reset-password.js';
import { clearSessionCookies } from '../../sessions/cookies.js';
import { publicRoute, type Route } from '../route.js';

/** Longer than writing the mail takes: the time of the answer must not tell whether there is such an account. */
const ANSWER_MS = 250;

export function passwordResetRoutes(context: AppContext): Route[] {
  return [
    publicRoute(
      'requestPasswordReset',
      async ({ body }) => {
        await Promise.all([requestPasswordReset(context, body.email), wait(ANSWER_MS)]);
      },
      { limit: 'passwordReset' },
    ),
    publicRoute(
      'resetPassword',
      async ({ params, body, response }) => {
        await resetPassword(context, params.token, body.password);
        clearSessionCookies(response, context.config.cookieSecure);
      },
      { limit: 'secretLink' },
    ),
  ];
}
