import { randomBytes } from 'node:crypto';
import argon2 from 'argon2';

/** Argon2id at the strength that OWASP's password storage sheet advises: 19 MiB, two passes, one lane. */
const STRENGTH = { type: argon2.argon2id, memoryCost: 19_456, timeCost: 2, parallelism: 1 } as const;

/** What the commonest long passwords are made of: with these and digits taken away, too little is left. From memory. */
const COMMON_PARTS = [
  'password', 'passwort', 'letmein', 'iloveyou', 'welcome', 'qwertyuiop', 'qwerty', 'asdfghjkl', 'asdfgh', 'zxcvbnm', 'administrator', 'admin',
  'trustno1', 'monkey', 'dragon', 'sunshine', 'princess', 'football', 'baseball', 'superman', 'secret', 'changeme', 'default', 'leanyear',
];
const LEAST_LEFT = 6;
const LEAST_DIFFERENT = 5;

export function hashPassword(password: string): Promise<string> {
  return argon2.hash(password, STRENGTH);
}

let decoy: Promise<string> | undefined;

/** Checks a password; for an unknown account it takes as long and answers false. */
export async function passwordFits(hash: string | null, password: string): Promise<boolean> {
  decoy ??= hashPassword(randomBytes(16).toString('hex'));
  const compared = await decoy;
  const fits = await argon2.verify(hash ?? compared, password);
  return fits && hash !== null;
}

/** What is left of a password when its guessable parts are taken away. */
function leftOf(lower: string, parts: readonly string[]): string {
  const bare = parts.reduce((text, part) => text.replaceAll(part, ''), lower);
  return bare.replaceAll(/[\d\W_]+/g, '');
}

/** Why a password will not do, or null. Its length is the contract's to check. */
export function passwordFault(password: string, email: string): string | null {
  const lower = password.toLowerCase();
  const mailName = email.split('@')[0]?.toLowerCase() ?? '';
  if (lower.includes(email.toLowerCase()) || (mailName.length >= 4 && lower.includes(mailName))) return 'must not hold your e-mail name';
  if (new Set(lower).size < LEAST_DIFFERENT) return 'repeats too few characters; choose another';
  const common = COMMON_PARTS.filter((part) => lower.includes(part));
  const digitsOnly = /^[\d\W_]+$/.test(lower) && /0?123456789?0?|9?876543210?/.test(lower);
  if (digitsOnly || (common.length > 0 && leftOf(lower, common).length < LEAST_LEFT)) return 'is among the most common passwords; choose another';
  return null;
}

export function firstPassword(): string {
  return randomBytes(12).toString('base64url');
}
