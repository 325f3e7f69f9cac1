import pino from 'pino';
import { openApp } from './app';
import { readConfig } from './config/config';
import { listenUntilStopped } from './http/listen';
import { redisNotices } from './queue/redis-notices';

/** The API in a process of its own, beside a worker and a Redis. */
async function main(): Promise<void> {
  const config = readConfig(process.env);
  const log = pino({ level: config.LOG_LEVEL, base: { part: 'api' } });
  if (config.REDIS_URL === undefined) throw new Error('REDIS_URL is not set; without Redis the API and the worker are started together.');
  const notices = redisNotices(config.REDIS_URL, (error) => log.warn({ error: error instanceof Error ? error.message : String(error) }, 'notices are held up'));
  const app = await openApp(config, log, notices);
  const close = async (): Promise<void> => {
    await app.close();
    await notices.close();
  };
  await listenUntilStopped({ express: app.express, quiet: () => app.quiet(), close }, { host: config.HOST, port: config.PORT }, log);
}

main().catch((error: unknown) => {
  process.stderr.write(`The API could not start: ${error instanceof Error ? error.message : String(error)}\n`);
  process.exit(1);
});
