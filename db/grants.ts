import type { DataSource } from 'typeorm';

/** Tables whose rows the application may delete; from every other it can only read, add and change. */
const DELETABLE = ['sessions', 'sign_in_attempts', 'quote_layers', 'outbox', 'captured_mails', 'run_blocks'];
/** Rows of these are facts: added and read, never changed. */
const APPEND_ONLY = ['audit_entries', 'book_versions', 'catalogue_event_names', 'catalogue_events', 'loss_rows', 'contract_layers', 'orders', 'run_blocks'];
/** Not the application's to write at all. */
const READ_ONLY = ['audit_seals', 'migrations'];

function quoted(role: string): string {
  return `"${role.replaceAll('"', '""')}"`;
}

/** Gives the application's role and the sealer's role the least they need; run after every migration, idempotent. */
export async function applyGrants(owner: DataSource, roles: { application: string; sealer: string | null }): Promise<void> {
  const rows: { tablename: string }[] = await owner.query(`SELECT tablename FROM pg_tables WHERE schemaname = 'public'`);
  const application = quoted(roles.application);
  await owner.query('REVOKE ALL ON SCHEMA public FROM PUBLIC');
  await owner.query(`GRANT USAGE ON SCHEMA public TO ${application}`);
  await owner.query(`GRANT USAGE ON ALL SEQUENCES IN SCHEMA public TO ${application}`);
  for (const { tablename } of rows) {
    const rights = ['SELECT'];
    if (!READ_ONLY.includes(tablename)) rights.push('INSERT');
    if (!READ_ONLY.includes(tablename) && !APPEND_ONLY.includes(tablename)) rights.push('UPDATE');
    if (DELETABLE.includes(tablename)) rights.push('DELETE');
    await owner.query(`REVOKE ALL ON "${tablename}" FROM ${application}`);
    await owner.query(`GRANT ${rights.join(', ')} ON "${tablename}" TO ${application}`);
  }
  if (roles.sealer === null) return;
  const sealer = quoted(roles.sealer);
  await owner.query(`GRANT USAGE ON SCHEMA public TO ${sealer}`);
  await owner.query(`GRANT SELECT ON audit_entries TO ${sealer}`);
  await owner.query(`GRANT SELECT, INSERT ON audit_seals TO ${sealer}`);
}
