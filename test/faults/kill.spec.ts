import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { Client } from 'pg';
import { openHouse, type House, type Part } from '../support/house';

const sleep = (milliseconds: number): Promise<void> => new Promise((resolve) => setTimeout(resolve, milliseconds));

interface RunView {
  readonly id: string;
  readonly state: string;
  readonly attempt: number;
  readonly resultHash: string | null;
  readonly progress: { readonly done: number; readonly total: number };
}

/** Calls the API as Una; a part that is being started again may refuse for a moment. */
function caller(house: House, token: () => Promise<string>) {
  return async <T>(method: string, path: string, body?: object, key?: string): Promise<T> => {
    for (let attempt = 1; ; attempt += 1) {
      try {
        const res = await fetch(`${house.url}/api/v1${path}`, {
          method,
          headers: {
            Authorization: `Bearer ${await token()}`,
            ...(body ? { 'Content-Type': 'application/json' } : {}),
            ...(key === undefined ? {} : { 'Idempotency-Key': key }),
          },
          ...(body ? { body: JSON.stringify(body) } : {}),
        });
        if (res.status >= 500) throw new Error(`${method} ${path}: ${res.status} ${await res.text()}`);
        if (!res.ok) throw new Error(`refused: ${method} ${path}: ${res.status} ${await res.text()}`);
        return (await res.json()) as T;
      } catch (error) {
        if (attempt === 60 || String(error).includes('refused')) throw error;
        await sleep(250);
      }
    }
  };
}

describe('killed in the middle of a run', () => {
  let house: House;
  let call: ReturnType<typeof caller>;
  let programmeId: string;
  let calm: RunView;

  const finished = async (id: string): Promise<RunView> => {
    for (const end = Date.now() + 60_000; Date.now() < end; ) {
      const run = await call<RunView>('GET', `/runs/${id}`);
      if (['succeeded', 'failed', 'cancelled'].includes(run.state)) return run;
      await sleep(100);
    }
    throw new Error('the run did not end');
  };
  const start = (key: string): Promise<RunView> => call<RunView>('POST', `/programmes/${programmeId}/runs`, { states: 600_000 }, key);
  /** Waits until a run is between 30 and 70% done. */
  const middle = async (id: string): Promise<void> => {
    for (const end = Date.now() + 30_000; Date.now() < end; ) {
      const { state, progress } = await call<RunView>('GET', `/runs/${id}`);
      const done = progress.done / progress.total;
      if (state === 'running' && done >= 0.3) {
        expect(done).toBeLessThan(0.7);
        return;
      }
      await sleep(30);
    }
    throw new Error('the run never came to its middle');
  };

  beforeAll(async () => {
    house = await openHouse({ demo: true, env: { LEANYEAR_DEMO_SCALE: '0.1' } });
    const accounts = JSON.parse(readFileSync(join(house.dataDir, 'demo-accounts.json'), 'utf8')) as { email: string; password: string }[];
    const una = accounts.find(({ email }) => email.startsWith('una'));
    let token: string | undefined;
    call = caller(house, async () => {
      if (token !== undefined) return token;
      const res = await fetch(`${house.url}/api/v1/tokens`, {
        method: 'POST',
        headers: { 'Content-Type': 'application/json' },
        body: JSON.stringify({ email: una?.email, password: una?.password }),
      });
      token = ((await res.json()) as { accessToken: string }).accessToken;
      return token;
    });
    const submissions = await call<{ id: string; programmeCount: number }[]>('GET', '/submissions');
    const submission = submissions.find(({ programmeCount }) => programmeCount > 0);
    const programmes = await call<{ id: string }[]>('GET', `/submissions/${submission?.id ?? ''}/programmes`);
    programmeId = programmes[0]?.id ?? '';
    calm = await finished((await start('calm-run')).id);
    expect(calm).toMatchObject({ state: 'succeeded', attempt: 1 });
  }, 120_000);
  afterAll(() => house.stop());

  it.each(['worker', 'api', 'redis', 'postgres'] as readonly Part[])(
    'comes to the same bytes after a kill -9 of %s, and nothing is done twice',
    async (part) => {
      const { id } = await start(`killed-${part}`);
      await middle(id);
      const since = Date.now();
      house.kill(part);
      if (part === 'worker') {
        // Somebody works on it again within ten seconds.
        for (;;) {
          const { state, attempt } = await call<RunView>('GET', `/runs/${id}`);
          if (attempt === 2 || state === 'succeeded') break;
          expect(Date.now() - since).toBeLessThan(10_000);
          await sleep(100);
        }
      }
      const run = await finished(id);
      expect({ state: run.state, resultHash: run.resultHash }).toEqual({ state: 'succeeded', resultHash: calm.resultHash });
      // The same request answers the same run.
      expect((await start(`killed-${part}`)).id).toBe(id);
      const owner = new Client({ connectionString: house.database.owner });
      await owner.connect();
      const counts = await owner
        .query(
          `SELECT (SELECT count(*)::int FROM audit_entries WHERE subject_id = $1 AND action = 'run started') AS acts,
             (SELECT count(*)::int FROM outbox WHERE subject_id = $1 AND topic = 'run.ended') AS ends,
             (SELECT count(*)::int FROM run_payoffs WHERE run_id = $1::uuid) AS series`,
          [id],
        )
        .finally(() => owner.end());
      expect(counts.rows).toEqual([{ acts: 1, ends: 1, series: 6 }]);
    },
    90_000,
  );

  it('frees the worker within two seconds of a cancel', async () => {
    const { id } = await start('to-be-cancelled');
    await middle(id);
    const since = Date.now();
    await call('POST', `/runs/${id}/cancel`);
    const run = await finished(id);
    expect(run.state).toBe('cancelled');
    expect(Date.now() - since).toBeLessThan(2000);
    // The next run is taken at once.
    const next = await call<RunView>('POST', `/programmes/${programmeId}/runs`, { states: 10_000 }, 'after-the-cancel');
    expect((await finished(next.id)).state).toBe('succeeded');
  }, 60_000);
});
