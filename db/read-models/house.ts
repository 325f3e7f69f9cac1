import type { DataSource } from 'typeorm';
import type { Basis, BasisTerms, BookContract, Zone } from '../../api/contract/house';
import { amountOf, numberOf, timesShare, unitsOf } from '../../api/domain/money';
import type { BasisState } from '../../api/domain/vocabulary';
import type { HouseReader } from '../../api/features/house/port';

interface BasisJoin {
  id: string;
  number: number;
  state: BasisState;
  terms: BasisTerms;
  created_by: { id: string; name: string };
  released_by: { id: string; name: string } | null;
  released_at: Date | null;
}

async function bases(dataSource: DataSource): Promise<Basis[]> {
  const rows: BasisJoin[] = await dataSource.query(`
    SELECT b.id, b.number, b.state, b.terms, b.released_at, json_build_object('id', c.id, 'name', c.name) AS created_by,
      CASE WHEN r.id IS NULL THEN NULL ELSE json_build_object('id', r.id, 'name', r.name) END AS released_by
    FROM bases b JOIN people c ON c.id = b.created_by LEFT JOIN people r ON r.id = b.released_by ORDER BY b.number DESC`);
  return rows.map((row) => ({
    id: row.id,
    number: row.number,
    state: row.state,
    terms: row.terms,
    createdBy: row.created_by,
    releasedBy: row.released_by,
    releasedAt: row.released_at?.toISOString() ?? null,
  }));
}

interface ContractJoin {
  id: string;
  name: string;
  cedant: string;
  firm: string;
  currency: string;
  inception_on: string;
  expires_on: string;
  origin: BookContract['origin'];
  quote_id: string | null;
  entered_in: number;
  layers: (Omit<BookContract['layers'][number], 'rateOnLine'> & { rateOnLine?: number })[];
}

function contractOf(row: ContractJoin): BookContract {
  const income = row.layers.reduce((sum, layer) => sum + timesShare(unitsOf(layer.premium), layer.signedLine), 0n);
  const plain = (text: string): string => amountOf(unitsOf(text));
  return {
    id: row.id,
    name: row.name,
    cedant: row.cedant,
    brokerFirm: row.firm,
    currency: row.currency,
    inceptionOn: row.inception_on,
    expiresOn: row.expires_on,
    origin: row.origin,
    quoteId: row.quote_id,
    enteredInVersion: row.entered_in,
    layers: row.layers.map((layer) => ({
      ...layer,
      limit: plain(layer.limit),
      attachment: plain(layer.attachment),
      annualDeductible: plain(layer.annualDeductible),
      premium: plain(layer.premium),
      remainingLimit: layer.remainingLimit === null ? null : plain(layer.remainingLimit),
      rateOnLine: numberOf(unitsOf(layer.premium)) / numberOf(unitsOf(layer.limit)),
    })),
    houseShareOfPremium: amountOf(income),
  };
}

const CONTRACTS = `
  SELECT k.id, k.name, c.name AS cedant, f.name AS firm, k.currency, k.inception_on::text, k.expires_on::text, k.origin, k.quote_id, k.entered_in,
    (SELECT json_agg(json_build_object('key', l.layer_key, 'name', l.name, 'limit', l.limit_amount::text, 'attachment', l.attachment::text,
       'annualDeductible', l.annual_deductible::text, 'reinstatements', l.reinstatements, 'brokerage', l.brokerage,
       'signedLine', l.signed_line, 'premium', l.premium::text, 'remainingLimit', l.remaining_limit::text) ORDER BY l.position)
     FROM contract_layers l WHERE l.contract_id = k.id) AS layers
  FROM contracts k JOIN cedants c ON c.id = k.cedant_id JOIN broker_firms f ON f.id = k.broker_firm_id
  WHERE k.left_in IS NULL ORDER BY k.inception_on, c.name, k.name`;

export function houseReader(dataSource: DataSource): HouseReader {
  return {
    bases: () => bases(dataSource),
    async book() {
      const contracts = (await dataSource.query<ContractJoin[]>(CONTRACTS)).map(contractOf);
      const heads: { version: number }[] = await dataSource.query('SELECT version FROM book_head');
      const released = (await bases(dataSource)).find((basis) => basis.state === 'released');
      const currency = released?.terms.currency ?? 'EUR';
      const rate = (of: string): number => (of === currency ? 1 : (released?.terms.exchangeRates[of] ?? 0));
      const sum = (of: (contract: BookContract) => bigint): string =>
        amountOf(contracts.reduce((total, contract) => total + timesShare(of(contract), rate(contract.currency)), 0n));
      return {
        version: heads[0]?.version ?? 0,
        contracts,
        premium: sum((contract) => unitsOf(contract.houseShareOfPremium)),
        exposure: sum((contract) => contract.layers.reduce((total, layer) => total + timesShare(unitsOf(layer.limit), layer.signedLine), 0n)),
        currency,
      };
    },
    async bookVersions(page) {
      const rows: { number: number; cause: string; at: Date; contract_id: string | null }[] = await dataSource.query(
        'SELECT number, cause, at, contract_id FROM book_versions ORDER BY number DESC OFFSET $1 LIMIT $2',
        [page.offset, page.limit],
      );
      const count: { total: number }[] = await dataSource.query('SELECT count(*)::int AS total FROM book_versions');
      return {
        items: rows.map(({ number, cause, at, contract_id: contractId }) => ({ number, cause, at: at.toISOString(), contractId })),
        total: count[0]?.total ?? 0,
      };
    },
    async zones() {
      const rows: (Omit<Zone, 'free'> & { id: string })[] = await dataSource.query(`
        SELECT z.id, z.name, z.perils, z.regions, z.capacity::text,
          coalesce(sum(u.amount) FILTER (WHERE u.quote_id IS NOT NULL), 0)::text AS held,
          coalesce(sum(u.amount) FILTER (WHERE u.contract_id IS NOT NULL), 0)::text AS used
        FROM zones z LEFT JOIN zone_uses u ON u.zone_id = z.id AND u.released_at IS NULL GROUP BY z.id ORDER BY z.name`);
      return rows.map((row) => {
        const [capacity, held, used] = [row.capacity, row.held, row.used].map(unitsOf) as [bigint, bigint, bigint];
        return { ...row, capacity: amountOf(capacity), held: amountOf(held), used: amountOf(used), free: amountOf(capacity - held - used) };
      });
    },
  };
}
