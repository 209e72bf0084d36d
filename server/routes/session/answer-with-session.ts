import type { Response } from 'express';
import type { z } from 'zod';
import type { meResponse } from '../../../shared/schemas/people.js';
import type { AppContext } from '../../app-context.js';
import { UnauthenticatedError } from '../../errors.js';
import { presentMe } from '../../presenters/me.js';
import { findMembershipsOf } from '../../queries/memberships.js';
import { setSessionCookies } from '../../sessions/cookies.js';
import { loadActor } from '../../sessions/load-actor.js';
import type { StartedSession } from '../../sessions/start-session.js';

/** Hands a session over to the browser and tells whose it is. */
export async function answerWithSession(
  context: AppContext,
  response: Response,
  session: StartedSession,
): Promise<z.input<typeof meResponse>> {
  const actor = await loadActor(context.sequelize, session.sessionId);
  if (actor === null) throw new UnauthenticatedError();
  const memberships = await findMembershipsOf(actor.userId);
  setSessionCookies(response, session.tokens, context.config.cookieSecure);
  return presentMe(actor, memberships);
}
