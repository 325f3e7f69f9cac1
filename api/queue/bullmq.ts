import { FlowProducer, Queue, Worker, type ConnectionOptions, type Job } from 'bullmq';
import { z } from 'zod';
import { FIRST_WAIT_MILLISECONDS, SIDE_BY_SIDE, TRIES, WAKE_TOPICS, laneOf, type Wake, type WakeQueue } from './port';

const jobData = z.object({ topic: z.enum(WAKE_TOPICS), subjectId: z.string() });

/** A worker that was killed is noticed within about six seconds, and its job given to another. */
const RECOVERY = { lockDuration: 5000, stalledInterval: 2000, maxStalledCount: 3 } as const;
const KEEP_SECONDS = 3600;
const PATIENCE_MILLISECONDS = 3000;

function connectionOf(redisUrl: string, forWorker: boolean): ConnectionOptions {
  const url = new URL(redisUrl);
  return {
    host: url.hostname,
    port: Number(url.port || 6379),
    ...(url.username === '' ? {} : { username: decodeURIComponent(url.username) }),
    ...(url.password === '' ? {} : { password: decodeURIComponent(url.password) }),
    db: Number(url.pathname.slice(1) || 0),
    ...(url.protocol === 'rediss:' ? { tls: {} } : {}),
    maxRetriesPerRequest: forWorker ? null : 1,
    retryStrategy: (attempt: number) => Math.min(200 * attempt, 2000),
  };
}

/** A wake that cannot be handed over soon counts as not handed over: its row waits in the outbox, and twice does no harm. */
async function soon<T>(work: Promise<T>): Promise<T> {
  let timer: NodeJS.Timeout | undefined;
  const late = new Promise<never>((_resolve, reject) => {
    timer = setTimeout(() => reject(new Error('Redis does not answer')), PATIENCE_MILLISECONDS);
  });
  try {
    return await Promise.race([work, late]);
  } finally {
    clearTimeout(timer);
  }
}

const dataOf = ({ topic, subjectId }: Wake): z.infer<typeof jobData> => ({ topic, subjectId });

const optionsOf = ({ id, topic }: Wake) => ({
  jobId: id,
  attempts: TRIES[topic],
  backoff: { type: 'exponential', delay: FIRST_WAIT_MILLISECONDS },
  removeOnComplete: { age: KEEP_SECONDS, count: 1000 },
  removeOnFail: { age: KEEP_SECONDS, count: 1000 },
});

const flowJob = (wake: Wake) => ({ name: wake.topic, queueName: laneOf(wake.topic), data: dataOf(wake), opts: optionsOf(wake) });

/** The wake queue on Redis. */
export function bullmqQueue(redisUrl: string, prefix = 'leanyear'): WakeQueue {
  const options = { connection: connectionOf(redisUrl, false), prefix };
  const queues = { runs: new Queue('runs', options), acts: new Queue('acts', options) };
  // Connection trouble is met where a wake is handed over; without a listener it would end the process.
  for (const queue of Object.values(queues)) queue.on('error', () => undefined);
  const flows = new FlowProducer(options);
  flows.on('error', () => undefined);
  const workers: Worker[] = [];
  return {
    async add(wake) {
      await soon(queues[laneOf(wake.topic)].add(wake.topic, dataOf(wake), optionsOf(wake)));
    },
    async addFlow(parent, children) {
      await soon(
        flows.add({
          ...flowJob(parent),
          // A part that fails for good must not hold up the rest for ever: who joins them does what is missing.
          children: children.map((child) => ({ ...flowJob(child), opts: { ...optionsOf(child), ignoreDependencyOnFailure: true } })),
        }),
      );
    },
    async check() {
      await soon(queues.acts.getJobCounts('waiting'));
    },
    work(handlers, onTrouble) {
      const process = async (job: Job): Promise<void> => {
        const { topic, subjectId } = jobData.parse(job.data);
        await handlers[topic](subjectId);
      };
      for (const [name, concurrency] of [['runs', 1], ['acts', SIDE_BY_SIDE]] as const) {
        const worker = new Worker(name, process, { connection: connectionOf(redisUrl, true), prefix, concurrency, ...RECOVERY });
        worker.on('failed', (job, error) => {
          const data = jobData.safeParse(job?.data);
          onTrouble(error, data.success ? data.data : { topic: 'run.start', subjectId: 'unknown' });
        });
        worker.on('error', () => undefined);
        workers.push(worker);
      }
    },
    async close() {
      await Promise.all(workers.map((worker) => worker.close()));
      await Promise.all([...Object.values(queues), flows].map((queue) => queue.close()));
    },
  };
}
