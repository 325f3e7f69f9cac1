import { twelveMonthsFrom } from '../../domain/book/book';
import { capacityNeeded } from '../../domain/capacity/capacity';
import type { FrozenLayer, QuoteRecord } from '../../domain/quote/quote';
import { auditMove } from '../../domain/quote/audit-move';
import { authorityOver } from '../../domain/quote/refer';
import { authorityAgainst } from '../../domain/quote/rules';
import type { Actor } from '../../domain/shared/actor';
import { Refused } from '../../domain/shared/errors';
import { lockForMove, type QuoteDeps } from './deps';
import { mailLayers } from './issue';

/** The house's bound line of an ordered layer: its written line, and never more than the whole order. */
function boundLine(quote: QuoteRecord, layer: FrozenLayer): number {
  const ordered = quote.order?.layers.find(({ key }) => key === layer.key);
  return ordered === undefined ? 0 : Math.min(layer.writtenLine, ordered.orderShare);
}

/**
 * Binds an ordered quote in one transaction: authority of who binds, the order within the quote, capacity (what the firm
 * quote held, or taken now for an indication), the contract as the next version of the book, trail, wake and mails.
 */
export async function bindQuote(deps: QuoteDeps, actor: Actor, id: string, note: string): Promise<void> {
  await deps.unitOfWork.run(async (transaction) => {
    const quote = await lockForMove(deps, transaction, id, 'bind', actor, async (one) =>
      authorityAgainst('bind', one, await authorityOver(deps, one, actor.personId, transaction)),
    );
    const layers = quote.terms.layers.filter((layer) => boundLine(quote, layer) > 0);
    if (layers.length === 0) throw new Refused([{ code: 'order', message: 'The order names no layer of this quote.' }]);
    const { contractId, version } = await deps.book.enter(
      transaction,
      {
        name: quote.terms.name,
        cedantId: quote.cedant.id,
        brokerFirmId: quote.brokerFirm.id,
        currency: quote.terms.currency,
        inceptionOn: quote.terms.inceptionOn,
        expiresOn: twelveMonthsFrom(quote.terms.inceptionOn),
        quoteId: quote.id,
        programmeId: quote.programmeId,
        lossTableIds: quote.terms.lossTableIds,
        layers: layers.map((terms) => ({
          terms,
          signedLine: boundLine(quote, terms),
          premium: quote.premiums.find(({ key }) => key === terms.key)?.premium ?? '0',
        })),
      },
      `bound ${quote.reference}, version ${quote.number}`,
    );
    const needed = capacityNeeded(layers, (layer) => boundLine(quote, layer), quote.run.exchangeRate);
    if (quote.kind === 'firm') await deps.zones.convert(transaction, quote.id, contractId, needed);
    else await deps.zones.take(transaction, await deps.zones.touchedBy(transaction, quote.terms.lossTableIds), needed, { contractId });
    await deps.quotes.move(transaction, quote, 'bound', { boundBy: actor.personId });
    await auditMove(deps, transaction, actor, quote, 'bind', 'bound', note);
    await deps.outbox.put(transaction, 'book.moved', String(version));
    await deps.mails.put(transaction, {
      kind: 'quote bound',
      to: { contactId: quote.contact.id },
      quoteId: quote.id,
      subject: `Bound: ${quote.reference}, version ${quote.number}: ${quote.cedant.name}, ${quote.terms.name}`,
      model: {
        reference: quote.reference,
        number: quote.number,
        cedant: quote.cedant.name,
        programmeName: quote.terms.name,
        currency: quote.terms.currency,
        inceptionOn: quote.terms.inceptionOn,
        underwriterName: quote.author.name,
        underwriterEmail: quote.author.email,
        layers: mailLayers(quote, (key) => {
          const layer = layers.find((bound) => bound.key === key);
          return layer === undefined ? null : boundLine(quote, layer);
        }),
      },
    });
  });
}
