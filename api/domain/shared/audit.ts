import type { Transaction } from './transaction';

/** One act, as it goes into the trail that the application itself can only append to. No secrets, no tokens. */
export interface AuditRecord {
  /** Person who acted; null for the system or for a contact on a signed link. */
  readonly actorId: string | null;
  /** How the trail names the actor, for example "system" or "link: <contact id>". */
  readonly actor: string;
  /** What was done, for example "quote issue" or "catalogue release". */
  readonly action: string;
  /** Kind of thing, for example "quote". */
  readonly subject: string;
  readonly subjectId: string | null;
  readonly from?: string | null;
  readonly to?: string | null;
  readonly note?: string | null;
}

export interface AuditTrail {
  append(transaction: Transaction, record: AuditRecord): Promise<void>;
}
