import type { DataSource, EntityManager } from 'typeorm';
import type { Catalogues, CatalogueVersionRecord, KnownEvent } from '../../api/domain/catalogue/catalogue';
import type { CatalogueFileEvent } from '../../api/domain/catalogue/catalogue-file';
import { InvalidInput, NotFound } from '../../api/domain/shared/errors';
import { copyRows } from '../copy';
import { isTaken } from '../database-errors';
import { CatalogueRow, CatalogueVersionRow } from '../entities/data';
import { managerOf } from '../unit-of-work';
import { freeLineage } from './lineages';

const EVENT_COLUMNS = ['version_id', 'row_no', 'event_no', 'rate_per_year', 'peril', 'region', 'season_day', 'event_group', 'variance_to_mean'];

function recordOf(row: CatalogueVersionRow): CatalogueVersionRecord {
  const { id, catalogueId, number, state, uploadedById } = row;
  return { id, catalogueId, number, state, uploadedById };
}

function newest(manager: EntityManager, catalogueId: string): Promise<CatalogueVersionRow | null> {
  return manager.findOne(CatalogueVersionRow, { where: { catalogueId }, order: { number: 'DESC' } });
}

/** Events and rates by one word of theirs, in the order in which the words come up. */
function summed(events: readonly CatalogueFileEvent[], wordOf: (event: CatalogueFileEvent) => string): { word: string; events: number; ratePerYear: number }[] {
  const sums = new Map<string, { word: string; events: number; ratePerYear: number }>();
  for (const event of events) {
    const word = wordOf(event);
    const sum = sums.get(word) ?? { word, events: 0, ratePerYear: 0 };
    sums.set(word, { word, events: sum.events + 1, ratePerYear: sum.ratePerYear + event.ratePerYear });
  }
  return [...sums.values()];
}

/** Numbers of the catalogue's events, those that are new to it included. */
async function numbered(manager: EntityManager, catalogueId: string, events: readonly CatalogueFileEvent[]): Promise<Map<string, number>> {
  const known: { event: string; event_no: number }[] = await manager.query('SELECT event, event_no FROM catalogue_event_names WHERE catalogue_id = $1', [catalogueId]);
  const numbers = new Map(known.map(({ event, event_no }) => [event, event_no]));
  let next = known.reduce((most, { event_no }) => Math.max(most, event_no), -1) + 1;
  const added: [string, number, string][] = [];
  for (const { event } of events) {
    if (numbers.has(event)) continue;
    numbers.set(event, next);
    added.push([catalogueId, next, event]);
    next += 1;
  }
  await copyRows(manager, 'catalogue_event_names', ['catalogue_id', 'event_no', 'event'], added);
  return numbers;
}

export function cataloguesRepository(dataSource: DataSource): Catalogues {
  return {
    async create(transaction, { name, description, lineage }) {
      const manager = managerOf(transaction);
      try {
        const { identifiers } = await manager.insert(CatalogueRow, { name, description, lineage: await freeLineage(manager, 'catalogues', lineage) });
        return { id: String(identifiers[0]?.['id']) };
      } catch (error) {
        if (isTaken(error)) throw new InvalidInput([{ path: 'name', message: 'is the name of another catalogue' }]);
        throw error;
      }
    },
    async lock(transaction, catalogueId) {
      const row = await managerOf(transaction).findOne(CatalogueRow, { where: { id: catalogueId }, lock: { mode: 'pessimistic_write' } });
      if (row === null) throw new NotFound('catalogue');
    },
    async newestVersion(transaction, catalogueId) {
      const row = await newest(managerOf(transaction), catalogueId);
      return row === null ? null : { ...recordOf(row), contentHash: row.contentHash };
    },
    async addVersion(transaction, catalogueId, { fileName, contentHash, events, uploadedBy }) {
      const manager = managerOf(transaction);
      const number = ((await newest(manager, catalogueId))?.number ?? 0) + 1;
      const perils = summed(events, ({ peril }) => peril).map(({ word, ...sum }) => ({ peril: word, ...sum }));
      const regions = summed(events, ({ region }) => region).map(({ word, ...sum }) => ({ region: word, ...sum }));
      const ratePerYear = events.reduce((sum, event) => sum + event.ratePerYear, 0);
      const { identifiers } = await manager.insert(CatalogueVersionRow, {
        catalogueId, number, fileName, contentHash, eventCount: events.length, ratePerYear, perils, regions, uploadedById: uploadedBy,
      });
      const id = String(identifiers[0]?.['id']);
      const numbers = await numbered(manager, catalogueId, events);
      await copyRows(manager, 'catalogue_events', EVENT_COLUMNS, rowsOf(id, events, numbers));
      return { id, number };
    },
    async versionById(transaction, versionId) {
      const row = await managerOf(transaction).findOneBy(CatalogueVersionRow, { id: versionId });
      return row === null ? null : recordOf(row);
    },
    async releasedVersionId(transaction, catalogueId) {
      const row = await managerOf(transaction).findOneBy(CatalogueVersionRow, { catalogueId, state: 'released' });
      return row?.id ?? null;
    },
    async setState(transaction, versionId, state, releasedBy) {
      const release = releasedBy === null ? {} : { releasedById: releasedBy, releasedAt: new Date() };
      await managerOf(transaction).update(CatalogueVersionRow, { id: versionId }, { state, ...release });
    },
    async released(catalogueId) {
      const catalogue = await dataSource.manager.findOneBy(CatalogueRow, { id: catalogueId });
      if (catalogue === null) throw new NotFound('catalogue');
      const version = await dataSource.manager.findOneBy(CatalogueVersionRow, { catalogueId, state: 'released' });
      if (version === null) return null;
      const rows: { event: string; event_no: number; rate_per_year: number; peril: string; region: string }[] = await dataSource.query(
        `SELECT n.event, e.event_no, e.rate_per_year, e.peril, e.region FROM catalogue_events e
         JOIN catalogue_event_names n ON n.catalogue_id = $2 AND n.event_no = e.event_no WHERE e.version_id = $1`,
        [version.id, catalogueId],
      );
      const events = new Map(rows.map((row): [string, KnownEvent] => [row.event, { eventNo: row.event_no, ratePerYear: row.rate_per_year, peril: row.peril, region: row.region }]));
      return { versionId: version.id, number: version.number, name: catalogue.name, events };
    },
  };
}

function* rowsOf(versionId: string, events: readonly CatalogueFileEvent[], numbers: ReadonlyMap<string, number>): Generator<(string | number | null)[]> {
  let rowNo = 0;
  for (const { event, ratePerYear, peril, region, seasonDay, group, varianceToMean } of events) {
    const eventNo = numbers.get(event);
    if (eventNo === undefined) throw new Error('an event has no number');
    yield [versionId, rowNo, eventNo, ratePerYear, peril, region, seasonDay, group, varianceToMean];
    rowNo += 1;
  }
}
