import { createHmac, timingSafeEqual } from 'node:crypto';

function mac(secret: string, purpose: string, id: string): Buffer {
  return createHmac('sha256', secret).update(`${purpose}:${id}`).digest();
}

/** Token of a signed link: the link's id and a keyed digest of it. The row says when it expires and whether it is revoked. */
export function linkToken(secret: string, linkId: string): string {
  return `${linkId}.${mac(secret, 'quote link', linkId).toString('base64url')}`;
}

/** The link's id when the token is genuine, else null. */
export function linkIdOf(secret: string, token: string): string | null {
  const [linkId, signature] = token.split('.');
  if (linkId === undefined || signature === undefined || !/^[0-9a-f-]{36}$/.test(linkId)) return null;
  const expected = mac(secret, 'quote link', linkId);
  const given = Buffer.from(signature, 'base64url');
  return given.length === expected.length && timingSafeEqual(given, expected) ? linkId : null;
}

/** The six digits mailed for an order, derived from the code's row, so that they are stored nowhere. */
export function orderCode(secret: string, codeId: string): string {
  return (mac(secret, 'order code', codeId).readUInt32BE(0) % 1_000_000).toString().padStart(6, '0');
}
