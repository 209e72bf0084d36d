import { Op } from 'sequelize';
import type { AppContext } from '../../app-context.js';
import { endSession } from '../../commands/end-session.js';
import { refreshSession } from '../../commands/refresh-session.js';
import { signIn } from '../../commands/sign-in.js';
import { signOut } from '../../commands/sign-out.js';
import { UnauthenticatedError } from '../../errors.js';
import { Session } from '../../models/session.js';
import { authorize } from '../../policies/authorize.js';
import { presentMe } from '../../presenters/me.js';
import { presentSession } from '../../presenters/session.js';
import { findMembershipsOf } from '../../queries/memberships.js';
import { ACCESS_COOKIE, clearSessionCookies, readCookie, REFRESH_COOKIE } from '../../sessions/cookies.js';
import { publicRoute, route, type Route } from '../route.js';
import { answerWithSession } from './answer-with-session.js';

export function sessionRoutes(context: AppContext): Route[] {
  const { cookieSecure } = context.config;
  return [
    publicRoute(
      'signIn',
      async ({ body, request, response }) => {
        const session = await signIn(context, { ...body, userAgent: request.get('User-Agent') ?? '' });
        return await answerWithSession(context, response, session);
      },
      { limit: 'signIn' },
    ),
    publicRoute('refreshSession', async ({ request, response }) => {
      try {
        return await answerWithSession(context, response, await refreshSession(context, readCookie(request, REFRESH_COOKIE)));
      } catch (error) {
        // Cookies that are good for nothing any more would only be sent again.
        if (error instanceof UnauthenticatedError) clearSessionCookies(response, cookieSecure);
        throw error;
      }
    }),
    // Public, so that it also works when the access token has just run out, and twice.
    publicRoute('signOut', async ({ request, response }) => {
      await signOut(context, readCookie(request, ACCESS_COOKIE), readCookie(request, REFRESH_COOKIE));
      clearSessionCookies(response, cookieSecure);
    }),
    route('me', async ({ actor }) => presentMe(actor, await findMembershipsOf(actor.userId))),
    route('listSessions', async ({ actor }) => {
      const sessions = await Session.findAll({
        where: { userId: actor.userId, endedAt: null, expiresAt: { [Op.gt]: new Date() } },
        order: [['lastUsedAt', 'DESC']],
      });
      return { sessions: sessions.map((session) => presentSession(actor, session)) };
    }),
    route('endSession', async ({ actor, params }) => {
      const session = authorize(actor, 'session.end', await Session.findByPk(params.sessionId));
      await endSession(context, actor, session);
    }),
  ];
}
