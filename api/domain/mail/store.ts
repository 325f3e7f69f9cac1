import type { MailKind } from '../vocabulary';
import type { MailModels } from './mail';

export interface WaitingMail<K extends MailKind = MailKind> {
  readonly id: string;
  readonly kind: K;
  readonly model: MailModels[K];
  readonly subject: string;
  readonly messageId: string;
  readonly reader: { readonly name: string; readonly email: string };
  /** Attempts made, this one included. */
  readonly attempts: number;
}

/** The mails' rows as the sending job needs them. */
export interface MailStore {
  /** Counts an attempt and answers the mail, or null when it is not waiting any more. */
  beginAttempt(mailId: string): Promise<WaitingMail | null>;
  markSent(mailId: string): Promise<void>;
  /** Notes why an attempt failed; `final` gives up, which the sender and the administrator see. */
  markTrouble(mailId: string, error: string, final: boolean): Promise<void>;
  /** Mails that have waited longer than this many seconds, oldest first: their wake may have been lost. */
  overdue(seconds: number): Promise<string[]>;
}
