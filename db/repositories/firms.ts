import type { DataSource } from 'typeorm';
import type { Firms } from '../../api/domain/person/person';
import { InvalidInput, NotFound } from '../../api/domain/shared/errors';
import { isTaken, isUnknownReference } from '../database-errors';
import { BrokerFirmRow, CedantRow, ContactRow } from '../entities/people';
import { managerOf } from '../unit-of-work';

function taken(error: unknown, path: string): unknown {
  return isTaken(error) ? new InvalidInput([{ path, message: 'is recorded already' }]) : error;
}

export function firmsRepository(dataSource: DataSource): Firms {
  return {
    async list() {
      const rows = await dataSource.manager.find(BrokerFirmRow, { relations: { contacts: true }, order: { name: 'ASC', contacts: { name: 'ASC' } } });
      return rows.map((firm) => ({
        id: firm.id,
        name: firm.name,
        contacts: firm.contacts.map(({ id, name, email }) => ({ id, name, email })),
      }));
    },
    async create(transaction, name) {
      try {
        const { identifiers } = await managerOf(transaction).insert(BrokerFirmRow, { name });
        return { id: String(identifiers[0]?.['id']), name, contacts: [] };
      } catch (error) {
        throw taken(error, 'name');
      }
    },
    async addContact(transaction, firmId, contact) {
      try {
        const { identifiers } = await managerOf(transaction).insert(ContactRow, { firmId, ...contact });
        return { id: String(identifiers[0]?.['id']), ...contact };
      } catch (error) {
        if (isUnknownReference(error)) throw new NotFound('broker firm');
        throw taken(error, 'email');
      }
    },
    async cedants() {
      const rows = await dataSource.manager.find(CedantRow, { order: { name: 'ASC' } });
      return rows.map(({ id, name, territory }) => ({ id, name, territory }));
    },
    async createCedant(transaction, cedant) {
      try {
        const { identifiers } = await managerOf(transaction).insert(CedantRow, cedant);
        return { id: String(identifiers[0]?.['id']), ...cedant };
      } catch (error) {
        throw taken(error, 'name');
      }
    },
  };
}
