import type { DataSource } from 'typeorm';
import { Client } from 'pg';
import { sealAudit, verifyAudit } from '../../db/audit-chain';
import { createDataSource } from '../../db/data-source';
import { createTestDatabase, type TestDatabase } from '../support/database';

describe('the chain over the audit trail', () => {
  let database: TestDatabase;
  let sealer: DataSource;
  let application: DataSource;
  let owner: Client;
  beforeAll(async () => {
    database = await createTestDatabase();
    sealer = createDataSource(database.sealerUrl, { poolSize: 1 });
    application = createDataSource(database.url, { poolSize: 2 });
    owner = new Client({ connectionString: database.ownerUrl });
    await Promise.all([sealer.initialize(), application.initialize(), owner.connect()]);
  });
  afterAll(async () => {
    await Promise.all([sealer.destroy(), application.destroy(), owner.end()]);
    await database.drop();
  });
  const add = (action: string, on: Pick<DataSource, 'query'> = application) =>
    on.query(`INSERT INTO audit_entries (actor, action, subject) VALUES ('somebody', $1, 'thing')`, [action]);

  it('seals in commit order, waits for what is not committed, and is intact', async () => {
    const late = application.createQueryRunner();
    await late.startTransaction();
    await add('begun first, committed last', late);
    await add('committed');
    expect(await sealAudit(sealer)).toBe(0);
    await late.commitTransaction();
    await late.release();
    await add('after');
    expect(await sealAudit(sealer)).toBe(3);
    expect(await sealAudit(sealer)).toBe(0);
    expect(await verifyAudit(application)).toEqual({ intact: true, sealed: 3 });
  });

  it('cannot be written by the application, nor the trail by the sealer', async () => {
    await expect(application.query(`INSERT INTO audit_seals (position, entry_id, hash) VALUES (99, 1, decode(repeat('00', 32), 'hex'))`)).rejects.toThrow(/permission denied/);
    await expect(application.query('UPDATE audit_seals SET position = 99')).rejects.toThrow(/permission denied/);
    await expect(add('by the sealer', sealer)).rejects.toThrow(/permission denied/);
    await expect(sealer.query('DELETE FROM audit_seals')).rejects.toThrow(/permission denied/);
  });

  it('names the first entry that was altered', async () => {
    const second = await owner.query<{ entry_id: string }>('SELECT entry_id FROM audit_seals WHERE position = 2');
    await owner.query(`UPDATE audit_entries SET note = 'rewritten' WHERE id = $1`, [second.rows[0]?.entry_id]);
    expect(await verifyAudit(application)).toEqual({ intact: false, position: 2, entryId: second.rows[0]?.entry_id });
  });
});
