import { existsSync, mkdirSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { once } from 'node:events';
import type { KeptProcess } from '../../db/local/kept-process';
import { answersOn, freePort } from '../../db/local/ports';
import { accountsTable, readAccounts } from './accounts';
import type { BootstrapContext, RunningLock } from './context';
import { startLocalPostgres, startLocalRedis } from './local-servers';
import { endLeftOver, ownProgram, runOwn } from './own-programs';
import { loadSecrets } from './secrets';
import { serverEnvironment, type Servers } from './server-environment';

async function findServers(context: BootstrapContext, started: KeptProcess[]): Promise<Servers> {
  const { say, dataDir } = context;
  const { DATABASE_URL, DATABASE_OWNER_URL, SEALER_DATABASE_URL, REDIS_URL } = process.env;
  const plan = { dataDir, secrets: loadSecrets(dataDir), say, started };
  if (!DATABASE_URL || !REDIS_URL) say('Starting the servers …');
  const given = DATABASE_URL ? { application: DATABASE_URL, owner: DATABASE_OWNER_URL, sealer: SEALER_DATABASE_URL } : null;
  const [database, redis] = await Promise.all([
    given ?? startLocalPostgres(plan, 'leanyear'),
    REDIS_URL ? REDIS_URL : startLocalRedis(plan),
  ]);
  if (redis === null) say('No Redis here: the worker runs inside the API on a queue in memory. The rows in PostgreSQL hold every job.');
  return { database, redis, own: given === null };
}

/** Sets up, starts the API and the worker and keeps them running until the signal to stop. */
export async function run(context: BootstrapContext, lock: RunningLock): Promise<number> {
  const { root, dataDir, say, signal } = context;
  const started: KeptProcess[] = [];
  const compiled = (file: string): string => join(root, 'dist/server', file);
  const logDir = join(dataDir, 'logs');
  mkdirSync(join(dataDir, 'uploads'), { recursive: true, mode: 0o700 });
  try {
    for (const file of ['api/main.js', 'api/start/together.js', 'worker/main.js']) await endLeftOver(logDir, compiled(file));
    const servers = await findServers(context, started);
    signal.throwIfAborted();
    const wanted = process.env['PORT'];
    const port = await freePort(Number(wanted ?? 4200), ...(wanted === undefined ? [4201, 4202, 4203, 4204] : []));
    if (wanted !== undefined && port !== Number(wanted)) throw new Error(`Port ${wanted} (PORT) is taken on 127.0.0.1.`);
    const env = serverEnvironment({ base: process.env, servers, secrets: loadSecrets(dataDir), dataDir, port });

    if (servers.database.owner === undefined) say('DATABASE_OWNER_URL is not set: the schema is left as it is.');
    else await runOwn('migration', compiled('db/migrate.js'), env, signal);
    const accounts = join(dataDir, 'demo-accounts.json');
    if (env['LEANYEAR_DEMO'] === '1' && !existsSync(accounts)) {
      say('Making the demo (first start) …');
      await runOwn('demo', compiled('api/start/seed.js'), env, signal);
    }

    const api = ownProgram({ name: 'API', file: compiled(servers.redis === null ? 'api/start/together.js' : 'api/main.js'), env, logDir, say, serves: () => answersOn(port) });
    started.push(api);
    await api.start();
    if (servers.redis !== null) {
      const serves = (): Promise<boolean> => Promise.resolve(true);
      const worker = ownProgram({ name: 'worker', file: compiled('worker/main.js'), env, logDir, say, serves });
      started.push(worker);
      await worker.start();
    }
    signal.throwIfAborted();
    const address = String(env['LEANYEAR_PUBLIC_URL']);
    lock.publish(address);
    say(`\nLeanyear is at ${address}\n`);
    if (existsSync(accounts)) say(accountsTable(readAccounts(readFileSync(accounts, 'utf8'))));
    say(`Logs: ${logDir}   Stop: Ctrl-C`);
    if (!signal.aborted) await once(signal, 'abort');
    return 0;
  } finally {
    // In the reverse order of starting: who uses a server is stopped before it.
    for (const process of started.reverse()) await process.stop();
    if (started.length > 0) say('Stopped.');
  }
}
