import { verifyAudit } from './audit-chain';
import { createDataSource } from './data-source';

/** Verifies the audit chain: `node dist/server/db/verify-audit.js`. Exit code 1 when it is broken. */
async function main(): Promise<void> {
  const url = process.env['DATABASE_URL'];
  if (url === undefined) throw new Error('Set DATABASE_URL.');
  const dataSource = createDataSource(url, { poolSize: 1 });
  await dataSource.initialize();
  try {
    const verdict = await verifyAudit(dataSource);
    process.stdout.write(
      verdict.intact
        ? `the audit chain is intact: ${verdict.sealed} entries\n`
        : `the audit chain breaks at position ${verdict.position}, entry ${verdict.entryId}\n`,
    );
    if (!verdict.intact) process.exitCode = 1;
  } finally {
    await dataSource.destroy();
  }
}

main().catch((error: unknown) => {
  process.stderr.write(`could not verify: ${error instanceof Error ? error.message : String(error)}\n`);
  process.exitCode = 2;
});
