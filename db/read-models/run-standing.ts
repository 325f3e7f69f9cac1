import type { EntityManager } from 'typeorm';
import type { RunInputs } from '../../api/domain/run/run';
import type { RunStanding } from '../../api/domain/vocabulary';

export interface Standing {
  readonly standing: RunStanding;
  /** What has moved since, in words. */
  readonly moved: readonly string[];
}

export type StandingsOf = (manager: EntityManager, runIds: readonly string[]) => Promise<Map<string, Standing>>;

interface Row {
  id: string;
  inputs: RunInputs;
  programme_version: number;
  present_version: number;
  basis_id: string;
  book_version: number;
  engine_version: string;
}

interface Present {
  readonly released: ReadonlyMap<string, { id: string; number: number }>;
  readonly newest: ReadonlyMap<string, { id: string; number: number }>;
  readonly basis: { id: string; number: number } | null;
  readonly book: number;
  readonly engineVersion: string;
}

async function present(manager: EntityManager, engineVersion: string): Promise<Present> {
  const released: { of: string; id: string; number: number }[] = await manager.query(
    `SELECT catalogue_id AS of, id, number FROM catalogue_versions WHERE state = 'released'`,
  );
  const newest: { of: string; id: string; number: number }[] = await manager.query(
    'SELECT DISTINCT ON (loss_table_id) loss_table_id AS of, id, number FROM loss_table_versions ORDER BY loss_table_id, number DESC',
  );
  const bases: { id: string; number: number }[] = await manager.query(`SELECT id, number FROM bases WHERE state = 'released'`);
  const heads: { version: number }[] = await manager.query('SELECT version FROM book_head');
  return {
    released: new Map(released.map((row) => [row.of, row])),
    newest: new Map(newest.map((row) => [row.of, row])),
    basis: bases[0] ?? null,
    book: heads[0]?.version ?? 0,
    engineVersion,
  };
}

function movedBeside(row: Row, now: Present): string[] {
  const moved: string[] = [];
  for (const { ofId, id, name } of row.inputs.catalogues) {
    const released = now.released.get(ofId);
    if (released === undefined) moved.push(`the catalogue ${name} has been withdrawn`);
    else if (released.id !== id) moved.push(`the catalogue ${name} is now at version ${released.number}`);
  }
  for (const { ofId, id, name } of row.inputs.lossTables) {
    const newest = now.newest.get(ofId);
    if (newest !== undefined && newest.id !== id) moved.push(`the loss table ${name} is now at version ${newest.number}`);
  }
  if (now.basis === null) moved.push('no house basis is released');
  else if (now.basis.id !== row.basis_id) moved.push(`the house basis is now number ${now.basis.number}`);
  if (row.programme_version !== row.present_version) moved.push('the programme’s terms have changed');
  if (row.engine_version !== now.engineVersion) moved.push('the valuation itself has a new version');
  return moved;
}

/**
 * How runs stand to the present: stale when anything but the book has moved, overtaken when only the book has, else
 * current.
 */
export function standingsUnder(engineVersion: string): StandingsOf {
  return async (manager, runIds) => {
    if (runIds.length === 0) return new Map();
    const rows: Row[] = await manager.query(
      `SELECT r.id, r.inputs, r.programme_version, p.version AS present_version, r.basis_id, r.book_version, r.engine_version
       FROM runs r JOIN programmes p ON p.id = r.programme_id WHERE r.id = ANY($1)`,
      [runIds],
    );
    const now = await present(manager, engineVersion);
    return new Map(
      rows.map((row): [string, Standing] => {
        const moved = movedBeside(row, now);
        if (moved.length > 0) return [row.id, { standing: 'stale', moved }];
        if (row.book_version === now.book) return [row.id, { standing: 'current', moved }];
        return [row.id, { standing: 'overtaken', moved: [`the book has moved from version ${row.book_version} to ${now.book}`] }];
      }),
    );
  };
}
