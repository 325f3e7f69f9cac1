import type { Quote } from '../../api/contract/quotes';
import type { MailSummary } from '../../api/contract/house';
import { openTestApi, type TestApi } from '../support/api';
import { IN_A_MONTH, openTestDesk, pricedProgramme, type As, type TestDesk } from '../support/desk';

describe('desk and post room', () => {
  let api: TestApi;
  let desk: TestDesk;
  const as = (email: string): As => desk.as(email);
  let quoteId: string;
  beforeAll(async () => {
    api = await openTestApi();
    desk = await openTestDesk(api);
    const una = as('una.writhe@house.example');
    const { programmeId, runId } = await pricedProgramme(api, desk, una, { writtenLine: 0.2 });
    const body = { runId, kind: 'firm', validUntil: IN_A_MONTH, layers: [{ key: 'only', premium: '1100000' }] };
    quoteId = ((await una('post', `/programmes/${programmeId}/quotes`).send(body).expect(201)).body as Quote).id;
    await una('post', `/quotes/${quoteId}/submit`).send({ note: 'as asked' }).expect(200);
  }, 60_000);
  afterAll(() => api.close());

  const mailsOf = async (email: string): Promise<MailSummary[]> => ((await as(email)('get', '/post-room').expect(200)).body as { items: MailSummary[] }).items;
  const waiting = async (email: string): Promise<string[]> =>
    ((await as(email)('get', '/desk').expect(200)).body as { items: { kind: string }[] }).items.map(({ kind }) => kind);

  it('lets people read the mails of quotes they have part in, and nobody else’s', async () => {
    expect((await mailsOf('una.writhe@house.example')).map(({ kind }) => kind)).toEqual(['referral waiting', 'referral waiting']);
    expect((await mailsOf('sena.orrick@house.example')).map(({ to }) => to)).toEqual(['sena.orrick@house.example']);
    expect(await mailsOf('ivo.lander@house.example')).toEqual([]);
    const [mail] = await mailsOf('una.writhe@house.example');
    await as('ivo.lander@house.example')('get', `/post-room/${mail?.id ?? ''}`).expect(404);
    expect(await mailsOf('adin.keeper@house.example')).toHaveLength(2);
  });

  it('puts on each desk what waits for its person', async () => {
    expect(await waiting('sena.orrick@house.example')).toContain('referral');
    expect(await waiting('una.writhe@house.example')).not.toContain('referral');
    await as('sena.orrick@house.example')('post', `/quotes/${quoteId}/clear`).send({}).expect(200);
    expect(await waiting('una.writhe@house.example')).toContain('approved');
    expect(await waiting('sena.orrick@house.example')).not.toContain('referral');
  });

  it('never shows a code to anyone but its reader', async () => {
    await as('una.writhe@house.example')('post', `/quotes/${quoteId}/issue`).send({}).expect(200);
    await api.owner.query(
      `INSERT INTO mails (kind, contact_id, quote_id, model, subject, message_id) SELECT 'order code', contact_id, id, '{}', 'Your code', '<code@leanyear.invalid>' FROM quotes WHERE id = $1`,
      [quoteId],
    );
    expect((await mailsOf('una.writhe@house.example')).map(({ kind }) => kind)).not.toContain('order code');
  });
});
