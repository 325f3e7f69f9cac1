import Redis from 'ioredis';
import { onConnection, ROLES } from '../../db/local/roles';
import { createTestDatabase, type TestDatabase } from '../support/database';
import { createTestRedis } from '../support/redis';

describe('the roles of the database', () => {
  let database: TestDatabase;
  beforeAll(async () => {
    database = await createTestDatabase();
  });
  afterAll(() => database.drop());

  it('gives the application and the sealer no tables, no databases, no roles and no way to make any', async () => {
    for (const url of [database.url, database.sealerUrl]) {
      await onConnection(url, async (client) => {
        const { rows } = await client.query(
          `SELECT rolsuper, rolcreatedb, rolcreaterole, (SELECT count(*)::int FROM pg_class WHERE relowner = r.oid) AS owns
             FROM pg_roles r WHERE rolname = current_user`,
        );
        expect(rows).toEqual([{ rolsuper: false, rolcreatedb: false, rolcreaterole: false, owns: 0 }]);
        await expect(client.query('CREATE TABLE mine (id int)')).rejects.toThrow(/permission denied/);
        await expect(client.query('CREATE TEMPORARY TABLE mine (id int)')).rejects.toThrow(/permission denied/);
      });
    }
  });

  it('lets the application truncate nothing', async () => {
    const truncatable = await onConnection(database.url, (client) =>
      client.query(`SELECT relname FROM pg_class WHERE relkind = 'r' AND relnamespace = 'public'::regnamespace
                     AND has_table_privilege(oid, 'TRUNCATE')`),
    );
    expect(truncatable.rows).toEqual([]);
  });

  it('opens no database to a role that was not let in', async () => {
    const access = await onConnection(database.ownerUrl, (client) =>
      client.query<{ role: string; may: boolean }>(
        `SELECT rolname AS role, has_database_privilege(rolname, current_database(), 'CONNECT') AS may
           FROM pg_roles WHERE rolname = ANY ($1) ORDER BY 1`,
        [[ROLES.application, ROLES.sealer, 'pg_monitor']],
      ),
    );
    expect(access.rows).toEqual([
      { role: ROLES.application, may: true },
      { role: ROLES.sealer, may: true },
      { role: 'pg_monitor', may: false },
    ]);
  });

  it('clones the template for each file, at once and apart, and drops a clone that is still in use', async () => {
    const clones = await Promise.all([createTestDatabase(), createTestDatabase(), createTestDatabase()]);
    expect(new Set(clones.map(({ name }) => name)).size).toBe(3);
    const [first] = clones;
    if (first === undefined) throw new Error('no clone');
    await onConnection(first.url, async (client) => {
      client.on('error', () => undefined);
      await Promise.all(clones.map((clone) => clone.drop()));
    });
    const left = await onConnection(database.ownerUrl, (client) =>
      client.query('SELECT datname FROM pg_database WHERE datname = ANY ($1)', [clones.map(({ name }) => name)]),
    );
    expect(left.rows).toEqual([]);
  });
});

describe('the Redis of a test file', () => {
  it('is empty, its own, and refuses whoever does not know the password', async () => {
    const [one, other] = await Promise.all([createTestRedis(), createTestRedis()]);
    const client = new Redis(one.url);
    const neighbour = new Redis(other.url);
    try {
      await client.set('key', 'value');
      expect(await neighbour.get('key')).toBeNull();
    } finally {
      client.disconnect();
      neighbour.disconnect();
      await Promise.all([one.drop(), other.drop()]);
    }
    const stranger = new Redis(one.url.replace(/:[^:@]+@/, ':wrong@'), { retryStrategy: () => null });
    const refusal = await new Promise<Error>((resolve) => stranger.on('error', resolve));
    stranger.disconnect();
    expect(refusal.message).toMatch(/WRONGPASS/);
  });
});
