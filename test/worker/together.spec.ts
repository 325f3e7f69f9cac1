import { fork, type ChildProcess } from 'node:child_process';
import { randomBytes } from 'node:crypto';
import { join } from 'node:path';
import type { Run } from '../../api/contract/runs';
import { freePort } from '../../db/local/ports';
import { openTestApi, type TestApi } from '../support/api';
import { LAYER, openTestDesk, type As, type TestDesk } from '../support/desk';

describe('API and worker in one process, without Redis', () => {
  let api: TestApi;
  let desk: TestDesk;
  let una: As;
  const children: ChildProcess[] = [];
  beforeAll(async () => {
    api = await openTestApi();
    desk = await openTestDesk(api);
    una = desk.as('una.writhe@house.example');
  }, 60_000);
  afterAll(async () => {
    for (const child of children) child.kill('SIGKILL');
    await api.close();
  });

  const open = async (): Promise<ChildProcess> => {
    const port = await freePort();
    const secret = randomBytes(32).toString('hex');
    const child = fork(join(__dirname, '../../dist/server/api/start/together.js'), {
      env: {
        PATH: process.env['PATH'],
        NODE_ENV: 'production',
        PORT: String(port),
        DATABASE_URL: api.database.url,
        SEALER_DATABASE_URL: api.database.sealerUrl,
        LEANYEAR_QUEUE: 'memory',
        LEANYEAR_DATA_DIR: api.dataDir,
        LEANYEAR_PUBLIC_URL: `http://127.0.0.1:${port}`,
        JWT_SECRET: secret,
        LINK_SECRET: secret,
        LOG_LEVEL: 'error',
      },
    });
    children.push(child);
    await new Promise<void>((resolve, reject) => {
      child.once('message', () => resolve());
      child.once('exit', (code) => reject(new Error(`it ended with ${String(code)}`)));
    });
    return child;
  };
  const finished = async (id: string): Promise<Run> => {
    for (const end = Date.now() + 40_000; Date.now() < end; ) {
      const run = (await una('get', `/runs/${id}`).expect(200)).body as Run;
      if (['succeeded', 'failed', 'cancelled'].includes(run.state)) return run;
      await new Promise((resolve) => setTimeout(resolve, 100));
    }
    throw new Error('the run did not end');
  };

  it('loses nothing that was acknowledged: a run killed with the process is taken up by the next one', async () => {
    const body = { name: 'Programme', currency: 'EUR', inceptionOn: '2027-01-01', lossTableIds: desk.lossTableIds, layers: [LAYER] };
    const programme = (await una('post', `/submissions/${desk.submissionId}/programmes`).send(body).expect(201)).body as { id: string };
    const first = await open();
    const run = (await una('post', `/programmes/${programme.id}/runs`).send({ states: 300_000 }).expect(201)).body as Run;
    while (((await una('get', `/runs/${run.id}`).expect(200)).body as Run).state === 'queued') await new Promise((resolve) => setTimeout(resolve, 50));
    first.kill('SIGKILL');
    await open();
    const ended = await finished(run.id);
    expect({ state: ended.state, attempt: ended.attempt, flagged: ended.result?.selfCheck.flagged }).toEqual({ state: 'succeeded', attempt: 2, flagged: false });
    const again = (await una('post', `/programmes/${programme.id}/runs`).send({ states: 300_000 }).expect(201)).body as Run;
    expect((await finished(again.id)).resultHash).toBe(ended.resultHash);
    expect(again.inputHash).toBe(run.inputHash);
    const bytes = await una('get', `/runs/${run.id}/payoffs`).buffer(true).parse((res, done) => {
      const chunks: Buffer[] = [];
      res.on('data', (chunk: Buffer) => chunks.push(chunk));
      res.on('end', () => done(null, Buffer.concat(chunks)));
    });
    expect((bytes.body as Buffer).length).toBe(2 * 300_000 * 8);
  }, 90_000);
});
