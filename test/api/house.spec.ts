import { Client } from 'pg';
import type { Basis, Book, Zone } from '../../api/contract/house';
import { amountOf, unitsOf } from '../../api/domain/money';
import { openTestApi, type TestApi } from '../support/api';
import { openTestDesk, type As } from '../support/desk';

describe('the house, to read', () => {
  let api: TestApi;
  let una: As;
  beforeAll(async () => {
    api = await openTestApi();
    una = (await openTestDesk(api)).as('una.writhe@house.example');
  }, 60_000);
  afterAll(() => api.close());

  it('shows one released basis', async () => {
    const bases = (await una('get', '/bases').expect(200)).body as Basis[];
    expect(bases.filter(({ state }) => state === 'released')).toHaveLength(1);
  });

  it('shows of every zone what is held, used and free, to the last digit', async () => {
    const { rows } = await api.owner.query<{ id: string }>('SELECT id FROM contracts LIMIT 1');
    await api.owner.query('INSERT INTO zone_uses (zone_id, contract_id, amount) SELECT id, $1, 0.0001 FROM zones', [rows[0]?.id]);
    const zones = (await una('get', '/zones').expect(200)).body as Zone[];
    expect(zones.length).toBeGreaterThan(0);
    for (const { capacity, held, used, free } of zones) {
      expect(unitsOf(used)).toBeGreaterThan(0n);
      expect(free).toBe(amountOf(unitsOf(capacity) - unitsOf(held) - unitsOf(used)));
    }
  });

  it('shows the book with the versions that made it, page by page', async () => {
    const book = (await una('get', '/book').expect(200)).body as Book;
    const first = (await una('get', '/book/versions?limit=1').expect(200)).body as { items: { number: number }[]; total: number };
    expect(first.items.map(({ number }) => number)).toEqual([book.version]);
    expect(first.total).toBe(book.version + 1);
    const last = (await una('get', `/book/versions?offset=${first.total - 1}`).expect(200)).body as { items: { number: number }[] };
    expect(last.items.map(({ number }) => number)).toEqual([0]);
    const premium = book.contracts.filter(({ currency }) => currency === book.currency).reduce((sum, one) => sum + unitsOf(one.houseShareOfPremium), 0n);
    expect(unitsOf(book.premium)).toBeGreaterThanOrEqual(premium);
  });

  it('keeps the versions of the book and its layers from the application itself', async () => {
    const application = new Client({ connectionString: api.database.url });
    await application.connect();
    for (const sql of ['UPDATE book_versions SET cause = cause', 'DELETE FROM book_versions', 'UPDATE contract_layers SET premium = premium', 'DELETE FROM contracts', 'UPDATE orders SET note = note', 'DELETE FROM zone_uses']) {
      await expect(application.query(sql)).rejects.toThrow(/permission denied/);
    }
    await application.end();
  });
});
