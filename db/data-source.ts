import 'reflect-metadata';
import { DataSource } from 'typeorm';
import { ENTITIES } from './entities';
import { MIGRATIONS } from './migrations';

/** A pool under the application's role, or under the owner's for migrations. Never synchronises a schema. */
export function createDataSource(url: string, options: { readonly poolSize?: number } = {}): DataSource {
  return new DataSource({
    type: 'postgres',
    url,
    entities: ENTITIES,
    migrations: MIGRATIONS,
    migrationsTableName: 'migrations',
    migrationsTransactionMode: 'each',
    synchronize: false,
    logging: false,
    uuidExtension: 'pgcrypto',
    installExtensions: false,
    poolSize: options.poolSize ?? 10,
    applicationName: 'leanyear',
    extra: { statement_timeout: 60_000, idle_in_transaction_session_timeout: 60_000 },
  });
}

export type { DataSource };
