import type { DataSource, EntityManager } from 'typeorm';
import type { RunBlocks } from '../../api/domain/run/run';

export function runBlocks(dataSource: DataSource): RunBlocks {
  return {
    async kept(runId) {
      const rows: { block: number }[] = await dataSource.query('SELECT block FROM run_blocks WHERE run_id = $1 ORDER BY block', [runId]);
      return rows.map(({ block }) => block);
    },
    read: (runId) => dataSource.query('SELECT block AS index, bytes FROM run_blocks WHERE run_id = $1 ORDER BY block', [runId]),
    async keep({ runId, number }, index, bytes) {
      await dataSource.query(
        `INSERT INTO run_blocks (run_id, block, bytes)
         SELECT id, $3, $4 FROM runs WHERE id = $1 AND attempt = $2 AND state = 'running' FOR SHARE
         ON CONFLICT DO NOTHING`,
        [runId, number, index, Buffer.from(bytes.buffer, bytes.byteOffset, bytes.byteLength)],
      );
    },
  };
}

/** Once a run has ended nobody asks for its blocks again. */
export async function dropBlocks(manager: EntityManager, runId: string): Promise<void> {
  await manager.query('DELETE FROM run_blocks WHERE run_id = $1', [runId]);
}
