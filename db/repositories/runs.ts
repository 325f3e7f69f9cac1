import type { DataSource, EntityManager } from 'typeorm';
import type { Attempt, NewRun, RunDesk, Runs } from '../../api/domain/run/run';
import { Refused } from '../../api/domain/shared/errors';
import type { Transaction } from '../../api/domain/shared/transaction';
import type { RunState } from '../../api/domain/vocabulary';
import { isTaken } from '../database-errors';
import { RunPayoffRow, RunRow } from '../entities/runs';
import { presentInputs } from '../read-models/run-inputs';
import { managerOf } from '../unit-of-work';
import { outboxRepository } from './outbox';
import { dropBlocks } from './run-blocks';

export function runsRepository(dataSource: DataSource): Runs {
  return {
    present: (transaction, programmeId, terms) => presentInputs(managerOf(transaction), programmeId, terms),
    async create(transaction, run) {
      const id = await insertRun(managerOf(transaction), run);
      await outboxRepository.put(transaction, 'run.start', id);
      return id;
    },
    async byKey(personId, key) {
      const row = await dataSource.manager.findOneBy(RunRow, { startedBy: personId, idempotencyKey: key });
      return row?.id ?? null;
    },
    async repriced(transaction, quoteId, bookVersion) {
      const rows: unknown[] = await managerOf(transaction).query(
        'SELECT 1 FROM runs WHERE reprices_quote_id = $1 AND book_version >= $2 LIMIT 1',
        [quoteId, bookVersion],
      );
      return rows.length > 0;
    },
    async repricing(runId) {
      const row = await dataSource.manager.findOneBy(RunRow, { id: runId });
      return row === null || row.repricesQuoteId === null ? null : { quoteId: row.repricesQuoteId, state: row.state };
    },
    async supersedes(transaction, runId, otherId) {
      const rows: unknown[] = await managerOf(transaction).query(
        'SELECT 1 FROM runs r, runs o WHERE r.id = $1 AND o.id = $2 AND r.book_version > o.book_version AND r.terms = o.terms',
        [runId, otherId],
      );
      return rows.length > 0;
    },
    async unrested() {
      const rows: { id: string }[] = await dataSource.query(
        `SELECT r.id FROM runs r JOIN quotes q ON q.id = r.reprices_quote_id JOIN runs o ON o.id = q.run_id
         WHERE r.state = 'succeeded' AND q.state IN ('draft', 'referred', 'approved') AND r.book_version > o.book_version AND r.terms = o.terms
         ORDER BY r.book_version`,
      );
      return rows.map(({ id }) => id);
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

async function insertRun(manager: EntityManager, run: NewRun): Promise<string> {
  try {
    const { identifiers } = await manager.insert(RunRow, { ...run, terms: run.terms, inputs: run.inputs });
    return String(identifiers[0]?.['id']);
  } catch (error) {
    if (!isTaken(error)) throw error;
    throw new Refused([{ code: 'key', message: 'This Idempotency-Key has just made another run: send a new key with a new request.' }]);
  }
}

/** A worker silent for longer is taken for dead. */
const SILENT_SECONDS = 4;
/** A queued run without a worker for longer has lost its wake, or its worker is busy: waking it again does no harm. */
const UNWOKEN_SECONDS = 5;
/** A run that this many workers died under is what kills them: it is not given to another. */
const MOST_DEATHS = 10;

const mine = `id = $1 AND attempt = $2`;

export function runDesk(dataSource: DataSource): RunDesk {
  return {
    async begin(runId) {
      const [rows]: [{ attempt: number }[], number] = await dataSource.query(
        `UPDATE runs SET state = 'running', attempt = attempt + 1, heartbeat_at = now(), started_at = coalesce(started_at, now()),
           progress = '{"done": 0, "total": 1, "doing": "reading what the run rests on"}'
         WHERE id = $1 AND (state = 'queued' OR (state = 'running' AND attempt < $3 AND heartbeat_at < now() - make_interval(secs => $2)))
         RETURNING attempt`,
        [runId, SILENT_SECONDS, MOST_DEATHS],
      );
      if (rows[0] !== undefined) return { runId, number: rows[0].attempt };
      await endForsaken(dataSource, runId);
      return null;
    },
    async beat(attempt, progress) {
      const [rows]: [{ state: RunState }[], number] = await dataSource.query(
        `UPDATE runs SET heartbeat_at = now(), progress = coalesce($3::jsonb, progress) WHERE ${mine} AND state IN ('running', 'cancelling') RETURNING state`,
        [attempt.runId, attempt.number, progress === null ? null : JSON.stringify(progress)],
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
        await dropBlocks(manager, attempt.runId);
        await outboxRepository.put(manager as unknown as Transaction, 'run.ended', attempt.runId);
        return true;
      }),
    async fail(attempt, words) {
      await end(dataSource, attempt, 'failed', words);
    },
    cancelled: (attempt) => end(dataSource, attempt, 'cancelled', null),
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

/** Ends a run that nobody is left to end: a cancel whose worker has died, or a run that kills its workers. */
async function endForsaken(dataSource: DataSource, runId: string): Promise<void> {
  await dataSource.transaction('READ COMMITTED', async (manager) => {
    const [rows]: [unknown[], number] = await manager.query(
      `UPDATE runs SET ended_at = now(), attempt = attempt + 1, state = CASE state WHEN 'cancelling' THEN 'cancelled' ELSE 'failed' END,
         error = CASE state WHEN 'cancelling' THEN NULL ELSE $3 END
       WHERE id = $1 AND heartbeat_at < now() - make_interval(secs => $2) AND (state = 'cancelling' OR (state = 'running' AND attempt >= $4))
       RETURNING id`,
      [runId, SILENT_SECONDS, `The worker died under this run ${MOST_DEATHS} times. Start it on a smaller grid; if that fails too, report it.`, MOST_DEATHS],
    );
    if (rows.length !== 1) return;
    await dropBlocks(manager, runId);
    await outboxRepository.put(manager as unknown as Transaction, 'run.ended', runId);
  });
}

function end(dataSource: DataSource, attempt: Attempt, state: 'failed' | 'cancelled', words: string | null): Promise<boolean> {
  return dataSource.transaction('READ COMMITTED', async (manager) => {
    const [rows]: [unknown[], number] = await manager.query(
      `UPDATE runs SET state = $3, error = $4, ended_at = now() WHERE ${mine} AND state IN ('running', 'cancelling') RETURNING id`,
      [attempt.runId, attempt.number, state, words],
    );
    if (rows.length !== 1) return false;
    await dropBlocks(manager, attempt.runId);
    await outboxRepository.put(manager as unknown as Transaction, 'run.ended', attempt.runId);
    return true;
  });
}
