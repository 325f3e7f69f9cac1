import type { DataSource } from 'typeorm';
import type { Outbox, OutboxTopic } from '../../api/domain/shared/outbox';
import { OutboxRow } from '../entities/runs';
import { managerOf } from '../unit-of-work';

export const outboxRepository: Outbox = {
  async put(transaction, topic, subjectId) {
    await managerOf(transaction).insert(OutboxRow, { topic, subjectId });
  },
};

const BATCH = 100;

/**
 * Hands waiting wakes over in their order and marks them; what `give` rejects stays for the next time. Several relays may
 * run at once: each locks what it hands over.
 * @returns how many were handed over
 */
export function relayOutbox(dataSource: DataSource, give: (wake: { id: string; topic: OutboxTopic; subjectId: string }) => Promise<void>): Promise<number> {
  return dataSource.transaction('READ COMMITTED', async (manager) => {
    const rows: { id: string; topic: OutboxTopic; subject_id: string }[] = await manager.query(
      `SELECT id, topic, subject_id FROM outbox WHERE dispatched_at IS NULL ORDER BY id LIMIT ${BATCH} FOR UPDATE SKIP LOCKED`,
    );
    for (const row of rows) await give({ id: `outbox-${row.id}`, topic: row.topic, subjectId: row.subject_id });
    if (rows.length > 0) await manager.query('UPDATE outbox SET dispatched_at = now() WHERE id = ANY($1)', [rows.map((row) => row.id)]);
    return rows.length;
  });
}

/** Clears away wakes handed over more than a day ago. */
export async function clearOutbox(dataSource: DataSource): Promise<void> {
  await dataSource.query(`DELETE FROM outbox WHERE dispatched_at < now() - interval '1 day'`);
}
