import { capacityNeeded } from '../../domain/capacity/capacity';
import type { MailLayer } from '../../domain/mail/mail';
import type { QuoteRecord } from '../../domain/quote/quote';
import { auditMove } from '../../domain/quote/audit-move';
import type { Actor } from '../../domain/shared/actor';
import { lockForMove, type QuoteDeps } from './deps';

/** A link can be opened for a month after the quote's validity, to read what became of it. */
const LINK_DAYS_AFTER = 30;
const DAY_MILLISECONDS = 24 * 3600 * 1000;

export function mailLayers(quote: QuoteRecord, lineOf: (key: string) => number | null): MailLayer[] {
  return quote.terms.layers.flatMap((layer) => {
    const writtenLine = lineOf(layer.key);
    const premium = quote.premiums.find(({ key }) => key === layer.key)?.premium ?? '0';
    return writtenLine === null ? [] : [{ name: layer.name, limit: layer.limit, attachment: layer.attachment, premium, writtenLine }];
  });
}

/** Issues an approved quote: a firm one holds capacity in every zone it touches; the broker gets a signed link by mail. */
export async function issueQuote(deps: QuoteDeps, actor: Actor, id: string, note: string): Promise<void> {
  await deps.unitOfWork.run(async (transaction) => {
    const quote = await lockForMove(deps, transaction, id, 'issue', actor);
    if (quote.kind === 'firm') {
      const zones = await deps.zones.touchedBy(transaction, quote.terms.lossTableIds);
      const needed = capacityNeeded(quote.terms.layers, (layer) => layer.writtenLine, quote.run.exchangeRate);
      await deps.zones.take(transaction, zones, needed, { quoteId: quote.id });
    }
    const expiresAt = new Date(Date.parse(`${quote.validUntil}T00:00:00Z`) + (LINK_DAYS_AFTER + 1) * DAY_MILLISECONDS);
    const linkId = await deps.links.create(transaction, quote.id, quote.contact.id, expiresAt);
    await deps.quotes.move(transaction, quote, 'issued', { issuedBy: actor.personId });
    await auditMove(deps, transaction, actor, quote, 'issue', 'issued', note);
    await deps.mails.put(transaction, {
      kind: 'quote issued',
      to: { contactId: quote.contact.id },
      quoteId: quote.id,
      subject: `${quote.kind === 'firm' ? 'Firm quote' : 'Indication'} ${quote.reference}, version ${quote.number}: ${quote.cedant.name}, ${quote.terms.name}`,
      model: {
        reference: quote.reference,
        number: quote.number,
        kind: quote.kind,
        cedant: quote.cedant.name,
        programmeName: quote.terms.name,
        currency: quote.terms.currency,
        validUntil: quote.validUntil,
        underwriterName: quote.author.name,
        underwriterEmail: quote.author.email,
        layers: mailLayers(quote, (key) => quote.terms.layers.find((layer) => layer.key === key)?.writtenLine ?? null),
        linkId,
      },
    });
  });
}

export async function withdrawQuote(deps: QuoteDeps, actor: Actor, id: string, note: string): Promise<void> {
  await deps.unitOfWork.run(async (transaction) => {
    const quote = await lockForMove(deps, transaction, id, 'withdraw', actor);
    await deps.quotes.move(transaction, quote, 'withdrawn');
    await deps.links.revokeAll(transaction, quote.id);
    await auditMove(deps, transaction, actor, quote, 'withdraw', 'withdrawn', note);
  });
}
