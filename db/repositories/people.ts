import type { DataSource, EntityManager } from 'typeorm';
import type { People, PersonRecord } from '../../api/domain/person/person';
import { ChangedMeanwhile, InvalidInput, NotFound } from '../../api/domain/shared/errors';
import { isTaken, isUnknownReference } from '../database-errors';
import { PersonRow } from '../entities/people';
import { managerOf } from '../unit-of-work';

function recordOf(row: PersonRow): PersonRecord {
  const { id, name, email, role, active, version } = row;
  return { id, name, email, role, firm: row.firm === null ? null : { id: row.firm.id, name: row.firm.name }, active, version };
}

function find(manager: EntityManager, id: string): Promise<PersonRow | null> {
  return manager.findOne(PersonRow, { where: { id }, relations: { firm: true } });
}

export function peopleRepository(dataSource: DataSource): People {
  return {
    async list(transaction) {
      const manager = transaction === undefined ? dataSource.manager : managerOf(transaction);
      const rows = await manager.find(PersonRow, { relations: { firm: true }, order: { name: 'ASC' } });
      return rows.map(recordOf);
    },
    async byId(id) {
      const row = await find(dataSource.manager, id);
      return row === null ? null : recordOf(row);
    },
    async credentialsOf(email) {
      const row = await dataSource.manager
        .createQueryBuilder(PersonRow, 'person')
        .leftJoinAndSelect('person.firm', 'firm')
        .addSelect('person.passwordHash')
        .where('person.email = :email', { email: email.toLowerCase() })
        .getOne();
      return row === null ? null : { person: recordOf(row), passwordHash: row.passwordHash };
    },
    async create(transaction, person) {
      const manager = managerOf(transaction);
      try {
        const { identifiers } = await manager.insert(PersonRow, { ...person, email: person.email.toLowerCase() });
        const row = await find(manager, String(identifiers[0]?.['id']));
        if (row === null) throw new NotFound('person');
        return recordOf(row);
      } catch (error) {
        if (isTaken(error)) throw new InvalidInput([{ path: 'email', message: 'has an account already' }]);
        if (isUnknownReference(error)) throw new InvalidInput([{ path: 'firmId', message: 'is not a known broker firm' }]);
        throw error;
      }
    },
    async update(transaction, id, version, change) {
      const manager = managerOf(transaction);
      const { affected } = await manager.update(PersonRow, { id, version }, { ...change, version: version + 1 });
      const row = await find(manager, id);
      if (row === null) throw new NotFound('person');
      if (affected !== 1) throw new ChangedMeanwhile('account');
      return recordOf(row);
    },
    async setPassword(transaction, id, passwordHash) {
      await managerOf(transaction).update(PersonRow, { id }, { passwordHash });
    },
  };
}
