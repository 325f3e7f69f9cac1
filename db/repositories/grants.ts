import type { DataSource, EntityManager } from 'typeorm';
import type { GrantRecord, Grants } from '../../api/domain/grant/grant';
import { NotFound } from '../../api/domain/shared/errors';
import { GrantRow } from '../entities/people';
import { managerOf } from '../unit-of-work';

/** Names the lock under which "is there a first grant" and "make it" are one. */
const FIRST_GRANT_LOCK = 7002;

function recordOf(row: GrantRow): GrantRecord {
  return {
    id: row.id,
    personId: row.personId,
    largestLineAmount: row.largestLineAmount,
    largestLineShare: Number(row.largestLineShare),
    lowestAdequacy: Number(row.lowestAdequacy),
    belowWalkAway: row.belowWalkAway,
    startsOn: row.startsOn,
    endsOn: row.endsOn,
    grantedBy: { id: row.grantedBy.id, name: row.grantedBy.name },
    endedAt: row.endedAt?.toISOString() ?? null,
  };
}

async function find(manager: EntityManager, id: string): Promise<GrantRecord | null> {
  const row = await manager.findOne(GrantRow, { where: { id }, relations: { grantedBy: true } });
  return row === null ? null : recordOf(row);
}

export function grantsRepository(dataSource: DataSource): Grants {
  return {
    async listOf(personId, transaction) {
      const manager = transaction === undefined ? dataSource.manager : managerOf(transaction);
      const rows = await manager.find(GrantRow, { where: { personId }, relations: { grantedBy: true }, order: { createdAt: 'DESC' } });
      return rows.map(recordOf);
    },
    byId: (id) => find(dataSource.manager, id),
    async anySeniorHoldsOne(transaction) {
      const manager = managerOf(transaction);
      await manager.query('SELECT pg_advisory_xact_lock($1)', [FIRST_GRANT_LOCK]);
      const rows: unknown[] = await manager.query(
        `SELECT 1 FROM grants g JOIN people p ON p.id = g.person_id
         WHERE p.role = 'senior underwriter' AND p.active AND g.ended_at IS NULL AND g.ends_on >= current_date LIMIT 1`,
      );
      return rows.length > 0;
    },
    async create(transaction, grant, grantedBy) {
      const manager = managerOf(transaction);
      const { identifiers } = await manager.insert(GrantRow, {
        ...grant,
        largestLineShare: String(grant.largestLineShare),
        lowestAdequacy: String(grant.lowestAdequacy),
        grantedById: grantedBy,
      });
      const record = await find(manager, String(identifiers[0]?.['id']));
      if (record === null) throw new NotFound('grant');
      return record;
    },
    async end(transaction, id) {
      await managerOf(transaction).query('UPDATE grants SET ended_at = now() WHERE id = $1 AND ended_at IS NULL', [id]);
    },
  };
}
