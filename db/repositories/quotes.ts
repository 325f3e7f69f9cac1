import { randomUUID } from 'node:crypto';
import type { DataSource, EntityManager } from 'typeorm';
import { demandApproval } from '../../api/domain/authority/authority';
import type { Marks, Quotes } from '../../api/domain/quote/ports';
import type { QuoteRecord } from '../../api/domain/quote/quote';
import { NotFound } from '../../api/domain/shared/errors';
import type { QuoteState } from '../../api/domain/vocabulary';
import { OrderRow, QuoteLayerRow, QuoteRow } from '../entities/quotes';
import { quoteRecords, runsUnderQuotes } from '../read-models/quote-rows';
import type { StandingsOf } from '../read-models/run-standing';
import { managerOf } from '../unit-of-work';

/** Writes a move of a locked quote; the version moves on with it. */
async function write(manager: EntityManager, quote: QuoteRecord, to: QuoteState, marks: Marks): Promise<void> {
  const now = new Date();
  const { affected } = await manager.update(
    QuoteRow,
    { id: quote.id, version: quote.version, state: quote.state },
    {
      state: to,
      version: quote.version + 1,
      updatedAt: now,
      ...(marks.submittedBy === undefined ? {} : { submittedBy: marks.submittedBy, submittedAt: now }),
      ...(marks.decidedBy === undefined ? {} : { decidedBy: marks.decidedBy, decidedAt: marks.decidedBy === null ? null : now }),
      ...(marks.decisionNote === undefined ? {} : { decisionNote: marks.decisionNote }),
      ...(marks.issuedBy === undefined ? {} : { issuedBy: marks.issuedBy, issuedAt: now }),
      ...(marks.boundBy === undefined ? {} : { boundBy: marks.boundBy, boundAt: now }),
    },
  );
  if (affected !== 1) throw new Error('a quote was moved without being locked first');
}

async function putPremiums(manager: EntityManager, quoteId: string, premiums: readonly { key: string; premium: string }[]): Promise<void> {
  await manager.insert(QuoteLayerRow, premiums.map(({ key, premium }, position) => ({ quoteId, position, layerKey: key, premium })));
}

export function quotesRepository(dataSource: DataSource, standingsOf: StandingsOf): Quotes {
  return {
    list(filter) {
      const conditions: [string, unknown][] = [];
      if (filter.state !== undefined) conditions.push(['q.state = ?', filter.state]);
      if (filter.submissionId !== undefined) conditions.push(['q.submission_id = ?', filter.submissionId]);
      if (filter.programmeId !== undefined) conditions.push(['q.programme_id = ?', filter.programmeId]);
      if (filter.brokerFirmId !== undefined) conditions.push(['q.broker_firm_id = ?', filter.brokerFirmId]);
      const where = conditions.map(([sql], i) => sql.replace('?', `$${i + 1}`));
      if (filter.everIssued === true) where.push('q.issued_at IS NOT NULL');
      return quoteRecords(dataSource.manager, where.join(' AND ') || 'true', conditions.map(([, value]) => value), standingsOf);
    },
    async read(id) {
      return (await quoteRecords(dataSource.manager, 'q.id = $1', [id], standingsOf))[0] ?? null;
    },
    async lock(transaction, id) {
      const manager = managerOf(transaction);
      await manager.query('SELECT 1 FROM quotes WHERE id = $1 FOR UPDATE', [id]);
      return (await quoteRecords(manager, 'q.id = $1', [id], standingsOf))[0] ?? null;
    },
    async run(transaction, runId) {
      return (await runsUnderQuotes(managerOf(transaction), [runId], standingsOf)).get(runId) ?? null;
    },
    async create(transaction, row) {
      const manager = managerOf(transaction);
      const places: { submission_id: string; broker_firm_id: string; contact_id: string; treaty_year: number }[] = await manager.query(
        `SELECT s.id AS submission_id, s.broker_firm_id, s.contact_id, s.treaty_year
         FROM programmes p JOIN submissions s ON s.id = p.submission_id WHERE p.id = $1`,
        [row.programmeId],
      );
      const place = places[0];
      if (place === undefined) throw new NotFound('programme');
      const family: { reference: string; last: number }[] =
        row.familyId === null
          ? await manager.query(`SELECT 'LYQ-' || $1::text || '-' || lpad(nextval('quote_numbers')::text, 4, '0') AS reference, 0 AS last`, [place.treaty_year])
          : await manager.query('SELECT reference, max(number) AS last FROM quotes WHERE family_id = $1 GROUP BY reference', [row.familyId]);
      const id = randomUUID();
      await manager.insert(QuoteRow, {
        id,
        familyId: row.familyId ?? id,
        reference: family[0]?.reference ?? '',
        number: (family[0]?.last ?? 0) + 1,
        programmeId: row.programmeId,
        submissionId: place.submission_id,
        brokerFirmId: place.broker_firm_id,
        contactId: place.contact_id,
        kind: row.kind,
        runId: row.runId,
        terms: row.terms,
        validUntil: row.validUntil,
        note: row.note,
        authorId: row.authorId,
      });
      await putPremiums(manager, id, row.premiums);
      return id;
    },
    async changeDraft(transaction, quote, change) {
      const manager = managerOf(transaction);
      const { premiums, kind, runId, terms, validUntil, note } = change;
      await manager.update(QuoteRow, { id: quote.id, version: quote.version }, { kind, runId, terms, validUntil, note, version: quote.version + 1, updatedAt: new Date() });
      await manager.delete(QuoteLayerRow, { quoteId: quote.id });
      await putPremiums(manager, quote.id, premiums);
    },
    move: (transaction, quote, to, marks = {}) => write(managerOf(transaction), quote, to, marks),
    async approve(transaction, quote, approval, marks) {
      demandApproval(approval, quote);
      await write(managerOf(transaction), quote, 'approved', marks);
    },
    async rest(transaction, quote, runId) {
      await managerOf(transaction).update(QuoteRow, { id: quote.id, version: quote.version }, { runId, version: quote.version + 1, updatedAt: new Date() });
    },
    async lapsing(today) {
      const rows: { id: string }[] = await dataSource.query(`SELECT id FROM quotes WHERE state = 'issued' AND valid_until < $1 ORDER BY id`, [today]);
      return rows.map(({ id }) => id);
    },
    async overtaken(bookVersion) {
      const rows: { id: string }[] = await dataSource.query(
        `SELECT q.id FROM quotes q JOIN runs r ON r.id = q.run_id
         WHERE q.state IN ('draft', 'referred', 'approved') AND r.book_version < $1 ORDER BY q.id`,
        [bookVersion],
      );
      return rows.map(({ id }) => id);
    },
    async history(quoteId) {
      const rows: { at: Date; actor: string; action: string; from_state: string | null; to_state: string | null; note: string | null }[] =
        await dataSource.query(
          'SELECT at, actor, action, from_state, to_state, note FROM audit_entries WHERE subject_id = $1 ORDER BY id',
          [quoteId],
        );
      return rows.map((row) => ({
        at: row.at.toISOString(),
        actor: row.actor,
        move: row.action.replace(/^quote /, ''),
        from: row.from_state,
        to: row.to_state ?? '',
        note: row.note,
      }));
    },
    async placeOrder(transaction, quoteId, order) {
      await managerOf(transaction).insert(OrderRow, {
        quoteId,
        personId: 'personId' in order.by ? order.by.personId : null,
        contactId: 'contactId' in order.by ? order.by.contactId : null,
        layers: [...order.layers],
        note: order.note,
      });
    },
  };
}
