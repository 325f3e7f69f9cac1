import type { DataSource } from 'typeorm';
import type { Attempt, RunDesk, Runs } from '../../api/domain/run/run';
import type { Transaction } from '../../api/domain/shared/transaction';
import type { RunState } from '../../api/domain/vocabulary';
import { RunPayoffRow, RunRow } from '../entities/runs';
import { presentInputs } from '../read-models/run-inputs';
import { managerOf } from '../unit-of-work';
import { outboxRepository } from './outbox';

export function runsRepository(dataSource: DataSource): Runs {
  return {
    present: (transaction, programmeId, terms) => presentInputs(managerOf(transaction), programmeId, terms),
    async create(transaction, run) {
      const { identifiers } = await managerOf(transaction).insert(RunRow, { ...run, terms: run.terms, inputs: run.inputs });
      const id = String(identifiers[0]?.['id']);
      await outboxRepository.put(transaction, 'run.start', id);
      return id;
    },
    async byKey(personId, key) {
      const row = await dataSource.manager.findOneBy(RunRow, { startedBy: personId, idempotencyKey: key });
      return row?.id ?? null;
    },
    async repriced(transaction, quoteId, bookVersion) {
      const rows: unknown[] = await managerOf(transaction).query(
        `SELECT 1 FROM runs WHERE reprices_quote_id = $1 AND book_version >= $2 AND state IN ('queued', 'running', 'succeeded') LIMIT 1`,
        [quoteId, bookVersion],
      );
      return rows.length > 0;
    },
    async repricing(runId) {
      const row = await dataSource.manager.findOneBy(RunRow, { id: runId });
      return row === null || row.repricesQuoteId === null ? null : { quoteId: row.repricesQuoteId, state: row.state };
    },
    async cancel(transaction, runId) {
      const manager = managerOf(transaction);
      const rows: { state: RunState }[] = await manager.query('SELECT state FROM runs WHERE id = $1 FOR UPDATE', [runId]);
      const from = rows[0]?.state;
      if (from === undefined) return null;
      if (from === 'queued') {
        await manager.update(RunRow, { id: runId }, { state: 'cancelled', endedAt: new Date() });
        return { from, to: 'cancelled' };
      }
      if (from === 'running') {
        await manager.update(RunRow, { id: runId }, { state: 'cancelling' });
        return { from, to: 'cancelling' };
      }
      return { from, to: from };
    },
  };
}

/** A worker silent for longer is taken for dead. */
const SILENT_SECONDS = 4;
/** A queued run without a worker for longer has lost its wake, or its worker is busy: waking it again does no harm. */
const UNWOKEN_SECONDS = 5;

const mine = `id = $1 AND attempt = $2`;

export function runDesk(dataSource: DataSource): RunDesk {
  return {
    async begin(runId) {
      const [rows]: [{ attempt: number }[], number] = await dataSource.query(
        `UPDATE runs SET state = 'running', attempt = attempt + 1, heartbeat_at = now(), started_at = coalesce(started_at, now()),
           progress = '{"done": 0, "total": 1, "doing": "reading what the run rests on"}'
         WHERE id = $1 AND (state = 'queued' OR (state = 'running' AND heartbeat_at < now() - make_interval(secs => $2)))
         RETURNING attempt`,
        [runId, SILENT_SECONDS],
      );
      if (rows[0] !== undefined) return { runId, number: rows[0].attempt };
      // Nobody is left to answer a cancel whose worker has died: it ends here.
      await dataSource.query(
        `UPDATE runs SET state = 'cancelled', ended_at = now(), attempt = attempt + 1
         WHERE id = $1 AND state = 'cancelling' AND heartbeat_at < now() - make_interval(secs => $2)`,
        [runId, SILENT_SECONDS],
      );
      return null;
    },
    async beat(attempt, progress) {
      const [rows]: [{ state: RunState }[], number] = await dataSource.query(
        `UPDATE runs SET heartbeat_at = now(), progress = $3 WHERE ${mine} AND state IN ('running', 'cancelling') RETURNING state`,
        [attempt.runId, attempt.number, JSON.stringify(progress)],
      );
      const state = rows[0]?.state;
      return state === undefined ? 'lost' : state === 'cancelling' ? 'cancel' : 'go on';
    },
    succeed: (attempt, result) =>
      dataSource.transaction('READ COMMITTED', async (manager) => {
        const [rows]: [unknown[], number] = await manager.query(
          `UPDATE runs SET state = 'succeeded', result = $3, result_hash = $4, ended_at = now(), heartbeat_at = now(),
             progress = '{"done": 1, "total": 1, "doing": "done"}'
           WHERE ${mine} AND state = 'running' RETURNING id`,
          [attempt.runId, attempt.number, JSON.stringify(result.json), result.hash],
        );
        if (rows.length !== 1) return false;
        for (const [position, { name, values }] of result.series.entries()) {
          const bytes = Buffer.from(values.buffer, values.byteOffset, values.byteLength);
          await manager.insert(RunPayoffRow, { runId: attempt.runId, position, series: name, bytes });
        }
        await outboxRepository.put(manager as unknown as Transaction, 'run.ended', attempt.runId);
        return true;
      }),
    async fail(attempt, words) {
      await end(dataSource, attempt, 'failed', words);
    },
    async cancelled(attempt) {
      await end(dataSource, attempt, 'cancelled', null);
    },
    async release(attempt) {
      await dataSource.query(`UPDATE runs SET state = 'queued', heartbeat_at = now() WHERE ${mine} AND state = 'running'`, [attempt.runId, attempt.number]);
    },
    async forsaken() {
      const rows: { id: string; attempt: number }[] = await dataSource.query(
        `SELECT id, attempt FROM runs WHERE (state = 'queued' AND greatest(created_at, coalesce(heartbeat_at, created_at)) < now() - make_interval(secs => $1))
           OR (state IN ('running', 'cancelling') AND heartbeat_at < now() - make_interval(secs => $2)) ORDER BY created_at`,
        [UNWOKEN_SECONDS, SILENT_SECONDS],
      );
      return rows.map(({ id, attempt }) => ({ runId: id, attempt }));
    },
  };
}

async function end(dataSource: DataSource, attempt: Attempt, state: 'failed' | 'cancelled', words: string | null): Promise<void> {
  await dataSource.transaction('READ COMMITTED', async (manager) => {
    const [rows]: [unknown[], number] = await manager.query(
      `UPDATE runs SET state = $3, error = $4, ended_at = now() WHERE ${mine} AND state IN ('running', 'cancelling') RETURNING id`,
      [attempt.runId, attempt.number, state, words],
    );
    if (rows.length === 1) await outboxRepository.put(manager as unknown as Transaction, 'run.ended', attempt.runId);
  });
}
