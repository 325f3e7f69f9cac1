import { createHash } from 'node:crypto';
import type { DataSource, EntityManager } from 'typeorm';

/** The entry as it is hashed: rendered by the database, so that sealing and verifying see the same text. */
const ENTRY = `jsonb_build_array(e.id, to_char(e.at AT TIME ZONE 'UTC', 'YYYY-MM-DD"T"HH24:MI:SS.US'), e.actor_id, e.actor,
  e.action, e.subject, e.subject_id, e.from_state, e.to_state, e.note)::text`;
const GENESIS = Buffer.alloc(32);
const BATCH = 1000;

function link(previous: Buffer, entry: string): Buffer {
  return createHash('sha256').update(previous).update(entry).digest();
}

async function sealBatch(manager: EntityManager): Promise<number> {
  await manager.query('SELECT pg_advisory_xact_lock(7001)');
  const last: { position: string; hash: Buffer }[] = await manager.query(
    'SELECT position, hash FROM audit_seals ORDER BY position DESC LIMIT 1',
  );
  // Only entries whose transactions have all ended: a late commit can then never fall behind the chain.
  const entries: { id: string; entry: string }[] = await manager.query(
    `SELECT e.id, ${ENTRY} AS entry FROM audit_entries e
     WHERE e.xact < pg_snapshot_xmin(pg_current_snapshot())
       AND NOT EXISTS (SELECT 1 FROM audit_seals s WHERE s.entry_id = e.id)
     ORDER BY e.id LIMIT ${BATCH}`,
  );
  let hash = last[0]?.hash ?? GENESIS;
  let position = Number(last[0]?.position ?? 0);
  for (const { id, entry } of entries) {
    hash = link(hash, entry);
    position += 1;
    await manager.query('INSERT INTO audit_seals (position, entry_id, hash) VALUES ($1, $2, $3)', [position, id, hash]);
  }
  return entries.length;
}

/** Chains every entry whose transaction has ended, under the sealer's role; answers how many. */
export async function sealAudit(sealer: DataSource): Promise<number> {
  let sealed = 0;
  for (;;) {
    const batch = await sealer.transaction('READ COMMITTED', sealBatch);
    sealed += batch;
    if (batch < BATCH) return sealed;
  }
}

export type ChainVerdict = { readonly intact: true; readonly sealed: number } | { readonly intact: false; readonly position: number; readonly entryId: string };

/** Walks the chain from its start and names the first seal that its entry does not bear out. */
export async function verifyAudit(dataSource: DataSource): Promise<ChainVerdict> {
  let hash: Buffer = GENESIS;
  let position = 0;
  for (;;) {
    const rows: { position: string; entry_id: string; hash: Buffer; entry: string | null }[] = await dataSource.query(
      `SELECT s.position, s.entry_id, s.hash, ${ENTRY} AS entry FROM audit_seals s LEFT JOIN audit_entries e ON e.id = s.entry_id
       WHERE s.position > $1 ORDER BY s.position LIMIT ${BATCH}`,
      [position],
    );
    for (const row of rows) {
      const expected = row.entry === null ? null : link(hash, row.entry);
      if (Number(row.position) !== position + 1 || expected === null || !expected.equals(row.hash)) {
        return { intact: false, position: position + 1, entryId: row.entry_id };
      }
      hash = expected;
      position += 1;
    }
    if (rows.length < BATCH) return { intact: true, sealed: position };
  }
}
