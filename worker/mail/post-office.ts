import { SMTPServer } from 'smtp-server';
import type { AddressInfo } from 'node:net';

/** One delivery as the local post office took it. */
export interface Delivery {
  readonly recipients: readonly string[];
  readonly raw: Buffer;
}

const LARGEST_BYTES = 10 * 1024 * 1024;

/**
 * A real SMTP server on loopback that stands in for the hosted one in demo mode and in tests: it takes every mail,
 * keeps it through `keep` and passes nothing on. A mail counts as taken only once it is kept.
 */
export async function openPostOffice(
  keep: (delivery: Delivery) => Promise<void>,
): Promise<{ readonly url: string; close(): Promise<void> }> {
  const server = new SMTPServer({
    authOptional: true,
    disabledCommands: ['STARTTLS', 'AUTH'],
    size: LARGEST_BYTES,
    logger: false,
    onData(stream, session, done) {
      const chunks: Buffer[] = [];
      stream.on('data', (chunk: Buffer) => chunks.push(chunk));
      stream.on('end', () => {
        if (stream.sizeExceeded) {
          done(Object.assign(new Error('the mail is too large'), { responseCode: 552 }));
          return;
        }
        keep({ recipients: session.envelope.rcptTo.map((to) => to.address), raw: Buffer.concat(chunks) }).then(
          () => done(),
          (error: unknown) =>
            done(Object.assign(error instanceof Error ? error : new Error(String(error)), { responseCode: 451 })),
        );
      });
    },
  });
  await new Promise<void>((resolve, reject) => {
    server.server.once('error', reject);
    server.listen(0, '127.0.0.1', resolve);
  });
  const { port } = server.server.address() as AddressInfo;
  return {
    url: `smtp://127.0.0.1:${port}`,
    close: () => new Promise((resolve) => server.close(() => resolve())),
  };
}
