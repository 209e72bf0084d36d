import { randomUUID } from 'node:crypto';
import type { Transaction } from 'sequelize';
import { Session } from '../models/session.js';
import { createTokenPair, hashOf, SESSION_IDLE_DAYS, SESSION_LONGEST_DAYS, type TokenPair } from './tokens.js';

const DAY_MS = 86_400_000;

export interface StartedSession {
  readonly sessionId: string;
  readonly tokens: TokenPair;
}

/** End of a session that is used now: so many days from now, but not for ever. */
export function sessionExpiry(createdAt: Date, now: Date): Date {
  return new Date(Math.min(now.getTime() + SESSION_IDLE_DAYS * DAY_MS, createdAt.getTime() + SESSION_LONGEST_DAYS * DAY_MS));
}

/** Opens a session for a person whose identity has just been proved. */
export async function startSession(transaction: Transaction, tokenKey: string, userId: string, userAgent: string): Promise<StartedSession> {
  const sessionId = randomUUID();
  const tokens = createTokenPair(tokenKey, sessionId);
  const now = new Date();
  await Session.create(
    {
      id: sessionId,
      userId,
      refreshTokenHash: hashOf(tokens.refresh),
      userAgent: userAgent.slice(0, 300),
      createdAt: now,
      lastUsedAt: now,
      expiresAt: sessionExpiry(now, now),
    },
    { transaction },
  );
  return { sessionId, tokens };
}
