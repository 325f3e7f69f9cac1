import { createConnection, createServer } from 'node:net';

/** Whether a port on loopback can be listened on now. */
function tryPort(port: number): Promise<number | null> {
  return new Promise((resolve) => {
    const server = createServer();
    server.once('error', () => resolve(null));
    server.listen({ port, host: '127.0.0.1', exclusive: true }, () => {
      const address = server.address();
      server.close(() => resolve(address !== null && typeof address === 'object' ? address.port : null));
    });
  });
}

/** The first free one of the ports preferred, or one that the system picks. */
export async function freePort(...preferred: readonly number[]): Promise<number> {
  for (const port of [...preferred, 0]) {
    const found = await tryPort(port);
    if (found !== null) return found;
  }
  throw new Error('No free port on 127.0.0.1.');
}

/** Whether something listens on this port of loopback. */
export function answersOn(port: number): Promise<boolean> {
  return new Promise((resolve) => {
    const socket = createConnection({ port, host: '127.0.0.1', timeout: 1000 });
    const done = (answer: boolean) => (): void => {
      socket.destroy();
      resolve(answer);
    };
    socket.once('connect', done(true)).once('error', done(false)).once('timeout', done(false));
  });
}
