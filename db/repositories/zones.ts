import type { EntityManager } from 'typeorm';
import { zonesTouched, type Footprint, type Taker, type ZoneArea, type Zones } from '../../api/domain/capacity/capacity';
import { amountInWords, amountOf, unitsOf, type Units } from '../../api/domain/money';
import { Refused } from '../../api/domain/shared/errors';
import { ZoneUseRow } from '../entities/book';
import { managerOf } from '../unit-of-work';

interface LockedZone {
  readonly id: string;
  readonly name: string;
  readonly capacity: string;
}

/** Locks zone rows in the order of their ids: whoever takes capacity comes through here. */
function lockZones(manager: EntityManager, ids: readonly string[]): Promise<LockedZone[]> {
  return manager.query('SELECT id, name, capacity FROM zones WHERE id = ANY($1) ORDER BY id FOR UPDATE', [ids]);
}

async function takenIn(manager: EntityManager, zoneId: string): Promise<Units> {
  const rows: { sum: string }[] = await manager.query(
    'SELECT coalesce(sum(amount), 0)::text AS sum FROM zone_uses WHERE zone_id = $1 AND released_at IS NULL',
    [zoneId],
  );
  return unitsOf(rows[0]?.sum ?? '0');
}

const idsOf = (taker: Taker) => ({
  quoteId: 'quoteId' in taker ? taker.quoteId : null,
  contractId: 'contractId' in taker ? taker.contractId : null,
});

export const zonesRepository: Zones = {
  async touchedBy(transaction, lossTableIds) {
    const manager = managerOf(transaction);
    const tables: { footprint: Footprint[] }[] = await manager.query('SELECT footprint FROM loss_table_versions WHERE id = ANY($1)', [lossTableIds]);
    const zones: ZoneArea[] = await manager.query('SELECT id, name, perils, regions FROM zones ORDER BY id');
    return zonesTouched(zones, tables.flatMap(({ footprint }) => footprint));
  },

  async take(transaction, zones, amount, taker) {
    const manager = managerOf(transaction);
    const locked = await lockZones(manager, zones.map(({ id }) => id));
    const short: string[] = [];
    for (const zone of locked) {
      const free = unitsOf(zone.capacity) - (await takenIn(manager, zone.id));
      if (free < amount) short.push(`${zone.name} has ${amountInWords(free < 0n ? 0n : free)} left and ${amountInWords(amount)} is needed`);
    }
    if (short.length > 0) throw new Refused(short.map((message) => ({ code: 'capacity', message: `Not enough capacity: ${message}.` })));
    for (const zone of locked) await manager.insert(ZoneUseRow, { zoneId: zone.id, ...idsOf(taker), amount: amountOf(amount) });
  },

  async convert(transaction, quoteId, contractId, amount) {
    const manager = managerOf(transaction);
    const held: { zone_id: string }[] = await manager.query(
      'SELECT zone_id FROM zone_uses WHERE quote_id = $1 AND released_at IS NULL',
      [quoteId],
    );
    await lockZones(manager, held.map((use) => use.zone_id));
    await manager.query('UPDATE zone_uses SET released_at = now() WHERE quote_id = $1 AND released_at IS NULL', [quoteId]);
    for (const { zone_id: zoneId } of held) await manager.insert(ZoneUseRow, { zoneId, ...idsOf({ contractId }), amount: amountOf(amount) });
  },

  async release(transaction, quoteId) {
    await managerOf(transaction).query('UPDATE zone_uses SET released_at = now() WHERE quote_id = $1 AND released_at IS NULL', [quoteId]);
  },
};
