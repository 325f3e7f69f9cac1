import type { MailSender, OutgoingMail } from './port';

/** The twin of the SMTP sender for tests: keeps what it is given. */
export function capturedSender(): MailSender & { readonly mails: OutgoingMail[] } {
  const mails: OutgoingMail[] = [];
  return {
    mails,
    send: (mail) => {
      if (!/^<[^<>\s]+@[^<>\s]+>$/.test(mail.messageId)) return Promise.reject(new Error('a message id stands in angle brackets'));
      if (!mail.to.includes('@')) return Promise.reject(new Error('no recipient'));
      mails.push(mail);
      return Promise.resolve();
    },
    close: () => undefined,
  };
}
