import { randomBytes } from 'node:crypto';
import argon2 from 'argon2';

/** Argon2id at the strength that OWASP's password storage sheet advises: 19 MiB, two passes, one lane. */
const STRENGTH = { type: argon2.argon2id, memoryCost: 19_456, timeCost: 2, parallelism: 1 } as const;

/** The commonest of long passwords; shorter ones are refused by their length. */
const COMMON = ['password1234', '123456789012', 'qwertyuiop12', 'passwordpassword', 'letmeinletmein', 'iloveyou1234', 'administrator', '111111111111', 'qwertyqwerty', 'welcome12345'];

export function hashPassword(password: string): Promise<string> {
  return argon2.hash(password, STRENGTH);
}

let decoy: Promise<string> | undefined;

/** Checks a password; for an unknown account it takes as long and answers false. */
export async function passwordFits(hash: string | null, password: string): Promise<boolean> {
  decoy ??= hashPassword(randomBytes(16).toString('hex'));
  const fits = await argon2.verify(hash ?? (await decoy), password);
  return fits && hash !== null;
}

/** Why a password will not do, or null. */
export function passwordFault(password: string, email: string): string | null {
  const lower = password.toLowerCase();
  if (COMMON.includes(lower)) return 'is among the most common passwords; choose another';
  if (lower.includes(email.split('@')[0]?.toLowerCase() ?? email) || lower.includes('leanyear')) return 'must not hold your e-mail name or ours';
  return null;
}

export function firstPassword(): string {
  return randomBytes(12).toString('base64url');
}
