import type { DataSource, EntityManager } from 'typeorm';
import type { Transaction, UnitOfWork } from '../api/domain/shared/transaction';

/** The ORM's view of a transaction handle; the only place where the handle is opened. */
export function managerOf(transaction: Transaction): EntityManager {
  return transaction as unknown as EntityManager;
}

export function unitOfWork(dataSource: DataSource): UnitOfWork {
  return {
    run: (work) =>
      dataSource.transaction('READ COMMITTED', (manager) => work(manager as unknown as Transaction)),
  };
}
