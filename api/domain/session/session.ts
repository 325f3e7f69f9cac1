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
  /** The one before the present, shown within the grace of two tabs or a lost answer: still good, not rotated again. */
  | { readonly outcome: 'grace'; readonly session: SessionRecord }
  /** An older one: somebody has a copy. The session has been ended. */
  | { readonly outcome: 'stolen'; readonly session: SessionRecord }
  | { readonly outcome: 'unknown' };

export interface Sessions {
  open(transaction: Transaction, session: { personId: string; client: 'browser' | 'bearer'; refreshHash: Buffer; expiresAt: Date }): Promise<SessionRecord>;
  /** The session if it has neither ended nor expired and its person is active. */
  live(id: string): Promise<SessionRecord | null>;
  /**
   * Exchanges the present refresh token's hash for the next.
   * @param idleSeconds after which a session that nobody refreshed has expired
   * @param graceSeconds in which the token before the present one is still answered
   */
  rotate(presented: Buffer, next: Buffer, idleSeconds: number, graceSeconds: number): Promise<Refresh>;
  end(id: string): Promise<void>;
  endAllOf(transaction: Transaction, personId: string, exceptId: string | null): Promise<void>;
}

/** Counts failures to sign in, by a hash of the account that was named, whether it exists or not. */
export interface SignInAttempts {
  /** Seconds until the account may be tried again; 0 when it may be now. */
  secondsLocked(accountHash: Buffer): Promise<number>;
  /** Notes a failure and answers the seconds of lock that follow from it, 0 for none. */
  failed(accountHash: Buffer): Promise<number>;
  succeeded(accountHash: Buffer): Promise<void>;
}
