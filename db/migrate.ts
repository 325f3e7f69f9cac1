import { createDataSource } from './data-source';
import { applyGrants } from './grants';

function roleOf(url: string | undefined): string | null {
  return url === undefined || url === '' ? null : decodeURIComponent(new URL(url).username);
}

/** Brings the schema up to date under the owner's role and gives the other roles their rights; a process of its own. */
async function main(): Promise<void> {
  const ownerUrl = process.env['DATABASE_OWNER_URL'];
  const application = roleOf(process.env['DATABASE_URL']);
  if (ownerUrl === undefined || application === null) {
    throw new Error('Set DATABASE_OWNER_URL (migrations) and DATABASE_URL (the role that the application works under).');
  }
  const owner = createDataSource(ownerUrl, { poolSize: 1 });
  await owner.initialize();
  try {
    const done = await owner.runMigrations();
    await applyGrants(owner, { application, sealer: roleOf(process.env['SEALER_DATABASE_URL']) });
    process.stdout.write(done.length === 0 ? 'schema is up to date\n' : `migrated: ${done.map((m) => m.name).join(', ')}\n`);
  } finally {
    await owner.destroy();
  }
}

main().catch((error: unknown) => {
  process.stderr.write(`migration failed: ${error instanceof Error ? error.message : String(error)}\n`);
  process.exitCode = 1;
});
