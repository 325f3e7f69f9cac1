import { join } from 'node:path';
import type { KeptProcess } from '../../db/local/kept-process';
import { LogFile } from '../../db/local/log-file';
import { freePort } from '../../db/local/ports';
import { adminUrl, startPostgres } from '../../db/local/postgres';
import { findRedis, redisUrl, startRedis } from '../../db/local/redis';
import { databaseUrls, ensureDatabase, ensureRoles, type DatabaseUrls } from '../../db/local/roles';
import type { Secrets } from './secrets';

export interface LocalServerPlan {
  readonly dataDir: string;
  readonly secrets: Secrets;
  readonly say: (text: string) => void;
  /** Everything started is put here at once, so that it is stopped even when a later step fails. */
  readonly started: KeptProcess[];
  /** Data that is thrown away needs no flush to disk, and is cloned by its owner. */
  readonly throwAway?: boolean;
}

function rolePasswords({ databaseOwner, databaseApplication, databaseSealer }: Secrets): {
  owner: string;
  application: string;
  sealer: string;
} {
  return { owner: databaseOwner, application: databaseApplication, sealer: databaseSealer };
}

/** Starts PostgreSQL with the three roles and one database. */
export async function startLocalPostgres(plan: LocalServerPlan, database: string): Promise<DatabaseUrls & { admin: string }> {
  const { dataDir, secrets, say, throwAway = false } = plan;
  const server = {
    folder: join(dataDir, 'postgres'),
    port: await freePort(),
    adminPassword: secrets.postgresAdmin,
    log: new LogFile(join(dataDir, 'logs/postgres.log')),
    say,
    settings: throwAway ? { fsync: 'off', full_page_writes: 'off' } : {},
  };
  plan.started.push(await startPostgres(server));
  const admin = adminUrl(server);
  await ensureRoles(admin, rolePasswords(secrets), { ownerClones: throwAway });
  await ensureDatabase(admin, database);
  return { ...databaseUrls(server.port, rolePasswords(secrets), database), admin };
}

/** Starts Redis; null when its program is not on this machine. */
export async function startLocalRedis(plan: LocalServerPlan): Promise<string | null> {
  const program = findRedis();
  if (program === null) return null;
  const server = {
    folder: join(plan.dataDir, 'redis'),
    port: await freePort(),
    password: plan.secrets.redis,
    log: new LogFile(join(plan.dataDir, 'logs/redis.log')),
    say: plan.say,
    databases: plan.throwAway === true ? 1000 : 16,
  };
  plan.started.push(await startRedis(server, program));
  return redisUrl(server);
}
