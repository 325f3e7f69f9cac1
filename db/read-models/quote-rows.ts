import type { EntityManager } from 'typeorm';
import type { FrozenTerms, OrderRecord, QuoteRecord, RunUnderQuote } from '../../api/domain/quote/quote';
import type { QuoteKind, QuoteState, RunState } from '../../api/domain/vocabulary';
import type { StandingsOf } from './run-standing';

interface PersonJson {
  readonly id: string;
  readonly name: string;
}

interface Row {
  readonly id: string;
  readonly family_id: string;
  readonly reference: string;
  readonly number: number;
  readonly state: QuoteState;
  readonly kind: QuoteKind;
  readonly submission_id: string;
  readonly programme_id: string;
  readonly run_id: string;
  readonly terms: FrozenTerms;
  readonly valid_until: string;
  readonly note: string;
  readonly version: number;
  readonly submitted_at: Date | null;
  readonly decision_note: string | null;
  readonly issued_at: Date | null;
  readonly updated_at: Date;
  readonly cedant: PersonJson;
  readonly firm: PersonJson;
  readonly contact: PersonJson & { email: string };
  readonly author: PersonJson & { email: string };
  readonly submitter: PersonJson | null;
  readonly decider: PersonJson | null;
  readonly issuer: PersonJson | null;
  readonly premiums: { key: string; premium: string }[];
  readonly orders: { receivedAt: string; by: string; layers: OrderRecord['layers']; note: string } | null;
  readonly contract_id: string | null;
}

const person = (alias: string): string => `CASE WHEN ${alias}.id IS NULL THEN NULL ELSE json_build_object('id', ${alias}.id, 'name', ${alias}.name) END`;

const SELECT = `
  SELECT q.id, q.family_id, q.reference, q.number, q.state, q.kind, q.submission_id, q.programme_id, q.run_id, q.terms,
    q.valid_until::text, q.note, q.version, q.submitted_at, q.decision_note, q.issued_at, q.updated_at,
    ${person('c')} AS cedant, ${person('f')} AS firm,
    json_build_object('id', k.id, 'name', k.name, 'email', k.email) AS contact,
    json_build_object('id', a.id, 'name', a.name, 'email', a.email) AS author,
    ${person('sb')} AS submitter, ${person('db')} AS decider, ${person('ib')} AS issuer,
    (SELECT json_agg(json_build_object('key', l.layer_key, 'premium', l.premium::text) ORDER BY l.position)
      FROM quote_layers l WHERE l.quote_id = q.id) AS premiums,
    (SELECT json_build_object('receivedAt', o.received_at, 'by', coalesce(op.name, oc.name), 'layers', o.layers, 'note', o.note)
      FROM orders o LEFT JOIN people op ON op.id = o.person_id LEFT JOIN contacts oc ON oc.id = o.contact_id
      WHERE o.quote_id = q.id) AS orders,
    (SELECT id FROM contracts WHERE quote_id = q.id) AS contract_id
  FROM quotes q
    JOIN submissions s ON s.id = q.submission_id
    JOIN cedants c ON c.id = s.cedant_id
    JOIN broker_firms f ON f.id = q.broker_firm_id
    JOIN contacts k ON k.id = q.contact_id
    JOIN people a ON a.id = q.author_id
    LEFT JOIN people sb ON sb.id = q.submitted_by
    LEFT JOIN people db ON db.id = q.decided_by
    LEFT JOIN people ib ON ib.id = q.issued_by`;

interface RunRow {
  readonly id: string;
  readonly programme_id: string;
  readonly state: RunState;
  readonly terms: FrozenTerms;
  readonly flagged: boolean | null;
  readonly layers: RunUnderQuote['layers'] | null;
  readonly house_currency: string;
  readonly exchange_rate: number | null;
}

/** Runs as quotes rest on them, by id; only the figures that a quote is measured by leave the result. */
export async function runsUnderQuotes(manager: EntityManager, ids: readonly string[], standingsOf: StandingsOf): Promise<Map<string, RunUnderQuote>> {
  const rows: RunRow[] = await manager.query(
    `SELECT r.id, r.programme_id, r.state, r.terms, (r.result->'selfCheck'->>'flagged')::boolean AS flagged,
       (SELECT json_agg(json_build_object('key', l->>'key', 'expectedLoss', (l->'expectedLoss'->>'value')::float8,
          'walkAwayPremium', (l->'walkAwayPremium'->>'value')::float8, 'technicalPremium', (l->>'technicalPremium')::float8))
        FROM jsonb_array_elements(r.result->'layers') l) AS layers,
       b.terms->>'currency' AS house_currency,
       CASE WHEN b.terms->>'currency' = r.terms->>'currency' THEN 1
         ELSE (b.terms->'exchangeRates'->>(r.terms->>'currency'))::float8 END AS exchange_rate
     FROM runs r JOIN bases b ON b.id = r.basis_id WHERE r.id = ANY($1)`,
    [ids],
  );
  const standings = await standingsOf(manager, ids);
  return new Map(
    rows.map((row) => {
      const standing = standings.get(row.id);
      return [
        row.id,
        {
          id: row.id,
          programmeId: row.programme_id,
          succeeded: row.state === 'succeeded',
          flagged: row.flagged === true,
          standing: standing?.standing ?? 'stale',
          moved: standing?.moved ?? [],
          terms: row.terms,
          layers: row.layers ?? [],
          houseCurrency: row.house_currency,
          exchangeRate: row.exchange_rate ?? Number.NaN,
        },
      ];
    }),
  );
}

function recordOf(row: Row, run: RunUnderQuote): QuoteRecord {
  return {
    id: row.id,
    familyId: row.family_id,
    reference: row.reference,
    number: row.number,
    state: row.state,
    kind: row.kind,
    submissionId: row.submission_id,
    programmeId: row.programme_id,
    cedant: row.cedant,
    brokerFirm: row.firm,
    contact: row.contact,
    terms: row.terms,
    premiums: row.premiums,
    run,
    validUntil: row.valid_until,
    note: row.note,
    author: row.author,
    submittedBy: row.submitter,
    submittedAt: row.submitted_at?.toISOString() ?? null,
    decidedBy: row.decider,
    decisionNote: row.decision_note,
    issuedBy: row.issuer,
    issuedAt: row.issued_at?.toISOString() ?? null,
    order: row.orders === null ? null : { ...row.orders, receivedAt: new Date(row.orders.receivedAt).toISOString() },
    contractId: row.contract_id,
    version: row.version,
    updatedAt: row.updated_at.toISOString(),
  };
}

/** Quotes that meet a condition over `q` (newest first), with everything their rules look at. */
export async function quoteRecords(manager: EntityManager, where: string, parameters: readonly unknown[], standingsOf: StandingsOf): Promise<QuoteRecord[]> {
  const rows: Row[] = await manager.query(`${SELECT} WHERE ${where} ORDER BY q.updated_at DESC, q.id`, [...parameters]);
  if (rows.length === 0) return [];
  const runs = await runsUnderQuotes(manager, [...new Set(rows.map((row) => row.run_id))], standingsOf);
  return rows.flatMap((row) => {
    const run = runs.get(row.run_id);
    return run === undefined ? [] : [recordOf(row, run)];
  });
}
