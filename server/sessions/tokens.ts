import { createHash, randomBytes } from 'node:crypto';
import jwt from 'jsonwebtoken';
import { z } from 'zod';

export const ACCESS_SECONDS = 15 * 60;
/** A session nobody uses for so long ends. */
export const SESSION_IDLE_DAYS = 14;
/** However busy, a session ends so long after the sign-in. */
export const SESSION_LONGEST_DAYS = 60;

export interface TokenPair {
  readonly access: string;
  readonly refresh: string;
}

const claims = z.object({ sid: z.uuid() });

/** Access and refresh tokens must not stand in for each other, so each names its audience. */
type Audience = 'access' | 'refresh';

function sign(key: string, audience: Audience, sessionId: string, seconds: number): string {
  // The random id makes two tokens of one second differ.
  return jwt.sign({ sid: sessionId }, key, {
    algorithm: 'HS256',
    audience,
    expiresIn: seconds,
    jwtid: randomBytes(16).toString('base64url'),
  });
}

function verify(key: string, audience: Audience, token: string): string | null {
  try {
    const parsed = claims.safeParse(jwt.verify(token, key, { algorithms: ['HS256'], audience }));
    return parsed.success ? parsed.data.sid : null;
  } catch (error) {
    if (error instanceof jwt.JsonWebTokenError) return null;
    throw error;
  }
}

export function createTokenPair(key: string, sessionId: string): TokenPair {
  return { access: sign(key, 'access', sessionId, ACCESS_SECONDS), refresh: sign(key, 'refresh', sessionId, SESSION_IDLE_DAYS * 86_400) };
}

/** @returns id of the session, or null when the token is not ours or too old. */
export const verifyAccessToken = (key: string, token: string): string | null => verify(key, 'access', token);
export const verifyRefreshToken = (key: string, token: string): string | null => verify(key, 'refresh', token);

/** Random part of a link; 256 bits, so a plain hash of it can be stored. */
export const createSecret = (): string => randomBytes(32).toString('base64url');
/** SHA-256 in hexadecimal. */
export const hashOf = (text: string): string => createHash('sha256').update(text).digest('hex');
