import type { Approval } from '../authority/authority';
import type { Transaction } from '../shared/transaction';
import type { QuoteKind, QuoteState } from '../vocabulary';
import type { FrozenTerms, QuoteRecord, RunUnderQuote } from './quote';

export interface QuoteFilter {
  readonly state?: QuoteState | undefined;
  readonly submissionId?: string | undefined;
  readonly programmeId?: string | undefined;
  readonly brokerFirmId?: string | undefined;
  readonly everIssued?: boolean | undefined;
}

export interface NewQuoteRow {
  readonly familyId: string | null;
  readonly programmeId: string;
  readonly kind: QuoteKind;
  readonly runId: string;
  readonly terms: FrozenTerms;
  readonly validUntil: string;
  readonly premiums: readonly { readonly key: string; readonly premium: string }[];
  readonly note: string;
  readonly authorId: string;
}

export interface DraftChange {
  readonly kind: QuoteKind;
  readonly runId: string;
  readonly terms: FrozenTerms;
  readonly validUntil: string;
  readonly premiums: readonly { readonly key: string; readonly premium: string }[];
  readonly note: string;
}

/** What a move writes beside the state. */
export interface Marks {
  readonly submittedBy?: string | null;
  readonly decidedBy?: string | null;
  readonly decisionNote?: string | null;
  readonly issuedBy?: string;
  readonly boundBy?: string;
  readonly runId?: string;
}

export interface Quotes {
  list(filter: QuoteFilter): Promise<QuoteRecord[]>;
  read(id: string): Promise<QuoteRecord | null>;
  /** Reads a quote and locks its row until the transaction ends. */
  lock(transaction: Transaction, id: string): Promise<QuoteRecord | null>;
  /** The run that a quote is to rest on, as it stands now. */
  run(transaction: Transaction, runId: string): Promise<RunUnderQuote | null>;
  create(transaction: Transaction, row: NewQuoteRow): Promise<string>;
  /** Replaces a draft's content; the version moves on. */
  changeDraft(transaction: Transaction, quote: QuoteRecord, change: DraftChange): Promise<void>;
  /** Moves a locked quote to a state that is not `approved`. */
  move(transaction: Transaction, quote: QuoteRecord, to: Exclude<QuoteState, 'approved'>, marks?: Marks): Promise<void>;
  /** Moves a locked quote to `approved`: only against an approval for it as it stands. */
  approve(transaction: Transaction, quote: QuoteRecord, approval: Approval, marks: Marks): Promise<void>;
  /** Rests a quote still in the house on another run of the same terms. */
  rest(transaction: Transaction, quote: QuoteRecord, runId: string): Promise<void>;
  /** Issued quotes whose validity ended before this day. */
  lapsing(today: string): Promise<string[]>;
  /** Quotes in the house whose run rests on an older book. */
  overtaken(bookVersion: number): Promise<string[]>;
  history(quoteId: string): Promise<{ at: string; actor: string; move: string; from: string | null; to: string; note: string | null }[]>;
  placeOrder(
    transaction: Transaction,
    quoteId: string,
    order: {
      by: { personId: string } | { contactId: string };
      layers: readonly { key: string; orderShare: number }[];
      note: string;
    },
  ): Promise<void>;
}

export interface LinkRecord {
  readonly id: string;
  readonly quoteId: string;
  readonly contactId: string;
  readonly expiresAt: Date;
  readonly revokedAt: Date | null;
}

export interface QuoteLinks {
  create(transaction: Transaction, quoteId: string, contactId: string, expiresAt: Date): Promise<string>;
  read(linkId: string): Promise<LinkRecord | null>;
  revokeAll(transaction: Transaction, quoteId: string): Promise<void>;
  /** How many codes were asked for in the last hour. */
  recentCodes(transaction: Transaction, linkId: string): Promise<number>;
  createCode(transaction: Transaction, linkId: string, expiresAt: Date): Promise<string>;
  /** The newest code that can still be tried; trying counts, whatever comes of it. */
  tryCode(transaction: Transaction, linkId: string, mostAttempts: number): Promise<string | null>;
  /** Whether this call was the one that used the code. */
  useCode(transaction: Transaction, codeId: string): Promise<boolean>;
}
