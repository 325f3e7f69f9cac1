import { join } from 'node:path';
import type { Secrets } from './secrets';

export interface Servers {
  readonly database: {
    readonly application: string;
    readonly owner: string | undefined;
    readonly sealer: string | undefined;
  };
  /** null: the queue in memory, with the worker inside the API. */
  readonly redis: string | null;
  /** Whether the database is our own, and may thus be filled with the demo. */
  readonly own: boolean;
}

export interface EnvironmentPlan {
  readonly base: NodeJS.ProcessEnv;
  readonly servers: Servers;
  readonly secrets: Secrets;
  readonly dataDir: string;
  readonly port: number;
}

/**
 * Everything our programs are told, by environment. A variable that the person set wins over what we would choose;
 * the demo, with its captured mail, is off where the database is theirs, unless they ask for it.
 */
export function serverEnvironment({ base, servers, secrets, dataDir, port }: EnvironmentPlan): NodeJS.ProcessEnv {
  const { database, redis, own } = servers;
  return {
    NODE_ENV: 'production',
    HOST: '127.0.0.1',
    LEANYEAR_PUBLIC_URL: `http://127.0.0.1:${port}`,
    LEANYEAR_DEMO: own ? '1' : '0',
    LEANYEAR_QUEUE: redis === null ? 'memory' : 'redis',
    JWT_SECRET: secrets.tokens,
    LINK_SECRET: secrets.links,
    ...base,
    PORT: String(port),
    DATABASE_URL: database.application,
    ...(database.owner === undefined ? {} : { DATABASE_OWNER_URL: database.owner }),
    ...(database.sealer === undefined ? {} : { SEALER_DATABASE_URL: database.sealer }),
    ...(redis === null ? {} : { REDIS_URL: redis }),
    LEANYEAR_DATA_DIR: dataDir,
    LEANYEAR_DEMO_ACCOUNTS: join(dataDir, 'demo-accounts.json'),
  };
}
