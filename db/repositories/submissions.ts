import type { DataSource, EntityManager } from 'typeorm';
import { ChangedMeanwhile, InvalidInput, NotFound } from '../../api/domain/shared/errors';
import type { SubmissionRecord, Submissions } from '../../api/domain/submission/submission';
import { isUnknownReference } from '../database-errors';
import { SubmissionRow } from '../entities/data';
import { ContactRow } from '../entities/people';
import { managerOf } from '../unit-of-work';

function recordOf({ id, reference, state }: SubmissionRow): SubmissionRecord {
  return { id, reference, state };
}

async function requireContact(manager: EntityManager, contactId: string, firmId: string): Promise<void> {
  const contact = await manager.findOneBy(ContactRow, { id: contactId, firmId });
  if (contact === null) throw new InvalidInput([{ path: 'contactId', message: 'is not a contact of this broker firm' }]);
}

export function submissionsRepository(dataSource: DataSource): Submissions {
  return {
    async create(transaction, submission) {
      const manager = managerOf(transaction);
      await requireContact(manager, submission.contactId, submission.brokerFirmId);
      const [next]: { number: string }[] = await manager.query(`SELECT nextval('submission_numbers') AS number`);
      const reference = `S${submission.treatyYear}-${String(next?.number).padStart(4, '0')}`;
      try {
        const { identifiers } = await manager.insert(SubmissionRow, { ...submission, reference });
        return { id: String(identifiers[0]?.['id']), reference, state: 'open' };
      } catch (error) {
        if (isUnknownReference(error)) throw new InvalidInput([{ path: 'cedantId', message: 'is not a known cedant' }]);
        throw error;
      }
    },
    async update(transaction, id, version, change) {
      const manager = managerOf(transaction);
      const row = await manager.findOne(SubmissionRow, { where: { id }, lock: { mode: 'pessimistic_write' } });
      if (row === null) throw new NotFound('submission');
      if (row.version !== version) throw new ChangedMeanwhile('submission');
      if (change.contactId !== undefined) await requireContact(manager, change.contactId, row.brokerFirmId);
      await manager.update(SubmissionRow, { id, version }, { ...change, version: version + 1 });
    },
    async lock(transaction, id) {
      const row = await managerOf(transaction).findOne(SubmissionRow, { where: { id }, lock: { mode: 'pessimistic_write' } });
      if (row === null) throw new NotFound('submission');
      return recordOf(row);
    },
    async byId(id) {
      const row = await dataSource.manager.findOneBy(SubmissionRow, { id });
      return row === null ? null : recordOf(row);
    },
  };
}
