import type { DataSource } from 'typeorm';
import type { ProgrammeRecord, Programmes, UsableLossTable } from '../../api/domain/programme/programme';
import { ChangedMeanwhile, NotFound } from '../../api/domain/shared/errors';
import { ProgrammeRow } from '../entities/programme';
import { managerOf } from '../unit-of-work';

function recordOf({ id, submissionId, terms, version }: ProgrammeRow): ProgrammeRecord {
  return { id, submissionId, terms, version };
}

export function programmesRepository(dataSource: DataSource): Programmes {
  return {
    async create(transaction, submissionId, terms, by) {
      const { identifiers } = await managerOf(transaction).insert(ProgrammeRow, { submissionId, terms, updatedById: by });
      return { id: String(identifiers[0]?.['id']), submissionId, terms, version: 1 };
    },
    async byId(id) {
      const row = await dataSource.manager.findOneBy(ProgrammeRow, { id });
      return row === null ? null : recordOf(row);
    },
    async update(transaction, id, version, terms, by) {
      const manager = managerOf(transaction);
      const { affected } = await manager.update(ProgrammeRow, { id, version }, { terms, version: version + 1, updatedById: by, updatedAt: new Date() });
      if (affected === 1) return;
      throw (await manager.existsBy(ProgrammeRow, { id })) ? new ChangedMeanwhile('programme') : new NotFound('programme');
    },
    usableLossTables: (transaction, submissionId) =>
      managerOf(transaction).query<UsableLossTable[]>(
        `SELECT v.id, t.id AS "tableId", t.name FROM loss_table_versions v JOIN loss_tables t ON t.id = v.loss_table_id WHERE t.submission_id = $1`,
        [submissionId],
      ),
  };
}
