import { createServer } from 'node:http';
import type { AddressInfo } from 'node:net';
import pino from 'pino';
import { openApp } from './app';
import { readConfig } from './config/config';

/** Lets answers under way finish, then ends connections that stay open by nature. */
const STOP_MILLISECONDS = 5000;

async function main(): Promise<void> {
  const config = readConfig(process.env);
  const log = pino({ level: config.LOG_LEVEL, base: { part: 'api' } });
  const app = await openApp(config, log);
  const server = createServer(app.express);
  await new Promise<void>((resolve, reject) => {
    server.once('error', reject);
    server.listen(config.PORT, config.HOST, resolve);
  });
  const { port } = server.address() as AddressInfo;
  log.info({ port }, 'the API answers');
  process.send?.({ ready: true, port });

  let stopping = false;
  const stop = (): void => {
    if (stopping) return;
    stopping = true;
    const late = setTimeout(() => server.closeAllConnections(), STOP_MILLISECONDS);
    server.close(() => {
      clearTimeout(late);
      app.close().then(
        () => process.exit(0),
        (error: unknown) => {
          log.error({ error: error instanceof Error ? error.message : String(error) }, 'closing failed');
          process.exit(1);
        },
      );
    });
    server.closeIdleConnections();
  };
  process.on('SIGTERM', stop);
  process.on('SIGINT', stop);
  process.on('disconnect', stop);
}

main().catch((error: unknown) => {
  process.stderr.write(`The API could not start: ${error instanceof Error ? error.message : String(error)}\n`);
  process.exit(1);
});
