import { existsSync, mkdirSync, readdirSync, rmSync } from 'node:fs';
import { join } from 'node:path';
import type { KeptProcess } from '../../db/local/kept-process';
import { endLeftOverPostgres } from '../../db/local/postgres';
import { endLeftOverRedis } from '../../db/local/redis';
import type { BootstrapContext } from './context';
import { startLocalPostgres, startLocalRedis } from './local-servers';
import { runOwn } from './own-programs';
import { generateSecrets } from './secrets';

/** Ends every server below a folder of tests, and takes the folder away. */
export async function clearTestFolder(folder: string): Promise<void> {
  const houses = join(folder, 'houses');
  const all = [folder, ...(existsSync(houses) ? readdirSync(houses).map((name) => join(houses, name)) : [])];
  for (const each of all) {
    await endLeftOverRedis(join(each, 'redis'));
    await endLeftOverPostgres(join(each, 'postgres'));
  }
  rmSync(folder, { recursive: true, force: true });
}

/** A folder for this run alone; those of runs that were killed are cleared away, with the servers still in them. */
export async function openTestFolder({ dataDir, holderOf, acquireLock, say }: BootstrapContext): Promise<string> {
  const base = join(dataDir, 'tests');
  mkdirSync(base, { recursive: true });
  for (const name of readdirSync(base)) {
    if (holderOf(join(base, name, 'lock')) !== null) continue;
    say('Clearing away what a test run left that was killed.');
    await clearTestFolder(join(base, name));
  }
  const folder = join(base, String(process.pid));
  mkdirSync(folder);
  await acquireLock(join(folder, 'lock'));
  return folder;
}

/**
 * Starts the servers of a test run, with one migrated database that each test file clones.
 * @returns what test/support reads from the environment
 */
export async function startTestServers(
  context: BootstrapContext,
  folder: string,
  started: KeptProcess[],
): Promise<NodeJS.ProcessEnv> {
  const plan = { dataDir: folder, secrets: generateSecrets(), say: context.say, started, throwAway: true };
  const [database, redis] = await Promise.all([startLocalPostgres(plan, 'leanyear_template'), startLocalRedis(plan)]);
  if (redis === null) throw new Error('The tests need redis-server.');
  const urls = { DATABASE_URL: database.application, DATABASE_OWNER_URL: database.owner, SEALER_DATABASE_URL: database.sealer };
  const migrate = join(context.root, 'dist/server/db/migrate.js');
  await runOwn('migration', migrate, { ...process.env, ...urls }, context.signal);
  return {
    TEST_DATABASE_URL: database.application,
    TEST_DATABASE_OWNER_URL: database.owner,
    TEST_SEALER_DATABASE_URL: database.sealer,
    TEST_REDIS_URL: redis,
    TEST_DATA_DIR: folder,
  };
}
