import pino from 'pino';
import { readConfig } from '../api/config/config';
import { bullmqQueue } from '../api/queue/bullmq';
import { redisNotices } from '../api/queue/redis-notices';
import { createDataSource } from '../db/data-source';
import { openWorker } from './worker';

async function main(): Promise<void> {
  const config = readConfig(process.env);
  const log = pino({ level: config.LOG_LEVEL, base: { part: 'worker' } });
  if (config.REDIS_URL === undefined) throw new Error('REDIS_URL is not set; without Redis the worker runs inside the API.');
  const dataSource = createDataSource(config.DATABASE_URL);
  await dataSource.initialize();
  const queue = bullmqQueue(config.REDIS_URL);
  const notices = redisNotices(config.REDIS_URL, (error) => log.warn({ error: error instanceof Error ? error.message : String(error) }, 'notices are held up'));
  const worker = await openWorker({ config, log, dataSource, queue, notices });
  log.info('the worker works');
  process.send?.({ ready: true });

  let stopping = false;
  const stop = (): void => {
    if (stopping) return;
    stopping = true;
    worker
      .close()
      .then(() => notices.close())
      .then(() => dataSource.destroy())
      .then(
        () => process.exit(0),
        (error: unknown) => {
          log.error({ error: error instanceof Error ? error.message : String(error) }, 'closing failed');
          process.exit(1);
        },
      );
  };
  process.on('SIGTERM', stop);
  process.on('SIGINT', stop);
  process.on('disconnect', stop);
}

main().catch((error: unknown) => {
  process.stderr.write(`The worker could not start: ${error instanceof Error ? error.message : String(error)}\n`);
  process.exit(1);
});
