import type { MailKind } from '../vocabulary';
import type { Transaction } from '../shared/transaction';

/** A layer as the mail shows it: agreed terms only, amounts as text in the quote's currency. */
export interface MailLayer {
  readonly name: string;
  readonly limit: string;
  readonly attachment: string;
  readonly premium: string;
  readonly writtenLine: number;
}

/**
 * What each kind of mail shows. Only what its reader may see: nothing technical goes to a broker. Links and
 * one-time codes are secrets: they are derived from ids when the mail is sent and never stored.
 */
export interface MailModels {
  'quote issued': {
    readonly reference: string;
    readonly number: number;
    readonly kind: 'indication' | 'firm';
    readonly cedant: string;
    readonly programmeName: string;
    readonly currency: string;
    readonly validUntil: string;
    readonly underwriterName: string;
    readonly underwriterEmail: string;
    readonly layers: readonly MailLayer[];
    /** The signed link is made from it at sending. */
    readonly linkId: string;
  };
  'quote bound': {
    readonly reference: string;
    readonly number: number;
    readonly cedant: string;
    readonly programmeName: string;
    readonly currency: string;
    readonly inceptionOn: string;
    readonly underwriterName: string;
    readonly underwriterEmail: string;
    readonly layers: readonly MailLayer[];
  };
  'order code': {
    readonly reference: string;
    /** The six digits are derived from it and the link secret at sending. */
    readonly codeId: string;
    readonly minutesValid: number;
  };
  'referral waiting': {
    readonly reference: string;
    readonly number: number;
    readonly cedant: string;
    readonly programmeName: string;
    readonly submittedBy: string;
    readonly failures: readonly string[];
    readonly quoteId: string;
  };
  'referral outcome': {
    readonly reference: string;
    readonly number: number;
    readonly outcome: 'cleared' | 'returned' | 'declined';
    readonly decidedBy: string;
    readonly note: string;
    readonly quoteId: string;
  };
  'broker answered': {
    readonly reference: string;
    readonly number: number;
    readonly answer: 'firm order' | 'not taken up';
    readonly by: string;
    readonly note: string;
    readonly quoteId: string;
  };
}

export interface NewMail<K extends MailKind = MailKind> {
  readonly kind: K;
  readonly to: { readonly personId: string } | { readonly contactId: string };
  readonly quoteId: string | null;
  readonly subject: string;
  readonly model: MailModels[K];
}

/** Writes the mail's row and its wake in the act's own transaction; a job sends it afterwards. */
export interface MailOutbox {
  put<K extends MailKind>(transaction: Transaction, mail: NewMail<K>): Promise<void>;
}
