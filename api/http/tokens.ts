import { createHash } from 'node:crypto';
import { sign } from 'jsonwebtoken';

export const ACCESS_SECONDS = 600;
export const IDLE_SECONDS = 12 * 3600;
export const ABSOLUTE_SECONDS = 7 * 24 * 3600;
/** Two tabs that refresh at once, or an answer lost on the way, look like theft for this long and are none. */
export const GRACE_SECONDS = 10;
export const ISSUER = 'leanyear';
export const AUDIENCE = 'leanyear api';

/** A short-lived access token: it names the session, and the session's row says what it is still worth. */
export function accessToken(secret: string, session: { id: string; personId: string }): string {
  return sign({ sid: session.id }, secret, {
    algorithm: 'HS256',
    subject: session.personId,
    issuer: ISSUER,
    audience: AUDIENCE,
    expiresIn: ACCESS_SECONDS,
  });
}

/** Names an account in the count of failures without holding its address. */
export function accountHash(email: string): Buffer {
  return createHash('sha256').update(`account:${email.toLowerCase()}`).digest();
}
