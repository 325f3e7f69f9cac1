import request from 'supertest';
import type { Quote } from '../../api/contract/quotes';
import { linkToken, orderCode } from '../../api/domain/mail/secrets';
import { openTestApi, type TestApi } from '../support/api';
import { IN_A_MONTH, openTestDesk, pricedProgramme, type As, type TestDesk } from '../support/desk';

const LINK_SECRET = 'another secret of the test that is long enough';
const order = { layers: [{ key: 'only', orderShare: 1 }], note: 'as quoted' };
const YESTERDAY = new Date(Date.now() - 24 * 3600 * 1000).toISOString().slice(0, 10);
const TODAY = new Date().toISOString().slice(0, 10);

describe('what a broker can do with a signed link', () => {
  let api: TestApi;
  let desk: TestDesk;
  let una: As;
  let bram: As;
  beforeAll(async () => {
    api = await openTestApi({ LINK_SECRET });
    desk = await openTestDesk(api);
    [una, bram] = ['una.writhe@house.example', 'bram@pell-marchbank.example'].map(desk.as) as [As, As];
  }, 60_000);
  afterAll(() => api.close());

  const act = (id: string, move: string) => una('post', `/quotes/${id}/${move}`).send({ note: 'because' });
  const issued = async (): Promise<{ id: string; linkId: string; link: (method: 'get' | 'post', rest?: string) => request.Test }> => {
    const { programmeId, runId } = await pricedProgramme(api, desk, una);
    const body = { runId, kind: 'firm', validUntil: IN_A_MONTH, layers: [{ key: 'only', premium: '1100000' }] };
    const { id } = (await una('post', `/programmes/${programmeId}/quotes`).send(body).expect(201)).body as Quote;
    await act(id, 'submit').expect(200);
    await act(id, 'issue').expect(200);
    const { rows } = await api.owner.query<{ id: string }>('SELECT id FROM quote_links WHERE quote_id = $1', [id]);
    const linkId = String(rows[0]?.id);
    const token = linkToken(LINK_SECRET, linkId);
    return { id, linkId, link: (method, rest = '') => request(api.express)[method](`/api/v1/links/${token}${rest}`) };
  };
  const codeOf = async (linkId: string): Promise<string> => {
    const { rows } = await api.owner.query<{ id: string }>('SELECT id FROM link_codes WHERE link_id = $1 ORDER BY created_at DESC LIMIT 1', [linkId]);
    return orderCode(LINK_SECRET, String(rows[0]?.id));
  };
  const other = (code: string): string => (code === '111111' ? '222222' : '111111');
  const reasons = (res: request.Response): string[] => (res.body as { reasons: { code: string }[] }).reasons.map(({ code }) => code);
  const state = async (id: string): Promise<string> => ((await una('get', `/quotes/${id}`).expect(200)).body as Quote).state;

  it('reads as often as it likes, and reading acts on nothing', async () => {
    const { id, link } = await issued();
    const before = (await una('get', `/quotes/${id}`).expect(200)).body as Quote;
    for (let i = 0; i < 3; i += 1) await link('get').expect(200);
    await link('get', '/order').expect((res) => expect(res.status).toBeGreaterThanOrEqual(404));
    const after = (await una('get', `/quotes/${id}`).expect(200)).body as Quote;
    expect([after.version, after.history]).toEqual([before.version, before.history]);
    expect((await link('get').expect(200)).text).not.toMatch(/technical|walkAway|expectedLoss|adequacy|capital/i);
  });

  it('a token of another id, of another secret or cut short names nothing', async () => {
    const { linkId } = await issued();
    const signature = linkToken(LINK_SECRET, linkId).split('.')[1] ?? '';
    const someone = '00000000-0000-4000-8000-000000000000';
    for (const token of [`${someone}.${signature}`, linkToken('quite another secret of a quite different house', linkId), `${linkId}.${signature.slice(0, 20)}`, linkId, linkToken(LINK_SECRET, someone)]) {
      await request(api.express).get(`/api/v1/links/${token}`).expect(404);
      await request(api.express).post(`/api/v1/links/${token}/code`).expect(404);
    }
  });

  it('five wrong codes close a code, the right one included; a new one opens the way', async () => {
    const { id, linkId, link } = await issued();
    await link('post', '/code').expect(202);
    const code = await codeOf(linkId);
    for (let i = 0; i < 5; i += 1) await link('post', '/order').send({ ...order, code: other(code) }).expect(422);
    await link('post', '/order').send({ ...order, code }).expect(422);
    expect(await state(id)).toBe('issued');
    await link('post', '/code').expect(202);
    await link('post', '/order').send({ ...order, code }).expect(422);
    await link('post', '/order').send({ ...order, code: await codeOf(linkId) }).expect(200);
    expect(await state(id)).toBe('ordered');
  });

  it('a code ends after ten minutes, and five are sent in an hour', async () => {
    const { linkId, link } = await issued();
    const sent = await link('post', '/code').expect(202);
    expect(sent.body).toEqual({ sentTo: expect.stringMatching(/^.…@/) as string, expiresInSeconds: 600 });
    await api.owner.query(`UPDATE link_codes SET expires_at = now() - interval '1 second' WHERE link_id = $1`, [linkId]);
    await link('post', '/order').send({ ...order, code: await codeOf(linkId) }).expect(422);
    for (let i = 0; i < 4; i += 1) await link('post', '/code').expect(202);
    expect(reasons(await link('post', '/code').expect(409))).toEqual(['codes']);
  });

  it('of five orders at once with one code, one is taken', async () => {
    const { id, linkId, link } = await issued();
    await link('post', '/code').expect(202);
    const code = await codeOf(linkId);
    const answers = await Promise.all(Array.from({ length: 5 }, () => link('post', '/order').send({ ...order, code })));
    expect(answers.map(({ status }) => status).filter((status) => status === 200)).toHaveLength(1);
    expect(answers.map(({ status }) => status).filter((status) => status >= 500)).toEqual([]);
    const mails = await api.owner.query(`SELECT 1 FROM mails WHERE quote_id = $1 AND kind = 'broker answered'`, [id]);
    expect(mails.rowCount).toBe(1);
  });

  it('neither code nor order where nothing can be answered any more', async () => {
    const { id, linkId, link } = await issued();
    await link('post', '/code').expect(202);
    await bram('post', `/broker/quotes/${id}/order`).send(order).expect(200);
    expect(reasons(await link('post', '/code').expect(409))).toEqual(['state']);
    expect(reasons(await link('post', '/order').send({ ...order, code: await codeOf(linkId) }).expect(409))).toEqual(['state']);
  });

  it('orders on the last day of validity and not after it', async () => {
    const { id } = await issued();
    await api.owner.query('UPDATE quotes SET valid_until = $2 WHERE id = $1', [id, YESTERDAY]);
    const late = await bram('post', `/broker/quotes/${id}/order`).send(order).expect(409);
    expect(reasons(late)).toEqual(['validity']);
    expect((await bram('get', `/broker/quotes/${id}`).expect(200)).body).toMatchObject({ mayAnswer: false });
    await api.owner.query('UPDATE quotes SET valid_until = $2 WHERE id = $1', [id, TODAY]);
    await bram('post', `/broker/quotes/${id}/order`).send(order).expect(200);
  });

  it.each([
    ['a layer that is not quoted', [{ key: 'other', orderShare: 1 }]],
    ['a layer twice', [{ key: 'only', orderShare: 1 }, { key: 'only', orderShare: 0.5 }]],
    ['nothing', []],
    ['no share', [{ key: 'only', orderShare: 0 }]],
    ['more than the whole', [{ key: 'only', orderShare: 1.01 }]],
  ])('refuses an order of %s at its field', async (_name, layers) => {
    const { id } = await issued();
    const refused = await bram('post', `/broker/quotes/${id}/order`).send({ layers, note: '' }).expect(422);
    expect((refused.body as { errors: { path: string }[] }).errors[0]?.path).toMatch(/^layers/);
    expect(await state(id)).toBe('issued');
  });

  it('a link taken back or run out says so in words', async () => {
    const revised = await issued();
    await act(revised.id, 'revise').expect(201);
    const gone = await revised.link('get').expect(409);
    expect(reasons(gone)).toEqual(['link revoked']);
    expect(gone.text).toContain('newer version');
    const old = await issued();
    await api.owner.query(`UPDATE quote_links SET expires_at = now() - interval '1 second' WHERE id = $1`, [old.linkId]);
    expect(reasons(await old.link('get').expect(409))).toEqual(['link expired']);
    expect(reasons(await old.link('post', '/code').expect(409))).toEqual(['link expired']);
  });

  it('the link opens until a month after the validity', async () => {
    const { linkId } = await issued();
    const { rows } = await api.owner.query<{ days: number }>('SELECT (expires_at::date - $2::date)::int AS days FROM quote_links WHERE id = $1', [linkId, IN_A_MONTH]);
    expect(rows[0]?.days).toBe(31);
  });
});
