import type { DataSource } from 'typeorm';
import type { DeskItem } from '../../api/contract/house';
import type { Actor } from '../../api/domain/shared/actor';
import type { DeskReader } from '../../api/features/desk/port';

interface Row {
  kind: DeskItem['kind'];
  title: string;
  detail: string;
  href: string;
  since: Date;
}

const QUOTE = `q.reference || ', version ' || q.number AS title, c.name || ', ' || (q.terms->>'name') AS detail, '/quotes/' || q.id AS href`;
const QUOTES = `FROM quotes q JOIN submissions s ON s.id = q.submission_id JOIN cedants c ON c.id = s.cedant_id`;
const MINE = '$1 IN (q.author_id, q.submitted_by, q.issued_by)';

/** One query a kind of work, with the permission that makes it the reader's business. */
const SOURCES: readonly { readonly permission: Actor['permissions'][number]; readonly sql: string }[] = [
  {
    permission: 'quotes.draft',
    sql: `SELECT CASE WHEN q.decided_by IS NULL THEN 'draft' ELSE 'returned' END AS kind, ${QUOTE}, q.updated_at AS since
      ${QUOTES} WHERE q.state = 'draft' AND q.author_id = $1`,
  },
  {
    permission: 'quotes.issue',
    sql: `SELECT 'approved' AS kind, ${QUOTE}, q.updated_at AS since ${QUOTES} WHERE q.state = 'approved' AND ${MINE}`,
  },
  {
    permission: 'quotes.bind',
    sql: `SELECT 'order' AS kind, ${QUOTE}, o.received_at AS since ${QUOTES} JOIN orders o ON o.quote_id = q.id
      WHERE q.state = 'ordered' AND ${MINE}`,
  },
  {
    permission: 'quotes.issue',
    sql: `SELECT 'answered' AS kind, ${QUOTE}, q.updated_at AS since ${QUOTES}
      WHERE q.state = 'not taken up' AND ${MINE} AND q.updated_at > now() - interval '7 days'`,
  },
  {
    permission: 'quotes.issue',
    sql: `SELECT 'expiring' AS kind, ${QUOTE}, q.issued_at AS since ${QUOTES}
      WHERE q.state = 'issued' AND ${MINE} AND q.valid_until <= current_date + 3`,
  },
  {
    permission: 'referrals.clear',
    sql: `SELECT 'referral' AS kind, ${QUOTE}, q.submitted_at AS since ${QUOTES}
      WHERE q.state = 'referred' AND $1 NOT IN (q.submitted_by, q.author_id)`,
  },
  {
    permission: 'runs.start',
    sql: `SELECT 'run' AS kind, 'Run ' || r.state AS title, c.name || ', ' || (r.terms->>'name') AS detail,
        '/submissions/' || s.id || '/price?programme=' || r.programme_id || '&run=' || r.id AS href, r.created_at AS since
      FROM runs r JOIN programmes p ON p.id = r.programme_id JOIN submissions s ON s.id = p.submission_id
        JOIN cedants c ON c.id = s.cedant_id
      WHERE r.started_by = $1 AND r.reprices_quote_id IS NULL
        AND (r.state IN ('queued', 'running', 'cancelling') OR (r.state = 'failed' AND r.ended_at > now() - interval '2 days'))`,
  },
  {
    permission: 'catalogues.release',
    sql: `SELECT 'catalogue' AS kind, k.name || ', version ' || v.number AS title, 'uploaded, not released yet' AS detail,
        '/catalogues/' || k.id AS href, v.uploaded_at AS since
      FROM catalogue_versions v JOIN catalogues k ON k.id = v.catalogue_id
      WHERE v.state = 'draft' AND $1::uuid IS NOT NULL`,
  },
  {
    permission: 'post-room.read',
    sql: `SELECT 'mail' AS kind, 'Mail not delivered: ' || m.subject AS title, coalesce(m.last_error, '') AS detail,
        '/post-room/' || m.id AS href, m.created_at AS since
      FROM mails m LEFT JOIN quotes q ON q.id = m.quote_id
      WHERE m.state = 'failed' AND ($2 OR m.person_id = $1 OR ${MINE})`,
  },
];

export function deskReader(dataSource: DataSource): DeskReader {
  return {
    async waitingFor(actor) {
      const everybody = actor.role === 'administrator';
      const found = await Promise.all(
        SOURCES.filter((source) => actor.permissions.includes(source.permission)).map(({ sql }): Promise<Row[]> =>
          dataSource.query(sql, sql.includes('$2') ? [actor.personId, everybody] : [actor.personId]),
        ),
      );
      return found
        .flat()
        .sort((a, b) => a.since.getTime() - b.since.getTime())
        .map((row) => ({ ...row, since: row.since.toISOString() }));
    },
    async counts() {
      const rows: { open: number; issued: number; bound: number }[] = await dataSource.query(`
        SELECT (SELECT count(*)::int FROM submissions WHERE state = 'open') AS open,
          (SELECT count(*)::int FROM quotes WHERE state = 'issued') AS issued,
          (SELECT count(*)::int FROM quotes WHERE state = 'bound' AND bound_at >= date_trunc('year', now())) AS bound`);
      const row = rows[0];
      return { openSubmissions: row?.open ?? 0, issuedQuotes: row?.issued ?? 0, boundThisYear: row?.bound ?? 0 };
    },
    async missing() {
      const rows: { catalogue: boolean; basis: boolean }[] = await dataSource.query(`
        SELECT EXISTS (SELECT 1 FROM catalogue_versions WHERE state = 'released') AS catalogue,
          EXISTS (SELECT 1 FROM bases WHERE state = 'released') AS basis`);
      const row = rows[0];
      const missing: string[] = [];
      if (row?.catalogue !== true)
        missing.push('No event catalogue is released: an actuary uploads one under Catalogues and releases it.');
      if (row?.basis !== true) missing.push('No house basis is released: an actuary releases one before anything can be priced.');
      return missing;
    },
  };
}
