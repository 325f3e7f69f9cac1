import type { DataSource } from 'typeorm';
import type { Programme } from '../../api/contract/programmes';
import type { ProgrammeReader } from '../../api/features/programmes/port';

type Row = Omit<Programme, 'updatedAt'> & { updatedAt: Date };

const PROGRAMMES = `SELECT p.id, p.submission_id AS "submissionId", p.terms, p.version, p.updated_at AS "updatedAt",
    (SELECT r.id FROM runs r WHERE r.programme_id = p.id ORDER BY r.created_at DESC LIMIT 1) AS "latestRunId"
  FROM programmes p`;

function programmeOf(row: Row): Programme {
  return { ...row, updatedAt: row.updatedAt.toISOString() };
}

export function programmeReader(dataSource: DataSource): ProgrammeReader {
  return {
    async list(submissionId) {
      const rows: Row[] = await dataSource.query(`${PROGRAMMES} WHERE p.submission_id = $1 ORDER BY p.created_at, p.id`, [submissionId]);
      return rows.map(programmeOf);
    },
    async byId(id) {
      const rows: Row[] = await dataSource.query(`${PROGRAMMES} WHERE p.id = $1`, [id]);
      return rows[0] === undefined ? null : programmeOf(rows[0]);
    },
  };
}
