import { LessThan, type DataSource } from 'typeorm';
import type { SessionRecord, Sessions, SignInAttempts } from '../../api/domain/session/session';
import { SessionRow } from '../entities/people';
import { managerOf } from '../unit-of-work';

/** Failures before the account waits, and how the wait grows: 1, 2, 4 … minutes, an hour at most. */
const FREE_FAILURES = 5;
const FIRST_LOCK_SECONDS = 60;
const LONGEST_LOCK_SECONDS = 3600;
/** After this long without a failure counting starts anew. */
const FORGET_SECONDS = 24 * 3600;

function recordOf(row: SessionRow): SessionRecord {
  const { id, personId, client, expiresAt, rotatedAt, endedAt } = row;
  return { id, personId, client, expiresAt, rotatedAt, endedAt };
}

function over(row: SessionRow, idleSeconds: number): boolean {
  const now = Date.now();
  return row.endedAt !== null || row.expiresAt.getTime() <= now || row.rotatedAt.getTime() + idleSeconds * 1000 <= now;
}

export function sessionsRepository(dataSource: DataSource): Sessions {
  return {
    async open(transaction, session) {
      const manager = managerOf(transaction);
      // What ended long ago is of no use to anybody; the audit trail keeps who signed in when.
      await manager.delete(SessionRow, { personId: session.personId, expiresAt: LessThan(new Date(Date.now() - FORGET_SECONDS * 1000)) });
      await manager.insert(SessionRow, session);
      return recordOf(await manager.findOneByOrFail(SessionRow, { id: session.id }));
    },
    async live(id) {
      const row = await dataSource.manager.findOneBy(SessionRow, { id });
      return row === null || row.endedAt !== null || row.expiresAt.getTime() <= Date.now() ? null : recordOf(row);
    },
    rotate: (id, presented, next, idleSeconds, graceSeconds) =>
      dataSource.transaction('READ COMMITTED', async (manager) => {
        const row = await manager.findOne(SessionRow, { where: { id }, lock: { mode: 'pessimistic_write' } });
        if (row === null || over(row, idleSeconds)) return { outcome: 'unknown' };
        if (row.refreshHash.equals(presented)) {
          const rotated = { refreshHash: next, previousRefreshHash: presented, rotatedAt: new Date() };
          await manager.update(SessionRow, { id }, rotated);
          return { outcome: 'rotated', session: recordOf(Object.assign(row, rotated)) };
        }
        const inGrace = row.rotatedAt.getTime() + graceSeconds * 1000 > Date.now();
        if (inGrace && row.previousRefreshHash?.equals(presented) === true) return { outcome: 'grace', session: recordOf(row) };
        await manager.update(SessionRow, { id }, { endedAt: new Date() });
        return { outcome: 'stolen', session: recordOf(row) };
      }),
    async end(id) {
      await dataSource.manager.query('UPDATE sessions SET ended_at = now() WHERE id = $1 AND ended_at IS NULL', [id]);
    },
    async endAllOf(transaction, personId, exceptId) {
      await managerOf(transaction).query(
        'UPDATE sessions SET ended_at = now() WHERE person_id = $1 AND ended_at IS NULL AND id IS DISTINCT FROM $2::uuid',
        [personId, exceptId],
      );
    },
  };
}

export function signInAttempts(dataSource: DataSource): SignInAttempts {
  return {
    async begin(accountHash) {
      const begun: { seconds: number }[] = await dataSource.query(
        `INSERT INTO sign_in_attempts AS a (account_hash, failures) VALUES ($1, 1)
         ON CONFLICT (account_hash) DO UPDATE SET
           failures = CASE WHEN a.last_failed_at < now() - make_interval(secs => $2) THEN 1 ELSE a.failures + 1 END,
           last_failed_at = now(),
           locked_until = CASE WHEN a.failures + 1 >= $3 AND a.last_failed_at >= now() - make_interval(secs => $2)
             THEN now() + make_interval(secs => least($5, $4 * power(2, least(20, a.failures + 1 - $3)))) END
         WHERE a.locked_until IS NULL OR a.locked_until <= now()
         RETURNING coalesce(extract(epoch FROM locked_until - now()), 0)::float8 AS seconds`,
        [accountHash, FORGET_SECONDS, FREE_FAILURES, FIRST_LOCK_SECONDS, LONGEST_LOCK_SECONDS],
      );
      if (begun[0] !== undefined) return { allowed: true, lockSeconds: Math.max(0, begun[0].seconds) };
      const locked: { seconds: number }[] = await dataSource.query(
        'SELECT extract(epoch FROM locked_until - now())::float8 AS seconds FROM sign_in_attempts WHERE account_hash = $1',
        [accountHash],
      );
      return { allowed: false, lockSeconds: Math.max(1, locked[0]?.seconds ?? 1) };
    },
    async succeeded(accountHash) {
      await dataSource.query('DELETE FROM sign_in_attempts WHERE account_hash = $1 OR last_failed_at < now() - make_interval(secs => $2)', [
        accountHash,
        2 * FORGET_SECONDS,
      ]);
    },
  };
}
