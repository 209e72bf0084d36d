import type { z } from 'zod';
import type { sessionResponse } from '../../shared/schemas/people.js';
import type { Session } from '../models/session.js';
import type { Actor } from '../policies/actor.js';

export function presentSession(actor: Actor, session: Session): z.input<typeof sessionResponse> {
  return {
    id: session.id,
    createdAt: session.createdAt.toISOString(),
    lastUsedAt: session.lastUsedAt.toISOString(),
    userAgent: session.userAgent,
    isCurrent: session.id === actor.sessionId,
  };
}
