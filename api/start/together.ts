import pino from 'pino';
import { createDataSource } from '../../db/data-source';
import { openWorker } from '../../worker/worker';
import { openApp } from '../app';
import { readConfig } from '../config/config';
import { listenUntilStopped } from '../http/listen';
import { memoryQueue } from '../queue/memory';
import { memoryNotices } from '../queue/memory-notices';

/** The API and the worker in one process, on the queue in memory: for machines without Redis. The rows hold every job. */
async function main(): Promise<void> {
  const config = readConfig(process.env);
  const log = pino({ level: config.LOG_LEVEL, base: { part: 'api and worker' } });
  const notices = memoryNotices();
  const app = await openApp(config, log, notices);
  const dataSource = createDataSource(config.DATABASE_URL);
  await dataSource.initialize();
  const worker = await openWorker({ config, log, dataSource, queue: memoryQueue(), notices });
  const close = async (): Promise<void> => {
    await worker.close();
    await dataSource.destroy();
    await app.close();
  };
  await listenUntilStopped({ express: app.express, quiet: () => app.quiet(), close }, { host: config.HOST, port: config.PORT }, log);
}

main().catch((error: unknown) => {
  process.stderr.write(`Leanyear could not start: ${error instanceof Error ? error.message : String(error)}\n`);
  process.exit(1);
});
