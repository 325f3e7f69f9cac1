import { createHash, createHmac, randomBytes, timingSafeEqual } from 'node:crypto';

function mac(secret: string, text: string): Buffer {
  return createHmac('sha256', secret).update(`refresh token ${text}`).digest();
}

function signed(secret: string, body: string): string {
  return `${body}.${mac(secret, `of ours: ${body}`).toString('base64url')}`;
}

/**
 * The first refresh token of a session: the session's id, 256 random bits and a keyed digest. The digest lets us know a
 * token of ours of any age, so that an old one shown again ends its session, however often that has gone on since.
 */
export function firstRefreshToken(secret: string, sessionId: string): string {
  return signed(secret, `${sessionId}.${randomBytes(32).toString('base64url')}`);
}

/**
 * The token that follows. It is derived, so that two tabs which show the same token at once, or one whose answer was
 * lost, are given the same next one.
 */
export function nextRefreshToken(secret: string, sessionId: string, token: string): string {
  return signed(secret, `${sessionId}.${mac(secret, `after: ${token}`).toString('base64url')}`);
}

/** The session that a token was made for, or null where it is none of ours. */
export function sessionOfRefreshToken(secret: string, token: string): string | null {
  const [sessionId, value, digest, ...rest] = token.split('.');
  if (sessionId === undefined || value === undefined || digest === undefined || rest.length > 0) return null;
  if (!/^[0-9a-f]{8}(-[0-9a-f]{4}){3}-[0-9a-f]{12}$/.test(sessionId)) return null;
  const expected = mac(secret, `of ours: ${sessionId}.${value}`);
  const given = Buffer.from(digest, 'base64url');
  return given.length === expected.length && timingSafeEqual(given, expected) ? sessionId : null;
}

/** Only the hash of a refresh token is stored; 256 unguessable bits need no slow hash. */
export function refreshHash(token: string): Buffer {
  return createHash('sha256').update(token).digest();
}
