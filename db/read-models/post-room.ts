import type { DataSource } from 'typeorm';
import type { MailSummary } from '../../api/contract/house';
import type { MailScope, PostRoom } from '../../api/features/post-room/port';
import type { MailKind, MailState } from '../../api/domain/vocabulary';

interface Row {
  id: string;
  kind: MailKind;
  email: string;
  subject: string;
  state: MailState;
  message_id: string;
  attempts: number;
  last_error: string | null;
  quote_id: string | null;
  created_at: Date;
  arrived: number;
}

const MAILS = `
  FROM mails m
  LEFT JOIN people p ON p.id = m.person_id
  LEFT JOIN contacts c ON c.id = m.contact_id
  LEFT JOIN quotes q ON q.id = m.quote_id
  WHERE ($1::uuid IS NULL OR m.person_id = $1 OR $1 IN (q.author_id, q.submitted_by, q.decided_by, q.issued_by))
    -- A code is its reader's alone.
    AND (m.kind <> 'order code' OR $1::uuid IS NULL)`;

const COLUMNS = `m.id, m.kind, coalesce(p.email, c.email) AS email, m.subject, m.state, m.message_id, m.attempts,
  m.last_error, m.quote_id, m.created_at,
  (SELECT count(*)::int FROM captured_mails k WHERE k.message_id = m.message_id) AS arrived`;

function summaryOf(row: Row, demo: boolean): MailSummary {
  return {
    id: row.id,
    kind: row.kind,
    to: row.email,
    subject: row.subject,
    state: row.state,
    messageId: row.message_id,
    attempts: row.attempts,
    lastError: row.last_error,
    quoteId: row.quote_id,
    at: row.created_at.toISOString(),
    arrived: demo ? row.arrived : null,
  };
}

export function postRoom(dataSource: DataSource, options: { readonly demo: boolean }): PostRoom {
  const personOf = (scope: MailScope): string | null => ('everybody' in scope ? null : scope.personId);
  return {
    async list(scope, page) {
      const person = personOf(scope);
      const rows: Row[] = await dataSource.query(
        `SELECT ${COLUMNS} ${MAILS} ORDER BY m.created_at DESC, m.id OFFSET $2 LIMIT $3`,
        [person, page.offset, page.limit],
      );
      const [count]: { total: number }[] = await dataSource.query(`SELECT count(*)::int AS total ${MAILS}`, [person]);
      return { items: rows.map((row) => summaryOf(row, options.demo)), total: count?.total ?? 0 };
    },
    async read(scope, mailId) {
      const rows: Row[] = await dataSource.query(`SELECT ${COLUMNS} ${MAILS} AND m.id = $2`, [personOf(scope), mailId]);
      const row = rows[0];
      if (row === undefined) return null;
      const raws: { raw: Buffer }[] = await dataSource.query(
        'SELECT raw FROM captured_mails WHERE message_id = $1 ORDER BY received_at LIMIT 1',
        [row.message_id],
      );
      return { summary: summaryOf(row, options.demo), raw: options.demo ? (raws[0]?.raw ?? null) : null };
    },
  };
}
