import type { Request, Response } from 'express';
import { ACCESS_SECONDS, IDLE_SECONDS } from './tokens';

const ACCESS = '__Host-leanyear-access';
const REFRESH = '__Host-leanyear-refresh';

/** Lax, so that a broker who follows a link from webmail is still signed in; acts by cookie need our header besides. */
const accessCookie = { httpOnly: true, secure: true, sameSite: 'lax', path: '/' } as const;
const refreshCookie = { httpOnly: true, secure: true, sameSite: 'strict', path: '/' } as const;

export function setSessionCookies(res: Response, tokens: { access: string; refresh: string }): void {
  res.cookie(ACCESS, tokens.access, { ...accessCookie, maxAge: ACCESS_SECONDS * 1000 });
  res.cookie(REFRESH, tokens.refresh, { ...refreshCookie, maxAge: IDLE_SECONDS * 1000 });
}

export function clearSessionCookies(res: Response): void {
  res.clearCookie(ACCESS, accessCookie);
  res.clearCookie(REFRESH, refreshCookie);
}

function cookieOf(req: Request, name: string): string | null {
  const cookies = req.cookies as Record<string, unknown> | undefined;
  const value = cookies?.[name];
  return typeof value === 'string' ? value : null;
}

export const accessCookieOf = (req: Request): string | null => cookieOf(req, ACCESS);
export const refreshCookieOf = (req: Request): string | null => cookieOf(req, REFRESH);
