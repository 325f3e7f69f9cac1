import { randomBytes } from 'node:crypto';
import { mkdirSync } from 'node:fs';
import { join } from 'node:path';
import { startLocalPostgres, startLocalRedis } from '../../api/start/local-servers';
import { ownProgram, runOwn } from '../../api/start/own-programs';
import { generateSecrets } from '../../api/start/secrets';
import { serverEnvironment } from '../../api/start/server-environment';
import type { KeptProcess } from '../../db/local/kept-process';
import { answersOn, freePort } from '../../db/local/ports';
import type { DatabaseUrls } from '../../db/local/roles';
import { testVariable } from './environment';

export type Part = 'postgres' | 'redis' | 'api' | 'worker';

export interface House {
  readonly url: string;
  readonly database: DatabaseUrls;
  readonly redisUrl: string;
  /** Holds logs, and demo-accounts.json where the demo was asked for. */
  readonly dataDir: string;
  /** kill -9; the part is started again as it would be in use. */
  readonly kill: (part: Part) => void;
  readonly pid: (part: Part) => number;
  readonly stop: () => Promise<void>;
}

export interface HouseOptions {
  /** Fill it with the demo before it opens. */
  readonly demo?: boolean;
  readonly env?: NodeJS.ProcessEnv;
}

const DIST = join(__dirname, '../../dist/server');

/**
 * A whole house on servers of its own: PostgreSQL, Redis, API and worker, each kept running. For tests that kill parts
 * or walk through the screens; about three seconds. What `npm test` finds left of it, it clears away.
 */
export async function openHouse({ demo = false, env: extra = {} }: HouseOptions = {}): Promise<House> {
  const dataDir = join(testVariable('TEST_DATA_DIR'), 'houses', randomBytes(4).toString('hex'));
  mkdirSync(join(dataDir, 'uploads'), { recursive: true });
  const parts = new Map<Part, KeptProcess>();
  const started: KeptProcess[] = [];
  const stop = async (): Promise<void> => {
    for (const part of started.splice(0).reverse()) await part.stop();
  };
  try {
    const secrets = generateSecrets();
    const plan = { dataDir, secrets, say: () => undefined, started, throwAway: true };
    const database = await startLocalPostgres(plan, 'leanyear');
    const redisUrl = await startLocalRedis(plan);
    const [postgres, redis] = started;
    if (redisUrl === null || postgres === undefined || redis === undefined) throw new Error('A house needs redis-server.');
    parts.set('postgres', postgres).set('redis', redis);
    const port = await freePort();
    const servers = { database, redis: redisUrl, own: demo };
    const base = { PATH: process.env['PATH'], HOME: process.env['HOME'], ...extra };
    const env = serverEnvironment({ base, servers, secrets, dataDir, port });
    const never = new AbortController().signal;
    await runOwn('migration', join(DIST, 'db/migrate.js'), env, never);
    if (demo) await runOwn('demo', join(DIST, 'api/start/seed.js'), env, never);
    const program = (name: string, file: string, serves: () => Promise<boolean>): KeptProcess =>
      ownProgram({ name, file: join(DIST, file), env, logDir: join(dataDir, 'logs'), say: () => undefined, serves });
    parts.set('api', program('API', 'api/main.js', () => answersOn(port)));
    parts.set('worker', program('worker', 'worker/main.js', () => Promise.resolve(true)));
    for (const part of ['api', 'worker'] as const) {
      const kept = parts.get(part);
      if (kept === undefined) continue;
      started.push(kept);
      await kept.start();
    }
    const pid = (part: Part): number => {
      const id = parts.get(part)?.pid;
      if (id === undefined) throw new Error(`The ${part} does not run now.`);
      return id;
    };
    return { url: `http://127.0.0.1:${port}`, database, redisUrl, dataDir, pid, kill: (part) => void process.kill(pid(part), 'SIGKILL'), stop };
  } catch (error) {
    await stop();
    throw error;
  }
}
