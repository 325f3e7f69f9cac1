import { renameSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { createDataSource } from '../../db/data-source';
import { isInhabited, resetPasswords, seedDemo } from '../../db/seed/seed-demo';
import { makeDemo } from '../../fixtures/demo/make';
import { readConfig } from '../config/config';
import { firstPassword, hashPassword } from '../features/session/passwords';

/** Fills an empty house with the demo and writes its accounts, with the passwords made just now, as its last act. */
async function main(): Promise<void> {
  const config = readConfig(process.env);
  const scale = Number(process.env['LEANYEAR_DEMO_SCALE'] ?? '1');
  const demo = makeDemo(scale);
  const accounts = demo.people.map(({ name, email, role }) => ({ name, email, role, password: firstPassword() }));
  const hashes = new Map(await Promise.all(accounts.map(async ({ email, password }) => [email, await hashPassword(password)] as const)));
  const dataSource = createDataSource(config.DATABASE_URL, { poolSize: 1 });
  await dataSource.initialize();
  try {
    if (await isInhabited(dataSource)) await resetPasswords(dataSource, hashes);
    else await seedDemo(dataSource, demo, (email) => hashes.get(email) ?? '');
  } finally {
    await dataSource.destroy();
  }
  const file = config.LEANYEAR_DEMO_ACCOUNTS ?? join(config.LEANYEAR_DATA_DIR, 'demo-accounts.json');
  writeFileSync(`${file}.new`, JSON.stringify(accounts, null, 2), { mode: 0o600 });
  renameSync(`${file}.new`, file);
}

main().catch((error: unknown) => {
  process.stderr.write(`The demo could not be made: ${error instanceof Error ? (error.stack ?? error.message) : String(error)}\n`);
  process.exit(1);
});
