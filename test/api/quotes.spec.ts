import { Client } from 'pg';
import { linkToken, orderCode } from '../../api/domain/mail/secrets';
import type { Quote } from '../../api/contract/quotes';
import request from 'supertest';
import { openTestApi, type TestApi } from '../support/api';
import { IN_A_MONTH, openTestDesk, pricedProgramme, type As, type TestDesk } from '../support/desk';

const LINK_SECRET = 'a secret of the test that is long enough for it';
const order = { layers: [{ key: 'only', orderShare: 1 }], note: 'as quoted' };

describe('quotes, from draft to bound', () => {
  let api: TestApi;
  let desk: TestDesk;
  let una: As;
  let sena: As;
  let bram: As;
  let quinn: As;
  beforeAll(async () => {
    api = await openTestApi({ LINK_SECRET });
    desk = await openTestDesk(api);
    [una, sena, bram, quinn] = ['una.writhe@house.example', 'sena.orrick@house.example', 'bram@pell-marchbank.example', 'quinn@quillon.example'].map(desk.as) as [As, As, As, As];
  }, 60_000);
  afterAll(() => api.close());

  const draft = async (over: { kind?: 'firm' | 'indication'; premium?: string; writtenLine?: number; by?: As } = {}): Promise<string> => {
    const { programmeId, runId } = await pricedProgramme(api, desk, una, over.writtenLine === undefined ? {} : { writtenLine: over.writtenLine });
    const body = { runId, kind: over.kind ?? 'firm', validUntil: IN_A_MONTH, layers: [{ key: 'only', premium: over.premium ?? '1100000' }] };
    return ((await (over.by ?? una)('post', `/programmes/${programmeId}/quotes`).send(body).expect(201)).body as Quote).id;
  };
  const act = (as: As, id: string, move: string, note = 'because') => as('post', `/quotes/${id}/${move}`).send({ note });
  const issued = async (over: Parameters<typeof draft>[0] = {}): Promise<string> => {
    const id = await draft(over);
    await act(una, id, 'submit').expect(200);
    await act(una, id, 'issue').expect(200);
    return id;
  };
  const reasons = (res: request.Response): string[] => (res.body as { reasons: { code: string }[] }).reasons.map(({ code }) => code);

  it('approves within authority, issues, takes the order and binds into the next version of the book', async () => {
    const before = (await una('get', '/book').expect(200)).body as { version: number; contracts: unknown[] };
    const id = await draft();
    expect((await act(una, id, 'submit').expect(200)).body).toMatchObject({ state: 'approved' });
    expect((await act(una, id, 'issue').expect(200)).body).toMatchObject({ state: 'issued' });
    await bram('post', `/broker/quotes/${id}/order`).send(order).expect(200);
    const bound = (await act(una, id, 'bind').expect(200)).body as Quote;
    expect(bound).toMatchObject({ state: 'bound', contractId: expect.any(String) as string });
    expect(bound.history.map(({ move }) => move)).toEqual(['draft', 'submit', 'issue', 'order', 'bind']);
    const after = (await una('get', '/book').expect(200)).body as { version: number; contracts: unknown[] };
    expect([after.version, after.contracts.length]).toEqual([before.version + 1, before.contracts.length + 1]);
    expect(reasons(await act(una, id, 'bind').expect(409))).toEqual(['state']);
  });

  it('refers what is outside authority, lets nobody decide on their own, and clears within the senior’s bounds', async () => {
    const id = await draft({ writtenLine: 0.2, premium: '900000' });
    const referred = (await act(una, id, 'submit').expect(200)).body as Quote;
    expect(referred.state).toBe('referred');
    expect(referred.authority.filter(({ pass }) => !pass).map(({ rule }) => rule)).toEqual(['largest line', 'lowest adequacy', 'below walk-away']);
    await act(una, id, 'clear').expect(403);
    await una('put', `/quotes/${id}`).set('If-Match', `"${referred.version}"`).send({ runId: referred.runId, kind: 'firm', validUntil: IN_A_MONTH, layers: [{ key: 'only', premium: '1' }] }).expect(409);
    const queue = (await sena('get', '/referrals').expect(200)).body as { id: string; failures: unknown[] }[];
    expect(queue.find((one) => one.id === id)?.failures).toHaveLength(3);
    await act(sena, id, 'return', '').expect(422);
    expect((await act(sena, id, 'clear').expect(200)).body).toMatchObject({ state: 'approved' });
    const own = await draft({ by: sena, writtenLine: 0.3 });
    expect((await act(sena, own, 'submit').expect(200)).body).toMatchObject({ state: 'referred' });
    expect(reasons(await act(sena, own, 'clear').expect(409))).toEqual(['own referral', 'largest line']);
  });

  it('takes silence for no authority', async () => {
    await api.owner.query(`UPDATE grants SET ended_at = now() WHERE person_id = (SELECT id FROM people WHERE email = 'ivo.lander@house.example')`);
    const id = await draft({ by: desk.as('ivo.lander@house.example') });
    expect((await act(desk.as('ivo.lander@house.example'), id, 'submit').expect(200)).body).toMatchObject({ state: 'referred' });
  });

  it('refuses a stale price with what has moved, and a run that failed its own check', async () => {
    const { programmeId, runId } = await pricedProgramme(api, desk, una);
    const body = { runId, kind: 'firm', validUntil: IN_A_MONTH, layers: [{ key: 'only', premium: '1100000' }] };
    const id = ((await una('post', `/programmes/${programmeId}/quotes`).send(body).expect(201)).body as Quote).id;
    await api.owner.query('UPDATE programmes SET version = version + 1 WHERE id = $1', [programmeId]);
    const res = await act(una, id, 'submit').expect(409);
    expect(res.body).toMatchObject({ reasons: [{ code: 'stale', message: expect.stringContaining('terms have changed') as string }] });
    expect(reasons(await una('post', `/programmes/${programmeId}/quotes`).send(body).expect(409))).toEqual(['stale']);
    const flagged = await pricedProgramme(api, desk, una, { flagged: true });
    expect(reasons(await una('post', `/programmes/${flagged.programmeId}/quotes`).send({ ...body, runId: flagged.runId }).expect(409))).toEqual(['self-check']);
  });

  it('keeps terms and premiums frozen out of draft, also against the application itself', async () => {
    const id = await issued();
    const application = new Client({ connectionString: api.database.url });
    await application.connect();
    await expect(application.query(`UPDATE quotes SET terms = '{}' WHERE id = $1`, [id])).rejects.toThrow(/frozen/);
    await expect(application.query('UPDATE quote_layers SET premium = 1 WHERE quote_id = $1', [id])).rejects.toThrow(/frozen/);
    await application.end();
  });

  it('shows another firm nothing: its ids are not there, and nothing technical is in the answer', async () => {
    const id = await issued();
    await quinn('get', `/broker/quotes/${id}`).expect(404);
    await quinn('post', `/broker/quotes/${id}/order`).send(order).expect(404);
    await quinn('post', `/broker/quotes/${id}/decline`).send({ note: 'not ours' }).expect(404);
    expect(((await quinn('get', '/broker/quotes').expect(200)).body as { id: string }[]).map((one) => one.id)).not.toContain(id);
    await bram('get', `/quotes/${id}`).expect(403);
    const seen = JSON.stringify((await bram('get', `/broker/quotes/${id}`).expect(200)).body);
    for (const hidden of ['technical', 'walkAway', 'expectedLoss', 'adequacy', 'capital', 'hunger', 'lossTable']) expect(seen).not.toContain(hidden);
    const unissued = await draft();
    await bram('get', `/broker/quotes/${unissued}`).expect(404);
  });

  it('lets the named contact order by signed link with a one-time code, and nobody without', async () => {
    const id = await issued();
    const links = await api.owner.query<{ id: string }>('SELECT id FROM quote_links WHERE quote_id = $1', [id]);
    const token = linkToken(LINK_SECRET, String(links.rows[0]?.id));
    const link = (method: 'get' | 'post', rest = '') => request(api.express)[method](`/api/v1/links/${token}${rest}`);
    expect((await link('get').expect(200)).body).toMatchObject({ state: 'issued', mayAnswer: true });
    await request(api.express).get(`/api/v1/links/${token.replace(/\..{4}/, '.AAAA')}`).expect(404);
    await link('post', '/order').send({ ...order, code: '000000' }).expect(422);
    await link('post', '/code').expect(202);
    const codes = await api.owner.query<{ id: string }>('SELECT id FROM link_codes ORDER BY created_at DESC LIMIT 1');
    const code = orderCode(LINK_SECRET, String(codes.rows[0]?.id));
    const wrong = code === '111111' ? '222222' : '111111';
    await link('post', '/order').send({ ...order, code: wrong }).expect(422);
    expect((await link('post', '/order').send({ ...order, code }).expect(200)).body).toMatchObject({ state: 'ordered', mayAnswer: false });
    // The code has been used, and the quote has moved on.
    await link('post', '/decline').send({ note: 'changed our mind', code }).expect(422);
  });

  it('closes the old link and gives capacity back when a quote is revised', async () => {
    const id = await issued();
    const held = await api.owner.query('SELECT 1 FROM zone_uses WHERE quote_id = $1 AND released_at IS NULL', [id]);
    expect(held.rowCount).toBeGreaterThan(0);
    expect(reasons(await act(una, id, 'withdraw').expect(409))).toEqual(['promise']);
    const next = (await act(una, id, 'revise').expect(201)).body as Quote;
    expect(next).toMatchObject({ state: 'draft', number: 2 });
    const after = await api.owner.query('SELECT 1 FROM zone_uses WHERE quote_id = $1 AND released_at IS NULL', [id]);
    expect(after.rowCount).toBe(0);
    expect((await una('get', `/quotes/${id}`).expect(200)).body).toMatchObject({ state: 'superseded' });
  });

  it('answers two people on one draft: the second is told', async () => {
    const id = await draft();
    const quote = (await una('get', `/quotes/${id}`).expect(200)).body as Quote;
    const body = { runId: quote.runId, kind: 'firm', validUntil: IN_A_MONTH, layers: [{ key: 'only', premium: '1200000' }] };
    await una('put', `/quotes/${id}`).set('If-Match', '"1"').send(body).expect(200);
    await una('put', `/quotes/${id}`).set('If-Match', '"1"').send(body).expect(412);
  });

  /** Gives every zone room for so many lines of 500,000 more. */
  const room = async (lines: number): Promise<void> => {
    await api.owner.query(
      'UPDATE zones z SET capacity = $1 + (SELECT coalesce(sum(amount), 0) FROM zone_uses u WHERE u.zone_id = z.id AND u.released_at IS NULL)',
      [lines * 500_000],
    );
  };

  it('binds as many of fifty at once as the zones hold, and answers the others with the capacity reason', async () => {
    const ids: string[] = [];
    for (let i = 0; i < 50; i += 1) {
      const id = await issued({ kind: 'indication' });
      await bram('post', `/broker/quotes/${id}/order`).send(order).expect(200);
      ids.push(id);
    }
    await room(17);
    const before = ((await una('get', '/book').expect(200)).body as { version: number }).version;
    const answers = await Promise.all(ids.map((id) => act(una, id, 'bind')));
    expect(answers.map(({ status }) => status).filter((status) => status === 200)).toHaveLength(17);
    const refused = answers.filter(({ status }) => status !== 200);
    expect(refused.map(({ status }) => status)).toEqual(refused.map(() => 409));
    expect(new Set(refused.flatMap(reasons))).toEqual(new Set(['capacity']));
    const versions = await api.owner.query<{ number: number }>('SELECT number FROM book_versions WHERE number > $1 ORDER BY number', [before]);
    expect(versions.rows.map(({ number }) => number)).toEqual(Array.from({ length: 17 }, (_unused, i) => before + 1 + i));
    const zones = (await una('get', '/zones').expect(200)).body as { free: string }[];
    expect(zones.map(({ free }) => free)).toEqual(zones.map(() => '0'));
  }, 120_000);

  it('holds capacity for firm quotes issued at once, never more than there is', async () => {
    const ids: string[] = [];
    for (let i = 0; i < 50; i += 1) {
      const id = await draft();
      await act(una, id, 'submit').expect(200);
      ids.push(id);
    }
    await room(7);
    const answers = await Promise.all(ids.map((id) => act(una, id, 'issue')));
    expect(answers.filter(({ status }) => status === 200)).toHaveLength(7);
    expect(answers.filter(({ status }) => status === 409)).toHaveLength(43);
  }, 120_000);
});
