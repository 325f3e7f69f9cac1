import type { DataSource } from 'typeorm';
import type { AuditReader } from '../../api/features/audit/port';

interface Row {
  id: string;
  at: Date;
  actor: string;
  action: string;
  subject: string;
  subject_id: string | null;
  from_state: string | null;
  to_state: string | null;
  note: string | null;
  sealed: boolean;
}

export function auditReader(dataSource: DataSource): AuditReader {
  return {
    async list({ offset, limit, subjectId }) {
      const about = subjectId ?? null;
      const rows: Row[] = await dataSource.query(
        `SELECT e.id, e.at, e.actor, e.action, e.subject, e.subject_id, e.from_state, e.to_state, e.note,
           s.entry_id IS NOT NULL AS sealed
         FROM audit_entries e LEFT JOIN audit_seals s ON s.entry_id = e.id
         WHERE $1::text IS NULL OR e.subject_id = $1 ORDER BY e.id DESC OFFSET $2 LIMIT $3`,
        [about, offset, limit],
      );
      const [count]: { total: number }[] = await dataSource.query(
        'SELECT count(*)::int AS total FROM audit_entries WHERE $1::text IS NULL OR subject_id = $1',
        [about],
      );
      return {
        total: count?.total ?? 0,
        items: rows.map((row) => ({
          id: row.id,
          at: row.at.toISOString(),
          actor: row.actor,
          action: row.action,
          subject: row.subject,
          subjectId: row.subject_id,
          from: row.from_state,
          to: row.to_state,
          note: row.note,
          sealed: row.sealed,
        })),
      };
    },
  };
}
