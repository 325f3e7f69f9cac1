import type request from 'supertest';
import type { Book, Zone } from '../../api/contract/house';
import type { Quote } from '../../api/contract/quotes';
import { openTestApi, type TestApi } from '../support/api';
import { IN_A_MONTH, openTestDesk, pricedProgramme, type As, type TestDesk } from '../support/desk';

const YESTERDAY = new Date(Date.now() - 24 * 3600 * 1000).toISOString().slice(0, 10);

describe('binding', () => {
  let api: TestApi;
  let desk: TestDesk;
  let una: As;
  let sena: As;
  let ivo: As;
  let bram: As;
  beforeAll(async () => {
    api = await openTestApi();
    desk = await openTestDesk(api);
    [una, sena, ivo, bram] = ['una.writhe@house.example', 'sena.orrick@house.example', 'ivo.lander@house.example', 'bram@pell-marchbank.example'].map(desk.as) as [As, As, As, As];
  }, 60_000);
  afterAll(() => api.close());

  const act = (as: As, id: string, move: string, note = 'because') => as('post', `/quotes/${id}/${move}`).send({ note });
  const read = async (as: As, id: string): Promise<Quote> => (await as('get', `/quotes/${id}`).expect(200)).body as Quote;
  const reasons = (res: request.Response): string[] => (res.body as { reasons: { code: string }[] }).reasons.map(({ code }) => code);
  const draft = async (over: { kind?: 'firm' | 'indication'; premium?: string; writtenLine?: number } = {}): Promise<{ id: string; programmeId: string }> => {
    const { programmeId, runId } = await pricedProgramme(api, desk, una, over.writtenLine === undefined ? {} : { writtenLine: over.writtenLine });
    const body = { runId, kind: over.kind ?? 'firm', validUntil: IN_A_MONTH, layers: [{ key: 'only', premium: over.premium ?? '1100000' }] };
    return { id: ((await una('post', `/programmes/${programmeId}/quotes`).send(body).expect(201)).body as Quote).id, programmeId };
  };
  const ordered = async (over: Parameters<typeof draft>[0] & { orderShare?: number } = {}): Promise<{ id: string; programmeId: string }> => {
    const made = await draft(over);
    if (((await act(una, made.id, 'submit').expect(200)).body as Quote).state === 'referred') await act(sena, made.id, 'clear').expect(200);
    await act(una, made.id, 'issue').expect(200);
    await bram('post', `/broker/quotes/${made.id}/order`).send({ layers: [{ key: 'only', orderShare: over.orderShare ?? 1 }], note: '' }).expect(200);
    return made;
  };
  const zones = async (): Promise<Zone[]> => (await una('get', '/zones').expect(200)).body as Zone[];
  const sum = (of: Zone[], what: 'held' | 'used'): number => of.reduce((total, zone) => total + Number(zone[what]), 0);
  /** In how many zones something is held for a quote. */
  const holds = async (id: string): Promise<number> =>
    (await api.owner.query('SELECT 1 FROM zone_uses WHERE quote_id = $1 AND released_at IS NULL', [id])).rowCount ?? 0;

  it('binds no more than the order: what a firm quote held beyond it is given back', async () => {
    const { id } = await draft();
    await act(una, id, 'submit').expect(200);
    const free = await zones();
    await act(una, id, 'issue').expect(200);
    const touched = await holds(id);
    expect(touched).toBeGreaterThan(0);
    expect(sum(await zones(), 'held') - sum(free, 'held')).toBe(500_000 * touched);
    await bram('post', `/broker/quotes/${id}/order`).send({ layers: [{ key: 'only', orderShare: 0.02 }], note: '' }).expect(200);
    const bound = (await act(una, id, 'bind').expect(200)).body as Quote;
    const after = await zones();
    expect([sum(after, 'held') - sum(free, 'held'), sum(after, 'used') - sum(free, 'used')]).toEqual([0, 200_000 * touched]);
    const book = (await una('get', '/book').expect(200)).body as Book;
    expect(book.contracts.find((contract) => contract.id === bound.contractId)).toMatchObject({
      origin: 'bound quote',
      inceptionOn: '2027-01-01',
      expiresOn: '2027-12-31',
      layers: [{ key: 'only', signedLine: 0.02, premium: '1100000' }],
    });
  });

  it('writes in the same act the trail, the broker’s mail and the wake of what rests on the book', async () => {
    const { id } = await ordered();
    await act(una, id, 'bind').expect(200);
    const { version } = (await una('get', '/book').expect(200)).body as Book;
    const wakes = await api.owner.query(`SELECT 1 FROM outbox WHERE topic = 'book.moved' AND subject_id = $1`, [String(version)]);
    const mails = await api.owner.query<{ kind: string; model: object }>('SELECT kind, model FROM mails WHERE quote_id = $1 ORDER BY created_at', [id]);
    expect(wakes.rowCount).toBe(1);
    expect(mails.rows.map(({ kind }) => kind)).toEqual(['quote issued', 'broker answered', 'quote bound']);
    for (const { model } of mails.rows) expect(JSON.stringify(model)).not.toMatch(/technical|walkAway|expectedLoss|adequacy/i);
  });

  it('a firm order taken in time is bound after the validity, on a stale price, in full zones', async () => {
    const { id, programmeId } = await ordered();
    await api.owner.query('UPDATE quotes SET valid_until = $2 WHERE id = $1', [id, YESTERDAY]);
    await api.owner.query('UPDATE programmes SET version = version + 1 WHERE id = $1', [programmeId]);
    const before = await api.owner.query<{ id: string; capacity: string }>('SELECT id, capacity FROM zones');
    await api.owner.query('UPDATE zones SET capacity = 0');
    expect((await act(una, id, 'bind').expect(200)).body).toMatchObject({ state: 'bound' });
    for (const zone of before.rows) await api.owner.query('UPDATE zones SET capacity = $2 WHERE id = $1', [zone.id, zone.capacity]);
  });

  it('an ordered indication promised nothing: a stale price refuses it', async () => {
    const { id, programmeId } = await ordered({ kind: 'indication' });
    expect(await holds(id)).toBe(0);
    await api.owner.query('UPDATE programmes SET version = version + 1 WHERE id = $1', [programmeId]);
    expect(reasons(await act(una, id, 'bind').expect(409))).toEqual(['stale']);
    expect((await read(una, id)).moves.find(({ move }) => move === 'bind')).toMatchObject({ allowed: false, reasons: [{ code: 'stale' }] });
  });

  it('needs authority of who binds, and a grant in force even where a senior has cleared it', async () => {
    await api.owner.query(`UPDATE grants SET ended_at = now() WHERE person_id = (SELECT id FROM people WHERE email = 'ivo.lander@house.example')`);
    const within = await ordered();
    const cleared = await ordered({ writtenLine: 0.2 });
    for (const { id } of [within, cleared]) {
      const refused = reasons(await act(ivo, id, 'bind').expect(409));
      expect(new Set(refused)).toEqual(new Set(['largest line', 'lowest adequacy', 'below walk-away']));
      expect((await read(ivo, id)).moves.find(({ move }) => move === 'bind')?.allowed).toBe(false);
      expect((await read(una, id)).moves.find(({ move }) => move === 'bind')?.allowed).toBe(true);
      await act(una, id, 'bind').expect(200);
    }
  });

  it('a refused bind leaves nothing behind', async () => {
    const { id } = await ordered({ kind: 'indication' });
    const before = (await una('get', '/book').expect(200)).body as Book;
    const kept = await api.owner.query<{ id: string; capacity: string }>('SELECT id, capacity FROM zones');
    await api.owner.query('UPDATE zones SET capacity = 0');
    const refused = await act(una, id, 'bind').expect(409);
    expect(new Set(reasons(refused))).toEqual(new Set(['capacity']));
    expect((refused.body as { reasons: { message: string }[] }).reasons[0]?.message).toMatch(/has 0 left and 500,000 is needed/);
    for (const zone of kept.rows) await api.owner.query('UPDATE zones SET capacity = $2 WHERE id = $1', [zone.id, zone.capacity]);
    const after = (await una('get', '/book').expect(200)).body as Book;
    expect([after.version, after.contracts.length]).toEqual([before.version, before.contracts.length]);
    expect((await read(una, id)).history.map(({ move }) => move)).not.toContain('bind');
  });

  it('takes the expiring contract out in the version that its renewal enters, and nothing that was bound', async () => {
    const first = await ordered();
    const { rows } = await api.owner.query<{ id: string }>(
      `UPDATE contracts SET programme_id = $1 WHERE id = (SELECT id FROM contracts WHERE origin = 'opening book' AND left_in IS NULL LIMIT 1) RETURNING id`,
      [first.programmeId],
    );
    const bound = (await act(una, first.id, 'bind').expect(200)).body as Quote;
    const { version } = (await una('get', '/book').expect(200)).body as Book;
    const left = await api.owner.query<{ left_in: number }>('SELECT left_in FROM contracts WHERE id = $1', [rows[0]?.id]);
    expect(left.rows).toEqual([{ left_in: version }]);
    // Another quote of the same programme does not push out what is bound.
    const run = await una('post', `/programmes/${first.programmeId}/runs`).send({ states: 10_000 }).expect(201);
    const runId = (run.body as { id: string }).id;
    await api.owner.query(
      `UPDATE runs SET state = 'succeeded', result_hash = repeat('c', 64), result = (SELECT result FROM runs r JOIN quotes q ON q.run_id = r.id WHERE q.id = $2) WHERE id = $1`,
      [runId, first.id],
    );
    const body = { runId, kind: 'indication', validUntil: IN_A_MONTH, layers: [{ key: 'only', premium: '1100000' }] };
    const second = ((await una('post', `/programmes/${first.programmeId}/quotes`).send(body).expect(201)).body as Quote).id;
    await act(una, second, 'submit').expect(200);
    await act(una, second, 'issue').expect(200);
    await bram('post', `/broker/quotes/${second}/order`).send({ layers: [{ key: 'only', orderShare: 1 }], note: '' }).expect(200);
    const again = (await act(una, second, 'bind').expect(200)).body as Quote;
    const ids = ((await una('get', '/book').expect(200)).body as Book).contracts.map(({ id }) => id);
    expect(ids).toEqual(expect.arrayContaining([bound.contractId, again.contractId]));
  });

  it('gives back what a firm quote held when the broker declines it, and tells the underwriter', async () => {
    const { id } = await draft();
    await act(una, id, 'submit').expect(200);
    await act(una, id, 'issue').expect(200);
    expect(await holds(id)).toBeGreaterThan(0);
    expect((await bram('post', `/broker/quotes/${id}/decline`).send({ note: 'placed elsewhere' }).expect(200)).body).toMatchObject({ state: 'not taken up' });
    expect(await holds(id)).toBe(0);
    const mails = await api.owner.query(`SELECT 1 FROM mails WHERE quote_id = $1 AND kind = 'broker answered'`, [id]);
    expect(mails.rowCount).toBe(1);
    expect(reasons(await bram('post', `/broker/quotes/${id}/order`).send({ layers: [{ key: 'only', orderShare: 1 }] }).expect(409))).toEqual(['state']);
  });

  it('wakes the re-pricing of a revised quote whose book has moved on', async () => {
    const { id } = await draft();
    await act(una, id, 'submit').expect(200);
    await act(una, id, 'issue').expect(200);
    const other = await ordered({ kind: 'indication' });
    await act(una, other.id, 'bind').expect(200);
    const { version } = (await una('get', '/book').expect(200)).body as Book;
    await api.owner.query('DELETE FROM outbox');
    expect((await act(una, id, 'revise').expect(201)).body).toMatchObject({ state: 'draft', runStanding: 'overtaken' });
    const wakes = await api.owner.query<{ topic: string; subject_id: string }>(`SELECT topic, subject_id FROM outbox WHERE topic = 'book.moved'`);
    expect(wakes.rows).toEqual([{ topic: 'book.moved', subject_id: String(version) }]);
  });
});
