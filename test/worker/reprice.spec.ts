import type { DataSource } from 'typeorm';
import type { Quote } from '../../api/contract/quotes';
import { memoryNotices } from '../../api/queue/memory-notices';
import { createDataSource } from '../../db/data-source';
import { repricing, type Repricing } from '../../worker/jobs/reprice/reprice';
import { repricingDeps } from '../../worker/worker';
import { openTestApi, type TestApi } from '../support/api';
import { IN_A_MONTH, openTestDesk, pricedProgramme, type As, type TestDesk } from '../support/desk';

describe('when the book moves', () => {
  let api: TestApi;
  let desk: TestDesk;
  let una: As;
  let dataSource: DataSource;
  let own: Repricing;
  beforeAll(async () => {
    api = await openTestApi();
    desk = await openTestDesk(api);
    una = desk.as('una.writhe@house.example');
    dataSource = createDataSource(api.database.url, { poolSize: 4 });
    await dataSource.initialize();
    own = repricing(repricingDeps(dataSource, memoryNotices()));
  }, 60_000);
  afterAll(async () => {
    await dataSource.destroy();
    await api.close();
  });

  const approved = async (): Promise<string> => {
    const { programmeId, runId } = await pricedProgramme(api, desk, una);
    const body = { runId, kind: 'firm', validUntil: IN_A_MONTH, layers: [{ key: 'only', premium: '1100000' }] };
    const id = ((await una('post', `/programmes/${programmeId}/quotes`).send(body).expect(201)).body as Quote).id;
    await una('post', `/quotes/${id}/submit`).send({}).expect(200);
    return id;
  };
  const moveBook = async (): Promise<number> => {
    const { rows } = await api.owner.query<{ version: number }>('UPDATE book_head SET version = version + 1 RETURNING version');
    const version = Number(rows[0]?.version);
    await api.owner.query(`INSERT INTO book_versions (number, cause) VALUES ($1, 'a contract of somebody else')`, [version]);
    return version;
  };
  const read = async (id: string): Promise<Quote> => (await una('get', `/quotes/${id}`).expect(200)).body as Quote;
  /** Ends the re-pricing run of a quote with a technical premium, as the worker would. */
  const end = async (quoteId: string, technicalPremium: number): Promise<string> => {
    const { rows } = await api.owner.query<{ id: string }>(
      `UPDATE runs SET state = 'succeeded', result_hash = repeat('b', 64), result = $2
       WHERE reprices_quote_id = $1 AND state = 'queued' RETURNING id`,
      [
        quoteId,
        JSON.stringify({
          layers: [{ key: 'only', expectedLoss: { value: 1, standardError: 1 }, walkAwayPremium: { value: 1, standardError: 1 }, technicalPremium }],
          selfCheck: { largest: 0, flagged: false, groundUp: 0 },
        }),
      ],
    );
    expect(rows).toHaveLength(1);
    return String(rows[0]?.id);
  };

  it('an approved quote is overtaken, not issued, priced again once, and rests on the new price', async () => {
    const id = await approved();
    const version = await moveBook();
    expect((await read(id)).runStanding).toBe('overtaken');
    const refused = await una('post', `/quotes/${id}/issue`).send({}).expect(409);
    expect(refused.body).toMatchObject({ reasons: [{ code: 'overtaken' }] });
    await own.bookMoved(version);
    await own.bookMoved(version);
    const runId = await end(id, 1_000_000);
    await own.runEnded(runId);
    await own.runEnded(runId);
    const after = await read(id);
    expect(after).toMatchObject({ state: 'approved', runId, runStanding: 'current' });
    await una('post', `/quotes/${id}/issue`).send({}).expect(200);
  });

  it('one that has lost its authority is referred again, and the seniors are told', async () => {
    const id = await approved();
    await own.bookMoved(await moveBook());
    await own.runEnded(await end(id, 1_500_000));
    const after = await read(id);
    expect(after).toMatchObject({ state: 'referred', lowestAdequacy: expect.closeTo(1.1 / 1.5, 6) as number });
    const mails = await api.owner.query(`SELECT 1 FROM mails WHERE quote_id = $1 AND kind = 'referral waiting'`, [id]);
    expect(mails.rowCount).toBe(2);
  });

  it('what lost wakes left undone is caught up once, and a failed re-pricing is not begun again and again', async () => {
    const id = await approved();
    await moveBook();
    await own.catchUp();
    await own.catchUp();
    const runId = await end(id, 1_000_000);
    await own.catchUp();
    await own.catchUp();
    const after = await read(id);
    expect(after).toMatchObject({ state: 'approved', runId, runStanding: 'current' });
    expect(after.history.filter(({ move }) => move.includes('priced again'))).toHaveLength(1);
    await moveBook();
    await own.catchUp();
    await api.owner.query(`UPDATE runs SET state = 'failed', error = 'as it happens' WHERE reprices_quote_id = $1 AND state = 'queued'`, [id]);
    await own.catchUp();
    const runs = await api.owner.query('SELECT state FROM runs WHERE reprices_quote_id = $1 ORDER BY created_at', [id]);
    expect(runs.rows).toEqual([{ state: 'succeeded' }, { state: 'failed' }]);
  });

  it('a re-pricing on an older book that ends later changes nothing', async () => {
    const id = await approved();
    await own.bookMoved(await moveBook());
    const older = await end(id, 1_000_000);
    await own.bookMoved(await moveBook());
    const newer = await end(id, 1_000_001);
    await own.runEnded(newer);
    await own.runEnded(older);
    expect(await read(id)).toMatchObject({ runId: newer, runStanding: 'current' });
  });

  it('a quote whose validity has passed lapses and gives its capacity back; one with the broker is left alone', async () => {
    const [gone, stays] = [await approved(), await approved()];
    for (const id of [gone, stays]) await una('post', `/quotes/${id}/issue`).send({}).expect(200);
    await api.owner.query(`UPDATE quotes SET valid_until = current_date - 1 WHERE id = $1`, [gone]);
    await own.bookMoved(await moveBook());
    await own.lapse();
    expect((await read(gone)).state).toBe('lapsed');
    expect((await read(stays)).state).toBe('issued');
    const held = await api.owner.query<{ quote_id: string }>('SELECT DISTINCT quote_id FROM zone_uses WHERE quote_id = ANY($1) AND released_at IS NULL', [[gone, stays]]);
    expect(held.rows).toEqual([{ quote_id: stays }]);
  });
});
