import { createHash, randomUUID } from 'node:crypto';
import type { EntityManager } from 'typeorm';
import { timesShare, unitsOf, amountOf } from '../../api/domain/money';
import { zonesTouched } from '../../api/domain/capacity/capacity';
import type { DemoCatalogue, DemoContract, DemoLossTable, DemoScenario } from '../../fixtures/demo/scenario';
import { copyRows } from '../copy';

type Ids = ReadonlyMap<string, string>;

const idOf = (ids: Ids, name: string): string => {
  const id = ids.get(name);
  if (id === undefined) throw new Error(`the demo names ${name}, which it does not have`);
  return id;
};

async function insert(manager: EntityManager, table: string, values: Readonly<Record<string, unknown>>): Promise<string> {
  const columns = Object.keys(values);
  const rows: { id: string }[] = await manager.query(
    `INSERT INTO ${table} (${columns.join(', ')}) VALUES (${columns.map((_c, i) => `$${i + 1}`).join(', ')}) RETURNING id`,
    Object.values(values),
  );
  return rows[0]?.id ?? '';
}

export interface SeededCatalogue {
  readonly id: string;
  readonly versionId: string;
  readonly numbers: ReadonlyMap<string, number>;
  readonly events: ReadonlyMap<string, { ratePerYear: number; peril: string; region: string }>;
}

function parts(catalogue: DemoCatalogue, of: 'peril' | 'region'): object[] {
  const sums = new Map<string, { events: number; ratePerYear: number }>();
  for (const event of catalogue.events) {
    const sum = sums.get(event[of]) ?? { events: 0, ratePerYear: 0 };
    sums.set(event[of], { events: sum.events + 1, ratePerYear: sum.ratePerYear + event.ratePerYear });
  }
  return [...sums].map(([name, sum]) => ({ [of]: name, ...sum }));
}

export async function seedCatalogue(manager: EntityManager, catalogue: DemoCatalogue, actuaries: readonly [string, string]): Promise<SeededCatalogue> {
  const { lineage, name, description, events } = catalogue;
  const id = await insert(manager, 'catalogues', { lineage, name, description });
  const versionId = await insert(manager, 'catalogue_versions', {
    catalogue_id: id,
    number: 1,
    state: 'released',
    file_name: `${lineage}.csv`,
    content_hash: createHash('sha256').update(JSON.stringify(events)).digest('hex'),
    event_count: events.length,
    rate_per_year: events.reduce((sum, event) => sum + event.ratePerYear, 0),
    perils: JSON.stringify(parts(catalogue, 'peril')),
    regions: JSON.stringify(parts(catalogue, 'region')),
    uploaded_by: actuaries[0],
    released_by: actuaries[1],
    released_at: new Date(),
  });
  await copyRows(manager, 'catalogue_event_names', ['catalogue_id', 'event_no', 'event'], events.map((event, i) => [id, i, event.event]));
  await copyRows(
    manager,
    'catalogue_events',
    ['version_id', 'row_no', 'event_no', 'rate_per_year', 'peril', 'region', 'season_day'],
    events.map((event, i) => [versionId, i + 1, i, event.ratePerYear, event.peril, event.region, event.seasonDay]),
  );
  return {
    id,
    versionId,
    numbers: new Map(events.map((event, i) => [event.event, i])),
    events: new Map(events.map((event) => [event.event, event])),
  };
}

export async function seedLossTable(
  manager: EntityManager,
  table: DemoLossTable,
  catalogue: SeededCatalogue,
  place: { readonly submissionId: string | null; readonly lineage: string; readonly uploadedBy: string },
): Promise<{ versionId: string; footprint: { peril: string; region: string }[] }> {
  const tableId = await insert(manager, 'loss_tables', {
    lineage: place.lineage,
    submission_id: place.submissionId,
    catalogue_id: catalogue.id,
    name: table.name,
  });
  const touched = new Map<string, { peril: string; region: string }>();
  let yearlyMean = 0;
  for (const row of table.rows) {
    const event = catalogue.events.get(row.event);
    if (event === undefined) continue;
    yearlyMean += event.ratePerYear * row.meanLoss;
    touched.set(`${event.peril}\u0000${event.region}`, { peril: event.peril, region: event.region });
  }
  const footprint = [...touched.values()];
  const versionId = await insert(manager, 'loss_table_versions', {
    loss_table_id: tableId,
    number: 1,
    catalogue_version_id: catalogue.versionId,
    currency: table.currency,
    basis_note: 'Exposure at 30 September 2026, gross of reinsurance, without loss adjustment expense. Invented.',
    file_name: `${place.lineage}.csv`,
    content_hash: createHash('sha256').update(JSON.stringify(table.rows)).digest('hex'),
    row_count: table.rows.length,
    yearly_mean: yearlyMean,
    footprint: JSON.stringify(footprint),
    uploaded_by: place.uploadedBy,
  });
  await copyRows(
    manager,
    'loss_rows',
    ['version_id', 'row_no', 'event_no', 'mean_loss', 'sd', 'common_share', 'exposed_value'],
    table.rows.map((row, i) => [versionId, i + 1, catalogue.numbers.get(row.event) ?? -1, row.meanLoss, row.sd, row.commonShare, row.exposedValue]),
  );
  return { versionId, footprint };
}

export interface SeededTable {
  readonly versionId: string;
  readonly footprint: readonly { peril: string; region: string }[];
}

interface BookPlace {
  readonly cedants: Ids;
  readonly firms: Ids;
  readonly tables: ReadonlyMap<string, SeededTable>;
  readonly zones: readonly { id: string; name: string; perils: string[]; regions: string[] }[];
  readonly rate: (currency: string) => number;
}

function lastDay(inceptionOn: string): string {
  const end = new Date(`${inceptionOn}T00:00:00Z`);
  end.setUTCFullYear(end.getUTCFullYear() + 1);
  end.setUTCDate(end.getUTCDate() - 1);
  return end.toISOString().slice(0, 10);
}

export async function seedContract(manager: EntityManager, contract: DemoContract, place: BookPlace): Promise<string> {
  const tables = contract.lossTables.map((lineage) => place.tables.get(lineage)).filter((table) => table !== undefined);
  const id = await insert(manager, 'contracts', {
    id: randomUUID(),
    name: contract.name,
    cedant_id: idOf(place.cedants, contract.cedant),
    broker_firm_id: idOf(place.firms, contract.brokerFirm),
    currency: contract.currency,
    inception_on: contract.inceptionOn,
    expires_on: lastDay(contract.inceptionOn),
    origin: 'opening book',
    loss_table_ids: tables.map((table) => table.versionId),
    entered_in: 1,
  });
  let needed = 0n;
  for (const [position, layer] of contract.layers.entries()) {
    needed += timesShare(timesShare(unitsOf(String(layer.limit)), layer.line), place.rate(contract.currency));
    await manager.query(
      `INSERT INTO contract_layers (contract_id, position, layer_key, name, limit_amount, attachment, annual_deductible, reinstatements,
         brokerage, signed_line, premium, remaining_limit) VALUES ($1, $2, $3, $4, $5, $6, $7, $8, $9, $10, $11, $12)`,
      [id, position, layer.key, layer.name, layer.limit, layer.attachment, layer.annualDeductible, layer.reinstatements, layer.brokerage, layer.line, layer.premium, layer.remainingLimit],
    );
  }
  const touched = zonesTouched(place.zones, tables.flatMap((table) => table.footprint));
  for (const zone of touched) await insert(manager, 'zone_uses', { zone_id: zone.id, contract_id: id, amount: amountOf(needed) });
  return id;
}

/** People with their grants: the administrator records the first senior's, that senior grants the others. */
export async function seedPeople(manager: EntityManager, demo: DemoScenario, firms: Ids, hashOf: (email: string) => string): Promise<Ids> {
  const ids = new Map<string, string>();
  for (const person of demo.people) {
    ids.set(
      person.email,
      await insert(manager, 'people', {
        name: person.name,
        email: person.email,
        role: person.role,
        firm_id: person.firm === null ? null : idOf(firms, person.firm),
        password_hash: hashOf(person.email),
      }),
    );
  }
  const administrator = demo.people.find(({ role }) => role === 'administrator')?.email ?? '';
  const senior = demo.people.find(({ role }) => role === 'senior underwriter')?.email ?? '';
  for (const { email, grant } of demo.people) {
    if (grant === null) continue;
    await insert(manager, 'grants', {
      person_id: idOf(ids, email),
      granted_by: idOf(ids, email === senior ? administrator : senior),
      largest_line_amount: grant.largestLineAmount,
      largest_line_share: grant.largestLineShare,
      lowest_adequacy: grant.lowestAdequacy,
      below_walk_away: grant.belowWalkAway,
      starts_on: '2026-01-01',
      ends_on: '2027-12-31',
    });
  }
  return ids;
}
