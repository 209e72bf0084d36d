import type { CookieOptions, Request, Response } from 'express';
import { ACCESS_SECONDS, SESSION_IDLE_DAYS, type TokenPair } from './tokens.js';

export const ACCESS_COOKIE = 'isoloom_access';
export const REFRESH_COOKIE = 'isoloom_refresh';

/** The refresh token travels only to the two endpoints that need it. */
const REFRESH_PATH = '/api/v1/session';
const ACCESS_PATH = '/api';

const cookieOptions = (path: string, isSecure: boolean): CookieOptions => ({ httpOnly: true, sameSite: 'strict', secure: isSecure, path });

export function setSessionCookies(response: Response, tokens: TokenPair, isSecure: boolean): void {
  response.cookie(ACCESS_COOKIE, tokens.access, { ...cookieOptions(ACCESS_PATH, isSecure), maxAge: ACCESS_SECONDS * 1000 });
  response.cookie(REFRESH_COOKIE, tokens.refresh, { ...cookieOptions(REFRESH_PATH, isSecure), maxAge: SESSION_IDLE_DAYS * 86_400_000 });
}

export function clearSessionCookies(response: Response, isSecure: boolean): void {
  response.clearCookie(ACCESS_COOKIE, cookieOptions(ACCESS_PATH, isSecure));
  response.clearCookie(REFRESH_COOKIE, cookieOptions(REFRESH_PATH, isSecure));
}

export function readCookie(request: Request, name: string): string | null {
  const cookies = request.cookies as Readonly<Record<string, unknown>>;
  const value = cookies[name];
  return typeof value === 'string' && value !== '' ? value : null;
}
