import { createHash, randomBytes } from 'node:crypto';
import { join } from 'node:path';
import pino from 'pino';
import { readConfig } from '../../api/config/config';
import type { Run } from '../../api/contract/runs';
import { bullmqQueue } from '../../api/queue/bullmq';
import { memoryQueue } from '../../api/queue/memory';
import { memoryNotices } from '../../api/queue/memory-notices';
import type { WakeQueue } from '../../api/queue/port';
import { canonicalJson } from '../../api/domain/run/canonical';
import { openWorker, type OpenedWorker } from '../../worker/worker';
import { createTestRedis } from '../support/redis';
import { openRunBench, type RunBench } from '../support/run-desk';

const THREAD_FILE = join(__dirname, '../../dist/server/worker/compute/compute-thread.js');
const LONG = 1_000_000;

describe('runs through a worker', () => {
  let bench: RunBench;
  let worker: OpenedWorker | null = null;
  beforeAll(async () => {
    bench = await openRunBench();
  }, 60_000);
  const stop = async (): Promise<void> => {
    const open = worker;
    worker = null;
    await open?.close();
  };
  afterEach(stop);
  afterAll(() => bench.close());

  const open = async (queue: WakeQueue = memoryQueue(50)): Promise<void> => {
    const secret = randomBytes(32).toString('hex');
    const config = readConfig({
      NODE_ENV: 'test', DATABASE_URL: bench.api.database.url, LEANYEAR_DATA_DIR: bench.api.dataDir,
      LEANYEAR_PUBLIC_URL: 'http://127.0.0.1:4200', JWT_SECRET: secret, LINK_SECRET: secret,
    });
    worker = await openWorker({ config, log: pino({ level: 'silent' }), dataSource: bench.dataSource, queue, notices: memoryNotices(), threadFile: THREAD_FILE });
  };
  const until = async (id: string, done: (run: Run) => boolean, seconds = 30): Promise<Run> => {
    for (const end = Date.now() + seconds * 1000; ; ) {
      const run = await bench.read(id);
      if (done(run)) return run;
      if (Date.now() > end) throw new Error(`waited in vain; the run is ${run.state}, attempt ${run.attempt}, ${run.progress.doing}: ${run.error ?? ''}`);
      await new Promise((resolve) => setTimeout(resolve, 30));
    }
  };
  const succeeded = (id: string): Promise<Run> => until(id, ({ state }) => state === 'succeeded');
  const working = (id: string): Promise<Run> => until(id, ({ state, progress }) => state === 'running' && progress.done > 0);

  it('answers the same key with the same run, eight at once too, and refuses it for another programme', async () => {
    const programmeId = await bench.programme();
    const post = (of: string) => bench.una('post', `/programmes/${of}/runs`).set('Idempotency-Key', 'one-click').send({ states: 10_000 });
    const answers = await Promise.all(Array.from({ length: 8 }, () => post(programmeId)));
    expect(answers.map(({ status }) => status)).toEqual(answers.map(() => 201));
    const ids = [...new Set(answers.map(({ body }) => (body as Run).id))];
    expect(ids).toHaveLength(1);
    expect(await bench.counts(String(ids[0]))).toMatchObject({ starts: 1, acts: 1 });
    expect((await post(await bench.programme()).expect(409)).body).toMatchObject({ reasons: [{ code: 'key' }] });
  });

  it('cancels a waiting run at once, and no worker takes it up', async () => {
    const id = await bench.run();
    expect((await bench.una('post', `/runs/${id}/cancel`).send().expect(200)).body).toMatchObject({ state: 'cancelled' });
    await bench.una('post', `/runs/${id}/cancel`).send().expect(409);
    await open();
    const after = await bench.run();
    await succeeded(after);
    expect(await bench.read(id)).toMatchObject({ state: 'cancelled', attempt: 0 });
  }, 40_000);

  it('values a run; its hash is that of what it stored', async () => {
    await open();
    const id = await bench.run();
    const run = await succeeded(id);
    expect(run).toMatchObject({ attempt: 1, standing: 'current', moved: [], result: { states: 10_000 } });
    const answer = await bench.una('get', `/runs/${id}/payoffs`).buffer(true).parse((res, done) => {
      const parts: Buffer[] = [];
      res.on('data', (part: Buffer) => parts.push(part));
      res.on('end', () => done(null, Buffer.concat(parts)));
    }).expect(200).expect('X-Leanyear-Series', 'capital,only');
    const bytes = answer.body as Buffer;
    expect(bytes).toHaveLength(2 * 10_000 * 8);
    expect(createHash('sha256').update(canonicalJson(run.result)).update(bytes).digest('hex')).toBe(run.resultHash);
    const payoffs = new Float64Array(bytes.buffer.slice(bytes.byteOffset + 80_000, bytes.byteOffset + 160_000));
    const mean = payoffs.reduce((sum, payoff) => sum + payoff, 0) / 10_000;
    expect(mean / (run.result?.layers[0]?.expectedLoss.value ?? Number.NaN)).toBeCloseTo(1, 9);
  }, 40_000);

  it('frees its threads within two seconds of a cancel, and takes the next run', async () => {
    await open();
    const id = await bench.run(LONG);
    await working(id);
    const since = Date.now();
    await bench.una('post', `/runs/${id}/cancel`).send().expect(200);
    const next = await bench.run();
    await until(id, ({ state }) => state === 'cancelled');
    expect(Date.now() - since).toBeLessThan(2000);
    await succeeded(next);
    expect(await bench.counts(id)).toMatchObject({ ends: 1, series: 0 });
  }, 60_000);

  it('goes on where a stopped worker left, to the same bytes, on Redis and in memory', async () => {
    const programmeId = await bench.programme();
    await open();
    const calm = await succeeded(await bench.run(120_000, programmeId));
    const id = await bench.run(120_000, programmeId);
    await working(id);
    await stop();
    expect(await bench.read(id)).toMatchObject({ state: 'queued', attempt: 1 });
    const redis = await createTestRedis();
    await open(bullmqQueue(redis.url));
    const resumed = await succeeded(id);
    expect(resumed).toMatchObject({ attempt: 2, inputHash: calm.inputHash, resultHash: calm.resultHash });
    expect(await bench.counts(id)).toMatchObject({ acts: 1, ends: 1, series: 2 });
    await stop();
    await redis.drop();
  }, 90_000);

  it.each([
    ['in memory', () => Promise.resolve({ queue: memoryQueue(50), drop: () => Promise.resolve() })],
    [
      'on Redis',
      async () => {
        const redis = await createTestRedis();
        return { queue: bullmqQueue(redis.url), drop: () => redis.drop() };
      },
    ],
  ])('values a large run in parts, and does no block twice after a worker has stopped: %s', async (_where, openQueue) => {
    const blocks = async (id: string): Promise<{ block: number; xmin: string }[]> =>
      (await bench.api.owner.query<{ block: number; xmin: string }>('SELECT block, xmin FROM run_blocks WHERE run_id = $1 ORDER BY block', [id])).rows;
    const programmeId = await bench.programme();
    const first = await openQueue();
    await open(first.queue);
    const calm = await succeeded(await bench.run(LONG, programmeId));
    const id = await bench.run(LONG, programmeId);
    await until(id, ({ progress }) => progress.done >= 10);
    await stop();
    await first.drop();
    expect(await bench.read(id)).toMatchObject({ state: 'queued', attempt: 1 });
    const kept = await blocks(id);
    expect(kept.length).toBeGreaterThanOrEqual(8);
    const second = await openQueue();
    await open(second.queue);
    await until(id, ({ progress }) => progress.done > kept.length + 5);
    const later = await blocks(id);
    expect(later.filter(({ block }) => kept.some((one) => one.block === block))).toEqual(kept);
    const resumed = await succeeded(id);
    expect(resumed).toMatchObject({ attempt: 2, resultHash: calm.resultHash });
    expect(await blocks(id)).toEqual([]);
    expect(await bench.counts(id)).toMatchObject({ ends: 1, series: 2 });
    await stop();
    await second.drop();
  }, 120_000);

  it('finds a run whose wake was lost, within ten seconds', async () => {
    const id = await bench.run();
    // As after a Redis that lost everything it had taken over.
    await bench.api.owner.query('UPDATE outbox SET dispatched_at = now() WHERE subject_id = $1', [id]);
    await open();
    const since = Date.now();
    await succeeded(id);
    expect(Date.now() - since).toBeLessThan(10_000);
  }, 40_000);
});
