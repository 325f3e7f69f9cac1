import { randomBytes, randomUUID } from 'node:crypto';
import { mkdtempSync } from 'node:fs';
import { join } from 'node:path';
import type { Express } from 'express';
import { Client } from 'pg';
import pino from 'pino';
import request from 'supertest';
import { openApp } from '../../api/app';
import { readConfig } from '../../api/config/config';
import type { Role } from '../../api/domain/vocabulary';
import { memoryNotices } from '../../api/queue/memory-notices';
import { hashPassword } from '../../api/features/session/passwords';
import { createTestDatabase, type TestDatabase } from './database';
import { testVariable } from './environment';
import { createTestRedis } from './redis';

export const PASSWORD = 'a long enough phrase 1';

export interface TestPerson {
  readonly id: string;
  readonly email: string;
  readonly role: Role;
  /** Sends with this person's bearer token. */
  readonly as: (method: 'get' | 'post' | 'put' | 'patch' | 'delete', path: string) => request.Test;
}

export interface TestApi {
  readonly express: Express;
  readonly unbound: readonly string[];
  readonly database: TestDatabase;
  /** Under the owner's role, to prepare and to look. */
  readonly owner: Client;
  readonly dataDir: string;
  /** Opens an account and signs it in. */
  person(role: Role, over?: { name?: string; firmId?: string }): Promise<TestPerson>;
  firm(name?: string): Promise<{ id: string; contactId: string }>;
  close(): Promise<void>;
}

let hash: Promise<string> | undefined;

/** An API in this process, on a database and a Redis number of its own. */
export async function openTestApi(env: NodeJS.ProcessEnv = {}): Promise<TestApi> {
  const database = await createTestDatabase();
  const redis = await createTestRedis();
  const dataDir = mkdtempSync(join(testVariable('TEST_DATA_DIR'), 'api-'));
  const config = readConfig({
    NODE_ENV: 'test',
    DATABASE_URL: database.url,
    REDIS_URL: redis.url,
    LEANYEAR_DATA_DIR: dataDir,
    LEANYEAR_PUBLIC_URL: 'http://127.0.0.1:4200',
    LEANYEAR_SIGN_IN_LIMIT: '100000',
    LEANYEAR_RATE_LIMIT: '1000000',
    JWT_SECRET: randomBytes(32).toString('hex'),
    LINK_SECRET: randomBytes(32).toString('hex'),
    LOG_LEVEL: 'error',
    ...env,
  });
  const app = await openApp(config, pino({ level: config.LOG_LEVEL }), memoryNotices());
  const owner = new Client({ connectionString: database.ownerUrl });
  await owner.connect();

  const firm = async (name = `Firm ${randomUUID().slice(0, 8)}`): Promise<{ id: string; contactId: string }> => {
    const made = await owner.query<{ id: string }>('INSERT INTO broker_firms (name) VALUES ($1) RETURNING id', [name]);
    const id = String(made.rows[0]?.id);
    const contact = await owner.query<{ id: string }>(
      `INSERT INTO contacts (firm_id, name, email) VALUES ($1, 'Connie Contact', $2) RETURNING id`,
      [id, `connie-${randomUUID().slice(0, 8)}@broker.example`],
    );
    return { id, contactId: String(contact.rows[0]?.id) };
  };

  const person: TestApi['person'] = async (role, over = {}) => {
    hash ??= hashPassword(PASSWORD);
    const email = `${role.replace(' ', '-')}-${randomUUID().slice(0, 8)}@house.example`;
    const firmId = role === 'broker' ? (over.firmId ?? (await firm()).id) : null;
    const made = await owner.query<{ id: string }>(
      'INSERT INTO people (name, email, role, firm_id, password_hash) VALUES ($1, $2, $3, $4, $5) RETURNING id',
      [over.name ?? `A ${role}`, email, role, firmId, await hash],
    );
    const signedIn = await request(app.express).post('/api/v1/tokens').send({ email, password: PASSWORD }).expect(201);
    const { accessToken } = signedIn.body as { accessToken: string };
    return {
      id: String(made.rows[0]?.id),
      email,
      role,
      as: (method, path) => request(app.express)[method](`/api/v1${path}`).set('Authorization', `Bearer ${accessToken}`),
    };
  };

  return {
    express: app.express,
    unbound: app.unbound,
    database,
    owner,
    dataDir,
    person,
    firm,
    async close() {
      await owner.end();
      await app.close();
      await database.drop();
      await redis.drop();
    },
  };
}
