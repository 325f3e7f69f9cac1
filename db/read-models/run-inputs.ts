import type { EntityManager } from 'typeorm';
import type { ProgrammeTermsRecord } from '../../api/domain/programme/programme';
import type { PresentInputs, UsedVersion } from '../../api/domain/run/run';

interface TableRow {
  id: string;
  ofId: string;
  name: string;
  number: number;
  contentHash: string;
  catalogue_id: string;
  currency: string;
}

const TABLES = `SELECT v.id, t.id AS "ofId", t.name, v.number, v.content_hash AS "contentHash", t.catalogue_id, v.currency
  FROM loss_table_versions v JOIN loss_tables t ON t.id = v.loss_table_id WHERE v.id = ANY($1) ORDER BY v.id`;

function used({ id, ofId, name, number, contentHash }: TableRow): UsedVersion {
  return { id, ofId, name, number, contentHash };
}

/**
 * What a valuation of these terms would rest on now: the released version of every catalogue that its tables or the book's
 * rest on, the book as it stands without any contract of the programme priced, and the released basis.
 */
export async function presentInputs(manager: EntityManager, programmeId: string, terms: ProgrammeTermsRecord): Promise<PresentInputs> {
  const heads: { version: number }[] = await manager.query('SELECT version FROM book_head');
  const contracts: { id: string; loss_table_ids: string[]; currency: string }[] = await manager.query(
    'SELECT id, loss_table_ids, currency FROM contracts WHERE left_in IS NULL AND programme_id IS DISTINCT FROM $1 ORDER BY id',
    [programmeId],
  );
  const tables: TableRow[] = await manager.query(TABLES, [terms.lossTableIds]);
  const bookTables: TableRow[] = await manager.query(TABLES, [[...new Set(contracts.flatMap((contract) => contract.loss_table_ids))]]);
  const catalogueIds = [...new Set([...tables, ...bookTables].map((table) => table.catalogue_id))];
  const catalogues: (UsedVersion & { released: boolean })[] = await manager.query(
    `SELECT v.id, k.id AS "ofId", k.name, coalesce(v.number, 0) AS number, coalesce(v.content_hash, '') AS "contentHash", v.id IS NOT NULL AS released
     FROM catalogues k LEFT JOIN catalogue_versions v ON v.catalogue_id = k.id AND v.state = 'released'
     WHERE k.id = ANY($1) ORDER BY k.id`,
    [catalogueIds],
  );
  const bases: { id: string; number: number; terms: { currency: string; exchangeRates: Record<string, number>; grid: { states: number } } }[] =
    await manager.query(`SELECT id, number, terms FROM bases WHERE state = 'released'`);
  const basis = bases[0];
  return {
    basis:
      basis === undefined
        ? null
        : {
            id: basis.id,
            number: basis.number,
            terms: basis.terms,
            states: basis.terms.grid.states,
            currencies: [basis.terms.currency, ...Object.keys(basis.terms.exchangeRates)],
          },
    bookVersion: heads[0]?.version ?? 0,
    inputs: {
      catalogues: catalogues.filter(({ released }) => released).map(({ id, ofId, name, number, contentHash }) => ({ id, ofId, name, number, contentHash })),
      lossTables: tables.map(used),
      bookLossTables: bookTables.map(used),
      contractIds: contracts.map(({ id }) => id),
    },
    unreleased: catalogues.filter(({ released }) => !released).map(({ name }) => name),
    currencies: [...new Set([terms.currency, ...[...tables, ...bookTables, ...contracts].map(({ currency }) => currency)])],
  };
}
