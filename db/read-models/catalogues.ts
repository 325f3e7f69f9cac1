import type { DataSource } from 'typeorm';
import type { Catalogue, CatalogueEvent, CatalogueVersion } from '../../api/contract/catalogues';
import type { CatalogueReader } from '../../api/features/catalogues/port';

interface VersionRow {
  id: string;
  catalogue_id: string;
  number: number;
  state: CatalogueVersion['state'];
  file_name: string;
  content_hash: string;
  event_count: number;
  rate_per_year: number;
  perils: CatalogueVersion['perils'];
  regions: CatalogueVersion['regions'];
  uploaded_by: string;
  uploader: string;
  uploaded_at: Date;
  released_by: string | null;
  releaser: string | null;
  released_at: Date | null;
}

const VERSIONS = `SELECT v.*, u.name AS uploader, r.name AS releaser FROM catalogue_versions v
  JOIN people u ON u.id = v.uploaded_by LEFT JOIN people r ON r.id = v.released_by`;

/** What a search finds in: a backslash, per cent sign or underscore stands for itself. */
const FOUND = `($2::text IS NULL OR strpos(lower(n.event), lower($2)) > 0 OR strpos(lower(e.peril), lower($2)) > 0 OR strpos(lower(e.region), lower($2)) > 0)`;
const EVENTS = `FROM catalogue_events e JOIN catalogue_versions v ON v.id = e.version_id
  JOIN catalogue_event_names n ON n.catalogue_id = v.catalogue_id AND n.event_no = e.event_no WHERE e.version_id = $1 AND ${FOUND}`;

function versionOf(row: VersionRow): CatalogueVersion {
  return {
    id: row.id,
    catalogueId: row.catalogue_id,
    number: row.number,
    state: row.state,
    fileName: row.file_name,
    contentHash: row.content_hash,
    eventCount: row.event_count,
    ratePerYear: row.rate_per_year,
    perils: row.perils,
    regions: row.regions,
    uploadedBy: { id: row.uploaded_by, name: row.uploader },
    uploadedAt: row.uploaded_at.toISOString(),
    releasedBy: row.released_by === null ? null : { id: row.released_by, name: row.releaser ?? '' },
    releasedAt: row.released_at?.toISOString() ?? null,
  };
}

export function catalogueReader(dataSource: DataSource): CatalogueReader {
  const read = async (id: string | null): Promise<Catalogue[]> => {
    const catalogues: { id: string; name: string; description: string }[] = await dataSource.query(
      'SELECT id, name, description FROM catalogues WHERE $1::uuid IS NULL OR id = $1 ORDER BY name',
      [id],
    );
    const rows: VersionRow[] = await dataSource.query(`${VERSIONS} WHERE $1::uuid IS NULL OR v.catalogue_id = $1 ORDER BY v.number DESC`, [id]);
    return catalogues.map(({ id: catalogueId, name, description }) => {
      const versions = rows.filter((row) => row.catalogue_id === catalogueId).map(versionOf);
      return { id: catalogueId, name, description, versions, released: versions.find(({ state }) => state === 'released') ?? null };
    });
  };
  return {
    list: () => read(null),
    byId: async (id) => (await read(id))[0] ?? null,
    async version(versionId) {
      const rows: VersionRow[] = await dataSource.query(`${VERSIONS} WHERE v.id = $1`, [versionId]);
      return rows[0] === undefined ? null : versionOf(rows[0]);
    },
    async events(versionId, { offset, limit, search }) {
      const items: CatalogueEvent[] = await dataSource.query(
        `SELECT n.event, e.rate_per_year AS "ratePerYear", e.peril, e.region, e.season_day AS "seasonDay", e.event_group AS "group",
           e.variance_to_mean AS "varianceToMean" ${EVENTS} ORDER BY e.row_no OFFSET $3 LIMIT $4`,
        [versionId, search ?? null, offset, limit],
      );
      const [count]: { total: number }[] = await dataSource.query(`SELECT count(*)::int AS total ${EVENTS}`, [versionId, search ?? null]);
      return { items, total: count?.total ?? 0 };
    },
  };
}
