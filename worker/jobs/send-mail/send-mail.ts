import type { MailStore } from '../../../api/domain/mail/store';
import { letterAsHtml, letterAsText } from '../../mail/letter';
import type { MailSender } from '../../mail/port';
import { letterFor } from '../../mail/templates';

const MOST_ATTEMPTS = 6;

export interface SendMailDeps {
  readonly mails: MailStore;
  readonly sender: MailSender;
  readonly publicUrl: string;
  readonly linkSecret: string;
}

/**
 * Sends one mail. Idempotent by its row: a mail already sent is left alone. A crash between sending and marking
 * repeats it under the same message id, which mailboxes fold into one.
 * @throws the sender's error while attempts remain, so that the queue tries again later
 */
export async function sendMail(deps: SendMailDeps, mailId: string): Promise<void> {
  const mail = await deps.mails.beginAttempt(mailId);
  if (mail === null) return;
  const letter = letterFor(mail.kind, mail.model, {
    readerName: mail.reader.name,
    publicUrl: deps.publicUrl,
    linkSecret: deps.linkSecret,
  });
  try {
    await deps.sender.send({
      to: mail.reader.email,
      subject: mail.subject,
      text: letterAsText(letter),
      html: letterAsHtml(letter),
      messageId: mail.messageId,
    });
  } catch (error) {
    const final = mail.attempts >= MOST_ATTEMPTS;
    await deps.mails.markTrouble(mailId, error instanceof Error ? error.message : String(error), final);
    if (final) return;
    throw error;
  }
  await deps.mails.markSent(mailId);
}
