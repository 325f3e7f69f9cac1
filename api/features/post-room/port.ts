import type { MailSummary } from '../../contract/house';

/** Whose mails may be read: everybody's, or those to a person and on quotes they have part in. */
export type MailScope = { readonly everybody: true } | { readonly personId: string };

export interface PostRoom {
  list(scope: MailScope, page: { offset: number; limit: number }): Promise<{ items: MailSummary[]; total: number }>;
  /** The mail with the raw form in which it arrived, if it did; null when out of scope or absent. */
  read(scope: MailScope, mailId: string): Promise<{ summary: MailSummary; raw: Buffer | null } | null>;
}
