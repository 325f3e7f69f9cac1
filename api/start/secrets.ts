import { randomBytes } from 'node:crypto';
import { existsSync, readFileSync, renameSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { z } from 'zod';

const secret = z.string().regex(/^[0-9a-f]{32,}$/);
const secretsFile = z.object({
  postgresAdmin: secret,
  databaseOwner: secret,
  databaseApplication: secret,
  databaseSealer: secret,
  redis: secret,
  tokens: secret,
  links: secret,
});
export type Secrets = z.infer<typeof secretsFile>;

export function generateSecrets(): Secrets {
  const make = (): string => randomBytes(32).toString('hex');
  const names = Object.keys(secretsFile.shape) as (keyof Secrets)[];
  return Object.fromEntries(names.map((name) => [name, make()])) as Secrets;
}

/** The secrets of this checkout: made once, readable by their owner alone, never in the repository. */
export function loadSecrets(dataDir: string): Secrets {
  const path = join(dataDir, 'secrets.json');
  if (!existsSync(path)) {
    // Written beside and renamed: a start cut short must not leave half the passwords of a database behind.
    writeFileSync(`${path}.new`, JSON.stringify(generateSecrets(), null, 2), { mode: 0o600 });
    renameSync(`${path}.new`, path);
  }
  return secretsFile.parse(JSON.parse(readFileSync(path, 'utf8')));
}
