import type { Transaction } from '../shared/transaction';

export interface SessionRecord {
  readonly id: string;
  readonly personId: string;
  readonly client: 'browser' | 'bearer';
  readonly expiresAt: Date;
  readonly rotatedAt: Date;
  readonly endedAt: Date | null;
}

/** What became of a refresh token that was shown. */
export type Refresh =
  | { readonly outcome: 'rotated'; readonly session: SessionRecord }
  /** The one before the present, shown within the grace of two tabs or a lost answer: the present one is answered again. */
  | { readonly outcome: 'grace'; readonly session: SessionRecord }
  /** An older one: somebody has a copy. The session has been ended. */
  | { readonly outcome: 'stolen'; readonly session: SessionRecord }
  | { readonly outcome: 'unknown' };

export interface Sessions {
  open(transaction: Transaction, session: { id: string; personId: string; client: 'browser' | 'bearer'; refreshHash: Buffer; expiresAt: Date }): Promise<SessionRecord>;
  /** The session if it has neither ended nor expired and its person is active. */
  live(id: string): Promise<SessionRecord | null>;
  /**
   * Exchanges the present refresh token's hash for the next; any other token of this session is an old one.
   * @param id of the session that the token names, its keyed digest being checked already
   * @param idleSeconds after which a session that nobody refreshed has expired
   * @param graceSeconds in which the token before the present one is still answered
   */
  rotate(id: string, presented: Buffer, next: Buffer, idleSeconds: number, graceSeconds: number): Promise<Refresh>;
  end(id: string): Promise<void>;
  endAllOf(transaction: Transaction, personId: string, exceptId: string | null): Promise<void>;
}

/** Whether a password may be tried now, and for how many seconds the account waits after this try, 0 for none. */
export interface SignInAttempt {
  readonly allowed: boolean;
  readonly lockSeconds: number;
}

/** Counts tries at signing in, by a hash of the account that was named, whether it exists or not. */
export interface SignInAttempts {
  /** Counts a try before its password is looked at, so that many at once are no way round the lock. */
  begin(accountHash: Buffer): Promise<SignInAttempt>;
  /** Forgets the tries of an account whose password was right. */
  succeeded(accountHash: Buffer): Promise<void>;
}
