import type { Attempt, RunDesk } from '../../api/domain/run/run';
import { runBlocks } from '../../db/repositories/run-blocks';
import { runDesk } from '../../db/repositories/runs';
import { EngineInputError } from '../../worker/engine';
import { readRunWork } from '../../db/read-models/run-work';
import { GivenUp } from '../../worker/jobs/run/port';
import { runJob, waitingRuns, type RunJobDeps } from '../../worker/jobs/run/run-job';
import { openRunBench, type RunBench } from '../support/run-desk';

const PROGRESS = { done: 1, total: 2, doing: 'something' };
const result = (digit: string) => ({ json: { told: digit }, hash: digit.repeat(64), series: [{ name: 'capital', values: Float64Array.of(1, 2) }] });

describe('attempts at a run', () => {
  let bench: RunBench;
  let desk: RunDesk;
  beforeAll(async () => {
    bench = await openRunBench();
    desk = runDesk(bench.dataSource);
  }, 60_000);
  afterAll(() => bench.close());

  const begun = async (runId: string): Promise<Attempt> => {
    const attempt = await desk.begin(runId);
    if (attempt === null) throw new Error('the run could not be begun');
    return attempt;
  };
  /** As if the worker had been silent for so long. */
  const silence = (runId: string): Promise<unknown> => bench.api.owner.query(`UPDATE runs SET heartbeat_at = now() - interval '1 minute' WHERE id = $1`, [runId]);
  const deps = (over: Partial<RunJobDeps>): RunJobDeps => ({
    desk,
    read: (id) => readRunWork(bench.dataSource, id),
    blocks: runBlocks(bench.dataSource),
    value: () => Promise.reject(new Error('not asked for here')),
    valueBlocks: () => Promise.reject(new Error('not asked for here')),
    flow: () => Promise.reject(new Error('not asked for here')),
    waiting: waitingRuns(),
    publish: () => Promise.resolve(),
    report: () => 'an-id',
    mostAttempts: 3,
    ...over,
  });

  it('gives a run to one of twenty workers, and to nobody while that one lives', async () => {
    const id = await bench.run();
    const attempts = await Promise.all(Array.from({ length: 20 }, () => desk.begin(id)));
    expect(attempts.filter((attempt) => attempt !== null)).toEqual([{ runId: id, number: 1 }]);
    expect(await desk.begin(id)).toBeNull();
  });

  it('takes nothing from an attempt that another has followed', async () => {
    const id = await bench.run();
    const first = await begun(id);
    await silence(id);
    const second = await begun(id);
    expect(second.number).toBe(2);
    expect(await desk.beat(first, PROGRESS)).toBe('lost');
    expect(await desk.succeed(first, result('a'))).toBe(false);
    await desk.fail(first, 'the old one says so');
    await desk.cancelled(first);
    await desk.release(first);
    expect(await bench.read(id)).toMatchObject({ state: 'running', attempt: 2, error: null, resultHash: null });
    expect(await desk.beat(second, PROGRESS)).toBe('go on');
    expect(await desk.succeed(second, result('b'))).toBe(true);
    expect(await desk.succeed(second, result('c'))).toBe(false);
    expect(await desk.begin(id)).toBeNull();
    const stored = await bench.api.owner.query('SELECT state, result, result_hash FROM runs WHERE id = $1', [id]);
    expect(stored.rows).toEqual([{ state: 'succeeded', result: { told: 'b' }, result_hash: 'b'.repeat(64) }]);
    expect(await bench.counts(id)).toMatchObject({ ends: 1, series: 1 });
  });

  it('stores no result of a run that is being cancelled, and ends it where its worker has died', async () => {
    const id = await bench.run();
    const attempt = await begun(id);
    expect((await bench.una('post', `/runs/${id}/cancel`).expect(200)).body).toMatchObject({ state: 'cancelling' });
    expect(await desk.beat(attempt, PROGRESS)).toBe('cancel');
    expect(await desk.succeed(attempt, result('a'))).toBe(false);
    await silence(id);
    expect((await desk.forsaken()).map(({ runId }) => runId)).toContain(id);
    expect(await desk.begin(id)).toBeNull();
    expect(await bench.read(id)).toMatchObject({ state: 'cancelled', resultHash: null });
    expect((await desk.forsaken()).map(({ runId }) => runId)).not.toContain(id);
  });

  it('fails in the engine’s words what cannot be priced', async () => {
    const id = await bench.run();
    await runJob(deps({ value: () => Promise.reject(new EngineInputError('The book alone loses more than the capital.')) }), id);
    expect(await bench.read(id)).toMatchObject({ state: 'failed', attempt: 1, error: 'The book alone loses more than the capital.' });
    expect(await bench.counts(id)).toMatchObject({ ends: 1, series: 0 });
  });

  it('tries unexpected trouble three times, then fails with the id under which it is found', async () => {
    const id = await bench.run();
    const broken = deps({ value: () => Promise.reject(new Error('out of luck')) });
    for (const attempt of [1, 2]) {
      await expect(runJob(broken, id)).rejects.toThrow('out of luck');
      expect(await bench.read(id)).toMatchObject({ state: 'queued', attempt });
    }
    await runJob(broken, id);
    const run = await bench.read(id);
    expect(run).toMatchObject({ state: 'failed', attempt: 3 });
    expect(run.error).toContain('an-id');
  });

  it('does not count a worker’s own stopping as trouble', async () => {
    const id = await bench.run();
    const reported: unknown[] = [];
    const stopping = deps({ value: () => Promise.reject(new GivenUp()), report: (error) => String(reported.push(error)) });
    for (const attempt of [1, 2, 3, 4]) {
      await expect(runJob(stopping, id)).rejects.toThrow(GivenUp);
      expect(await bench.read(id)).toMatchObject({ state: 'queued', attempt, error: null });
    }
    expect(reported).toEqual([]);
  });

  it('gives up a run under which worker after worker dies', async () => {
    const id = await bench.run();
    for (let death = 1; death <= 10; death += 1) {
      expect(await desk.begin(id)).toEqual({ runId: id, number: death });
      await silence(id);
    }
    expect(await desk.begin(id)).toBeNull();
    const run = await bench.read(id);
    expect(run.state).toBe('failed');
    expect(run.error).toMatch(/10 times/);
    expect(await bench.counts(id)).toMatchObject({ ends: 1 });
  });
});
