import { createServer } from 'node:http';
import type { AddressInfo } from 'node:net';
import type { Express } from 'express';
import type { Logger } from 'pino';

/** Lets answers under way finish for this long, then ends the connections. */
const STOP_MILLISECONDS = 5000;

export interface Listening {
  readonly express: Express;
  /** Ends what stays open by nature, such as event streams. */
  quiet(): void;
  close(): Promise<void>;
}

/** Answers on a port until the process is asked to stop or its supervisor dies; then closes in order and ends. */
export async function listenUntilStopped(app: Listening, place: { host: string; port: number }, log: Logger): Promise<void> {
  const server = createServer(app.express);
  await new Promise<void>((resolve, reject) => {
    server.once('error', reject);
    server.listen(place.port, place.host, resolve);
  });
  const { port } = server.address() as AddressInfo;
  log.info({ port }, 'the API answers');
  process.send?.({ ready: true, port });

  let stopping = false;
  const stop = (): void => {
    if (stopping) return;
    stopping = true;
    const late = setTimeout(() => server.closeAllConnections(), STOP_MILLISECONDS);
    app.quiet();
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
