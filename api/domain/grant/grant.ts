import type { Transaction } from '../shared/transaction';

/** Authority granted to a person between two dates; amounts in house currency. */
export interface GrantRecord {
  readonly id: string;
  readonly personId: string;
  readonly largestLineAmount: string;
  readonly largestLineShare: number;
  readonly lowestAdequacy: number;
  readonly belowWalkAway: boolean;
  readonly startsOn: string;
  readonly endsOn: string;
  readonly grantedBy: { readonly id: string; readonly name: string } | null;
  readonly endedAt: string | null;
}

export type NewGrant = Omit<GrantRecord, 'id' | 'grantedBy' | 'endedAt'>;

export interface Grants {
  /** Inside a transaction it must be given: asking for a second connection there could starve the pool. */
  listOf(personId: string, transaction?: Transaction): Promise<GrantRecord[]>;
  byId(id: string): Promise<GrantRecord | null>;
  /** Whether any senior underwriter holds a grant that has not ended; takes a lock so that two cannot be first. */
  anySeniorHoldsOne(transaction: Transaction): Promise<boolean>;
  create(transaction: Transaction, grant: NewGrant, grantedBy: string): Promise<GrantRecord>;
  end(transaction: Transaction, id: string): Promise<void>;
}
