import { randomUUID } from 'node:crypto';
import type { DataSource } from 'typeorm';
import type { MailModels, MailOutbox } from '../../api/domain/mail/mail';
import type { MailStore } from '../../api/domain/mail/store';
import type { Outbox } from '../../api/domain/shared/outbox';
import type { MailKind } from '../../api/domain/vocabulary';
import { CapturedMailRow, MailRow } from '../entities/mail';
import { managerOf } from '../unit-of-work';

export function mailOutbox(outbox: Outbox): MailOutbox {
  return {
    async put(transaction, mail) {
      const id = randomUUID();
      await managerOf(transaction).insert(MailRow, {
        id,
        kind: mail.kind,
        personId: 'personId' in mail.to ? mail.to.personId : null,
        contactId: 'contactId' in mail.to ? mail.to.contactId : null,
        quoteId: mail.quoteId,
        model: mail.model,
        subject: mail.subject,
        messageId: `<${id}@leanyear.invalid>`,
      });
      await outbox.put(transaction, 'mail.send', id);
    },
  };
}

interface WaitingRow {
  id: string;
  kind: MailKind;
  model: MailModels[MailKind];
  subject: string;
  message_id: string;
  attempts: number;
  name: string;
  email: string;
}

export function mailStore(dataSource: DataSource): MailStore {
  return {
    async beginAttempt(mailId) {
      const [rows]: [WaitingRow[], number] = await dataSource.query(
        `UPDATE mails SET attempts = mails.attempts + 1
         FROM mails m LEFT JOIN people p ON p.id = m.person_id LEFT JOIN contacts c ON c.id = m.contact_id
         WHERE mails.id = $1 AND m.id = mails.id AND mails.state = 'waiting'
         RETURNING mails.id, mails.kind, mails.model, mails.subject, mails.message_id, mails.attempts,
           coalesce(p.name, c.name) AS name, coalesce(p.email, c.email) AS email`,
        [mailId],
      );
      const row = rows[0];
      if (row === undefined) return null;
      return {
        id: row.id,
        kind: row.kind,
        model: row.model,
        subject: row.subject,
        messageId: row.message_id,
        reader: { name: row.name, email: row.email },
        attempts: row.attempts,
      };
    },
    async markSent(mailId) {
      await dataSource
        .getRepository(MailRow)
        .update({ id: mailId, state: 'waiting' }, { state: 'sent', sentAt: new Date(), lastError: null });
    },
    async markTrouble(mailId, error, final) {
      await dataSource
        .getRepository(MailRow)
        .update({ id: mailId, state: 'waiting' }, { lastError: error.slice(0, 500), ...(final ? { state: 'failed' } : {}) });
    },
    async overdue(seconds) {
      const rows: { id: string }[] = await dataSource.query(
        `SELECT id FROM mails WHERE state = 'waiting' AND created_at < now() - make_interval(secs => $1) ORDER BY created_at LIMIT 200`,
        [seconds],
      );
      return rows.map((row) => row.id);
    },
  };
}

/** Keeps what the local post office received, one row a recipient. */
export function capturedMails(dataSource: DataSource): {
  keep(delivery: { recipients: readonly string[]; raw: Buffer }): Promise<void>;
} {
  return {
    async keep({ recipients, raw }) {
      const head = raw.subarray(0, 65_536).toString('latin1');
      const messageId = /^message-id:\s*(<[^>\r\n]+>)/im.exec(head)?.[1] ?? '';
      await dataSource.getRepository(CapturedMailRow).insert(recipients.map((recipient) => ({ messageId, recipient, raw })));
    },
  };
}
