import type { DataSource } from 'typeorm';
import type { LossRow, LossTable, SubmissionSummary } from '../../api/contract/submissions';
import type { SubmissionReader } from '../../api/features/submissions/port';

/** Nested values come as JSON from the database, named as the contract names them; times as text that sorts. */
const SUMMARIES = `SELECT s.id, s.reference,
    json_build_object('id', c.id, 'name', c.name, 'territory', c.territory) AS cedant,
    json_build_object('id', f.id, 'name', f.name) AS "brokerFirm",
    json_build_object('id', k.id, 'name', k.name, 'email', k.email) AS contact,
    s.treaty_year AS "treatyYear", s.inception_on::text AS "inceptionOn", s.currency, s.state, s.note,
    json_build_object('id', o.id, 'name', o.name) AS owner, s.version,
    (SELECT count(*)::int FROM programmes p WHERE p.submission_id = s.id) AS "programmeCount",
    (SELECT count(*)::int FROM loss_tables t WHERE t.submission_id = s.id) AS "lossTableCount"
  FROM submissions s JOIN cedants c ON c.id = s.cedant_id JOIN broker_firms f ON f.id = s.broker_firm_id
    JOIN contacts k ON k.id = s.contact_id JOIN people o ON o.id = s.owner_id`;

const LOSS_TABLES = `SELECT v.id, t.submission_id AS "submissionId", t.name, v.number,
    json_build_object('id', c.id, 'name', c.name, 'versionId', w.id, 'versionNumber', w.number) AS catalogue,
    v.currency, v.basis_note AS "basisNote", v.file_name AS "fileName", v.content_hash AS "contentHash", v.row_count AS "rowCount",
    v.yearly_mean AS "yearlyMean", json_build_object('id', u.id, 'name', u.name) AS "uploadedBy", v.uploaded_at AS "uploadedAt",
    EXISTS (SELECT 1 FROM loss_table_versions l WHERE l.loss_table_id = t.id AND l.number > v.number) AS superseded
  FROM loss_table_versions v JOIN loss_tables t ON t.id = v.loss_table_id JOIN catalogues c ON c.id = t.catalogue_id
    JOIN catalogue_versions w ON w.id = v.catalogue_version_id JOIN people u ON u.id = v.uploaded_by`;

type LossTableRow = Omit<LossTable, 'uploadedAt'> & { uploadedAt: Date };

function lossTableOf(row: LossTableRow): LossTable {
  return { ...row, uploadedAt: row.uploadedAt.toISOString() };
}

export function submissionReader(dataSource: DataSource): SubmissionReader {
  return {
    list: () => dataSource.query<SubmissionSummary[]>(`${SUMMARIES} ORDER BY s.created_at DESC, s.reference DESC`),
    async byId(id) {
      const rows: SubmissionSummary[] = await dataSource.query(`${SUMMARIES} WHERE s.id = $1`, [id]);
      return rows[0] ?? null;
    },
    async lossTables(submissionId) {
      const rows: LossTableRow[] = await dataSource.query(`${LOSS_TABLES} WHERE t.submission_id = $1 ORDER BY v.uploaded_at DESC, v.number DESC`, [submissionId]);
      return rows.map(lossTableOf);
    },
    async lossTable(versionId) {
      const rows: LossTableRow[] = await dataSource.query(`${LOSS_TABLES} WHERE v.id = $1 AND t.submission_id IS NOT NULL`, [versionId]);
      return rows[0] === undefined ? null : lossTableOf(rows[0]);
    },
    async lossRows(versionId, { offset, limit }) {
      const items: LossRow[] = await dataSource.query(
        `SELECT n.event, r.mean_loss AS "meanLoss", r.sd, r.common_share AS "commonShare", r.exposed_value AS "exposedValue"
         FROM loss_rows r JOIN loss_table_versions v ON v.id = r.version_id JOIN loss_tables t ON t.id = v.loss_table_id
           JOIN catalogue_event_names n ON n.catalogue_id = t.catalogue_id AND n.event_no = r.event_no
         WHERE r.version_id = $1 ORDER BY r.row_no OFFSET $2 LIMIT $3`,
        [versionId, offset, limit],
      );
      const [count]: { total: number }[] = await dataSource.query('SELECT row_count AS total FROM loss_table_versions WHERE id = $1', [versionId]);
      return { items, total: count?.total ?? 0 };
    },
  };
}
