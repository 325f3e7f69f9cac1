/** A rendered mail, ready to leave. */
export interface OutgoingMail {
  readonly to: string;
  readonly subject: string;
  readonly text: string;
  readonly html: string;
  /** With angle brackets. Stable over retries, so that a reader's mailbox sees one mail. */
  readonly messageId: string;
}

/** Hands a mail to the post. Resolves once the next server has taken responsibility for it; rejects otherwise. */
export interface MailSender {
  send(mail: OutgoingMail): Promise<void>;
  close(): void;
}
