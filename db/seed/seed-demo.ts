import type { DataSource, EntityManager } from 'typeorm';
import type { BasisTerms } from '../../api/contract/house';
import type { ProgrammeTermsRecord } from '../../api/domain/programme/programme';
import type { DemoScenario, DemoSubmission } from '../../fixtures/demo/scenario';
import { seedCatalogue, seedContract, seedLossTable, seedPeople, type SeededCatalogue, type SeededTable } from './demo-rows';

function basisTerms({ basis }: DemoScenario): BasisTerms {
  const { risklessRate, seed, states, ...rest } = basis;
  return { ...rest, exchangeRates: { ...basis.exchangeRates }, discounting: { mode: 'anchored', risklessRate }, returnOnAssets: null, grid: { seed, states } };
}

async function ids(manager: EntityManager, sql: string, rows: readonly (readonly unknown[])[]): Promise<string[]> {
  const made: string[] = [];
  for (const row of rows) made.push((await manager.query<{ id: string }[]>(sql, [...row]))[0]?.id ?? '');
  return made;
}

/** A submission, and where it renews a contract: its loss tables, a programme on that contract's terms, and the tie between the two. */
async function seedSubmission(
  manager: EntityManager,
  demo: DemoScenario,
  submission: DemoSubmission,
  known: { cedants: Map<string, string>; firms: Map<string, string>; people: ReadonlyMap<string, string>; catalogues: ReadonlyMap<string, SeededCatalogue>; contracts: ReadonlyMap<string, string> },
): Promise<void> {
  const contacts: { id: string }[] = await manager.query('SELECT id FROM contacts WHERE firm_id = $1 ORDER BY name LIMIT 1', [known.firms.get(submission.brokerFirm)]);
  const owner = known.people.get(submission.owner);
  const made: { id: string }[] = await manager.query(
    `INSERT INTO submissions (reference, cedant_id, broker_firm_id, contact_id, treaty_year, inception_on, currency, note, owner_id)
     VALUES ('S' || $4::int || '-' || lpad(nextval('submission_numbers')::text, 4, '0'), $1, $2, $3, $4::int, $5, $6, $7, $8) RETURNING id`,
    [known.cedants.get(submission.cedant), known.firms.get(submission.brokerFirm), contacts[0]?.id, submission.treatyYear, submission.inceptionOn, submission.currency, submission.note, owner],
  );
  const submissionId = made[0]?.id ?? '';
  const contract = demo.book.find(({ cedant, name }) => cedant === submission.cedant && name === submission.renews);
  if (contract === undefined) return;
  const lossTableIds: string[] = [];
  for (const lineage of contract.lossTables) {
    const table = demo.lossTables.find((one) => one.lineage === lineage);
    const catalogue = table === undefined ? undefined : known.catalogues.get(table.catalogue);
    if (table === undefined || catalogue === undefined) continue;
    const place = { submissionId, lineage: `${lineage}-${submission.treatyYear}`, uploadedBy: owner ?? '' };
    lossTableIds.push((await seedLossTable(manager, table, catalogue, place)).versionId);
  }
  const terms: ProgrammeTermsRecord = {
    name: contract.name,
    currency: contract.currency,
    inceptionOn: submission.inceptionOn,
    lossTableIds,
    layers: contract.layers.map((layer) => ({
      key: layer.key,
      name: layer.name,
      limit: String(layer.limit),
      attachment: String(layer.attachment),
      annualDeductible: String(layer.annualDeductible),
      reinstatements: [...layer.reinstatements],
      brokerage: layer.brokerage,
      writtenLine: layer.line,
    })),
  };
  const programmes: { id: string }[] = await manager.query('INSERT INTO programmes (submission_id, terms, updated_by) VALUES ($1, $2, $3) RETURNING id', [submissionId, JSON.stringify(terms), owner]);
  await manager.query('UPDATE contracts SET programme_id = $1 WHERE id = $2', [programmes[0]?.id, known.contracts.get(`${contract.cedant}\u0000${contract.name}`)]);
}

/**
 * Fills an empty house with the demo, whole or not at all.
 * @param hashOf password hash of an account, by e-mail
 */
export function seedDemo(dataSource: DataSource, demo: DemoScenario, hashOf: (email: string) => string): Promise<void> {
  return dataSource.transaction(async (manager) => {
    const firmIds = await ids(manager, 'INSERT INTO broker_firms (name) VALUES ($1) RETURNING id', demo.brokerFirms.map(({ name }) => [name]));
    const firms = new Map(demo.brokerFirms.map(({ name }, i) => [name, firmIds[i] ?? '']));
    for (const firm of demo.brokerFirms) {
      await ids(manager, 'INSERT INTO contacts (firm_id, name, email) VALUES ($1, $2, $3) RETURNING id', firm.contacts.map(({ name, email }) => [firms.get(firm.name), name, email]));
    }
    const cedantIds = await ids(manager, 'INSERT INTO cedants (name, territory) VALUES ($1, $2) RETURNING id', demo.cedants.map(({ name, territory }) => [name, territory]));
    const cedants = new Map(demo.cedants.map(({ name }, i) => [name, cedantIds[i] ?? '']));
    const people = await seedPeople(manager, demo, firms, hashOf);
    const actuaries = demo.people.filter(({ role }) => role === 'actuary').map(({ email }) => people.get(email) ?? '');
    const pair = [actuaries[0] ?? '', actuaries[1] ?? actuaries[0] ?? ''] as const;

    const catalogues = new Map<string, SeededCatalogue>();
    for (const catalogue of demo.catalogues) catalogues.set(catalogue.lineage, await seedCatalogue(manager, catalogue, pair));
    const tables = new Map<string, SeededTable>();
    for (const table of demo.lossTables) {
      const catalogue = catalogues.get(table.catalogue);
      if (catalogue === undefined) throw new Error(`the demo has no catalogue ${table.catalogue}`);
      tables.set(table.lineage, await seedLossTable(manager, table, catalogue, { submissionId: null, lineage: table.lineage, uploadedBy: pair[0] }));
    }

    const terms = basisTerms(demo);
    await manager.query(`INSERT INTO bases (number, state, terms, created_by, released_by, released_at) VALUES (1, 'released', $1, $2, $3, now())`, [JSON.stringify(terms), ...pair]);
    const zoneIds = await ids(manager, 'INSERT INTO zones (name, perils, regions, capacity) VALUES ($1, $2, $3, $4) RETURNING id', demo.zones.map((zone) => [zone.name, zone.perils, zone.regions, zone.capacity]));
    const zones = demo.zones.map((zone, i) => ({ id: zoneIds[i] ?? '', name: zone.name, perils: [...zone.perils], regions: [...zone.regions] }));

    await manager.query(`INSERT INTO book_versions (number, cause) VALUES (1, 'opening book')`);
    const rate = (currency: string): number => (currency === terms.currency ? 1 : (terms.exchangeRates[currency] ?? 1));
    const contracts = new Map<string, string>();
    for (const contract of demo.book) {
      contracts.set(`${contract.cedant}\u0000${contract.name}`, await seedContract(manager, contract, { cedants, firms, tables, zones, rate }));
    }
    await manager.query('UPDATE book_head SET version = 1');
    for (const submission of demo.submissions) await seedSubmission(manager, demo, submission, { cedants, firms, people, catalogues, contracts });
    await manager.query(`INSERT INTO audit_entries (actor, action, subject) VALUES ('system', 'demo set up', 'house')`);
  });
}

/** Whether anybody has an account here. */
export async function isInhabited(dataSource: DataSource): Promise<boolean> {
  const rows: unknown[] = await dataSource.query('SELECT 1 FROM people LIMIT 1');
  return rows.length > 0;
}

/** Gives demo accounts that are here already new passwords: where the file with the old ones has been lost. */
export async function resetPasswords(dataSource: DataSource, hashes: ReadonlyMap<string, string>): Promise<void> {
  await dataSource.transaction(async (manager) => {
    for (const [email, hash] of hashes) await manager.query('UPDATE people SET password_hash = $2 WHERE email = $1', [email, hash]);
  });
}
