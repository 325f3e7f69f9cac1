import { createDataSource, type DataSource } from '../../db/data-source';
import { readColumns } from '../../db/copy-out';
import { createTestDatabase, type TestDatabase } from '../support/database';

describe('columns read by binary COPY', () => {
  let database: TestDatabase;
  let dataSource: DataSource;
  beforeAll(async () => {
    database = await createTestDatabase();
    dataSource = createDataSource(database.url, { poolSize: 2 });
    await dataSource.initialize();
  }, 60_000);
  afterAll(async () => {
    await dataSource.destroy();
    await database.drop();
  });
  const read = (query: string): Promise<Float64Array[]> => dataSource.transaction((manager) => readColumns(manager, query, ['int4', 'float8']));

  it('come to the last bit, missing ones as NaN, across any pieces', async () => {
    const [numbers, values] = await read(`SELECT i, CASE WHEN i % 7 = 0 THEN NULL ELSE i / 3::float8 END FROM generate_series(1, 50000) i`);
    expect(numbers).toHaveLength(50_000);
    expect(numbers?.every((n, i) => n === i + 1)).toBe(true);
    expect(values?.every((x, i) => Object.is(x, (i + 1) % 7 === 0 ? Number.NaN : (i + 1) / 3))).toBe(true);
    expect(await read('SELECT 1, 1.5::float8 WHERE false')).toEqual([new Float64Array(0), new Float64Array(0)]);
  });

  it('are refused where they are not of the kinds asked for, and leave the connection in order', async () => {
    await expect(read(`SELECT 1, 'x'`)).rejects.toThrow(/is no float8/);
    await expect(read('SELECT 1')).rejects.toThrow(/1 columns/);
    await expect(read('SELECT 1, 1 / 0::float8')).rejects.toThrow(/division by zero/);
    expect(await read('SELECT -5, 0.25::float8')).toEqual([Float64Array.of(-5), Float64Array.of(0.25)]);
    await expect(readColumns(dataSource.manager, 'SELECT 1', ['int4'])).rejects.toThrow(/within a transaction/);
  });
});
