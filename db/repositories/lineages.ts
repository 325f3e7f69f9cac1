import type { EntityManager } from 'typeorm';

/** The wanted lineage, or the first of wanted-2, wanted-3 … that nothing of this table has. */
export async function freeLineage(manager: EntityManager, table: 'catalogues' | 'loss_tables', wanted: string): Promise<string> {
  const rows: { lineage: string }[] = await manager.query(`SELECT lineage FROM ${table} WHERE lineage = $1 OR starts_with(lineage, $1 || '-')`, [wanted]);
  const taken = new Set(rows.map(({ lineage }) => lineage));
  if (!taken.has(wanted)) return wanted;
  let suffix = 2;
  while (taken.has(`${wanted}-${suffix}`)) suffix += 1;
  return `${wanted}-${suffix}`;
}
