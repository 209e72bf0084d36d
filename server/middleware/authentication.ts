import type { Request } from 'express';
import type { AppContext } from '../app-context.js';
import { UnauthenticatedError } from '../errors.js';
import type { Actor } from '../policies/actor.js';
import { ACCESS_COOKIE, readCookie } from '../sessions/cookies.js';
import { loadActor } from '../sessions/load-actor.js';
import { verifyAccessToken } from '../sessions/tokens.js';

/**
 * Finds out who asks. The token only names the session: whether that is still open, and which roles the person has,
 * is read from the database each time, so that ending a session or taking a role away works at once.
 * @throws UnauthenticatedError
 */
export async function authenticate(context: AppContext, request: Request): Promise<Actor> {
  const token = readCookie(request, ACCESS_COOKIE);
  const sessionId = token === null ? null : verifyAccessToken(context.config.secrets.tokenKey, token);
  if (sessionId === null) throw new UnauthenticatedError();
  const actor = await loadActor(context.sequelize, sessionId);
  if (actor === null) throw new UnauthenticatedError('sessionEnded', 'Your session has ended. Please sign in again.');
  return actor;
}
