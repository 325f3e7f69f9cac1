import type { EntityManager } from 'typeorm';
import { readColumns } from '../copy-out';

const UUID = /^[0-9a-f]{8}(-[0-9a-f]{4}){3}-[0-9a-f]{12}$/;

/** Columns of a catalogue version, one entry an event in the order of its file. */
export interface CatalogueColumns {
  readonly lineage: string;
  readonly eventNumbers: Int32Array;
  readonly eventNames: string[];
  readonly ratePerYear: Float64Array;
  readonly peril: string[];
  readonly region: string[];
  /** NaN where the event may happen on any day. */
  readonly seasonDay: Float64Array;
  readonly group: (string | null)[];
  readonly varianceToMean: Float64Array;
}

interface EventRow {
  event_no: number;
  event: string;
  rate_per_year: number;
  peril: string;
  region: string;
  season_day: number | null;
  event_group: string | null;
  variance_to_mean: number | null;
}

export async function catalogueColumns(manager: EntityManager, versionId: string): Promise<CatalogueColumns> {
  const heads: { lineage: string }[] = await manager.query(
    'SELECT k.lineage FROM catalogue_versions v JOIN catalogues k ON k.id = v.catalogue_id WHERE v.id = $1',
    [versionId],
  );
  const rows: EventRow[] = await manager.query(
    `SELECT e.event_no, n.event, e.rate_per_year, e.peril, e.region, e.season_day, e.event_group, e.variance_to_mean
     FROM catalogue_events e
       JOIN catalogue_versions v ON v.id = e.version_id
       JOIN catalogue_event_names n ON n.catalogue_id = v.catalogue_id AND n.event_no = e.event_no
     WHERE e.version_id = $1 ORDER BY e.row_no`,
    [versionId],
  );
  return {
    lineage: heads[0]?.lineage ?? '',
    eventNumbers: Int32Array.from(rows, (row) => row.event_no),
    eventNames: rows.map((row) => row.event),
    ratePerYear: Float64Array.from(rows, (row) => row.rate_per_year),
    peril: rows.map((row) => row.peril),
    region: rows.map((row) => row.region),
    seasonDay: Float64Array.from(rows, (row) => row.season_day ?? Number.NaN),
    group: rows.map((row) => row.event_group),
    varianceToMean: Float64Array.from(rows, (row) => row.variance_to_mean ?? Number.NaN),
  };
}

/** Columns of a loss table version, one entry a row of its file. */
export interface LossColumns {
  readonly lineage: string;
  readonly catalogueId: string;
  readonly currency: string;
  readonly eventNumbers: Int32Array;
  readonly meanLoss: Float64Array;
  readonly sd: Float64Array;
  readonly commonShare: Float64Array;
  /** NaN where there is none. */
  readonly exposedValue: Float64Array;
}

export async function lossColumns(manager: EntityManager, versionId: string): Promise<LossColumns> {
  const heads: { lineage: string; catalogue_id: string; currency: string }[] = await manager.query(
    'SELECT t.lineage, t.catalogue_id, v.currency FROM loss_table_versions v JOIN loss_tables t ON t.id = v.loss_table_id WHERE v.id = $1',
    [versionId],
  );
  const head = heads[0];
  if (head === undefined) throw new Error('a run names a loss table that is not there');
  // COPY takes no parameters: what goes into its text must be an id and nothing else.
  if (!UUID.test(versionId)) throw new Error('a run names a loss table by something that is no id');
  const [eventNumbers, meanLoss, sd, commonShare, exposedValue] = await readColumns(
    manager,
    `SELECT event_no, mean_loss, sd, common_share, exposed_value FROM loss_rows WHERE version_id = '${versionId}' ORDER BY row_no`,
    ['int4', 'float8', 'float8', 'float8', 'float8'],
  );
  const none = new Float64Array(0);
  return {
    lineage: head.lineage,
    catalogueId: head.catalogue_id,
    currency: head.currency,
    eventNumbers: Int32Array.from(eventNumbers ?? none),
    meanLoss: meanLoss ?? none,
    sd: sd ?? none,
    commonShare: commonShare ?? none,
    exposedValue: exposedValue ?? none,
  };
}
