import type { DataSource, EntityManager } from 'typeorm';
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

async function lockedBy(manager: EntityManager, column: 'refreshHash' | 'previousRefreshHash', hash: Buffer): Promise<SessionRow | null> {
  return manager
    .createQueryBuilder(SessionRow, 'session')
    .setLock('pessimistic_write')
    .where(`session.${column} = :hash`, { hash })
    .getOne();
}

export function sessionsRepository(dataSource: DataSource): Sessions {
  return {
    async open(transaction, session) {
      const manager = managerOf(transaction);
      const { identifiers } = await manager.insert(SessionRow, session);
      const row = await manager.findOneByOrFail(SessionRow, { id: String(identifiers[0]?.['id']) });
      return recordOf(row);
    },
    async live(id) {
      const row = await dataSource.manager.findOneBy(SessionRow, { id });
      return row === null || row.endedAt !== null || row.expiresAt.getTime() <= Date.now() ? null : recordOf(row);
    },
    rotate: (presented, next, idleSeconds, graceSeconds) =>
      dataSource.transaction('READ COMMITTED', async (manager) => {
        const present = await lockedBy(manager, 'refreshHash', presented);
        if (present !== null) {
          if (over(present, idleSeconds)) return { outcome: 'unknown' };
          const rotated = { refreshHash: next, previousRefreshHash: presented, rotatedAt: new Date() };
          await manager.update(SessionRow, { id: present.id }, rotated);
          return { outcome: 'rotated', session: recordOf(Object.assign(present, rotated)) };
        }
        const former = await lockedBy(manager, 'previousRefreshHash', presented);
        if (former === null || over(former, idleSeconds)) return { outcome: 'unknown' };
        if (former.rotatedAt.getTime() + graceSeconds * 1000 > Date.now()) return { outcome: 'grace', session: recordOf(former) };
        await manager.update(SessionRow, { id: former.id }, { endedAt: new Date() });
        return { outcome: 'stolen', session: recordOf(former) };
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
    async secondsLocked(accountHash) {
      const rows: { seconds: number }[] = await dataSource.query(
        'SELECT greatest(0, extract(epoch FROM locked_until - now()))::float8 AS seconds FROM sign_in_attempts WHERE account_hash = $1 AND locked_until IS NOT NULL',
        [accountHash],
      );
      return rows[0]?.seconds ?? 0;
    },
    async failed(accountHash) {
      const rows: { seconds: number }[] = await dataSource.query(
        `INSERT INTO sign_in_attempts AS a (account_hash, failures) VALUES ($1, 1)
         ON CONFLICT (account_hash) DO UPDATE SET
           failures = CASE WHEN a.last_failed_at < now() - make_interval(secs => $2) THEN 1 ELSE a.failures + 1 END,
           last_failed_at = now(),
           locked_until = CASE WHEN a.failures + 1 >= $3 AND a.last_failed_at >= now() - make_interval(secs => $2)
             THEN now() + make_interval(secs => least($5, $4 * power(2, least(20, a.failures + 1 - $3)))) END
         RETURNING coalesce(extract(epoch FROM locked_until - now()), 0)::float8 AS seconds`,
        [accountHash, FORGET_SECONDS, FREE_FAILURES, FIRST_LOCK_SECONDS, LONGEST_LOCK_SECONDS],
      );
      return Math.max(0, rows[0]?.seconds ?? 0);
    },
    async succeeded(accountHash) {
      await dataSource.query('DELETE FROM sign_in_attempts WHERE account_hash = $1', [accountHash]);
    },
  };
}
