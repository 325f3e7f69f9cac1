import type { Book } from '../../domain/book/book';
import type { Zones } from '../../domain/capacity/capacity';
import type { Grants } from '../../domain/grant/grant';
import type { MailOutbox } from '../../domain/mail/mail';
import type { People } from '../../domain/person/person';
import type { QuoteLinks, Quotes } from '../../domain/quote/ports';
import type { QuoteRecord } from '../../domain/quote/quote';
import type { AuditTrail } from '../../domain/shared/audit';
import type { Actor } from '../../domain/shared/actor';
import { NotFound, Refused, type Reason } from '../../domain/shared/errors';
import type { Outbox } from '../../domain/shared/outbox';
import type { Notice } from '../../domain/shared/stream';
import type { Transaction, UnitOfWork } from '../../domain/shared/transaction';
import { reasonsAgainst } from '../../domain/quote/rules';
import { TRANSITIONS } from '../../domain/quote/transitions';
import type { QuoteMove } from '../../domain/vocabulary';

export interface QuoteDeps {
  readonly quotes: Quotes;
  readonly links: QuoteLinks;
  readonly grants: Grants;
  readonly people: People;
  readonly zones: Zones;
  readonly book: Book;
  readonly mails: MailOutbox;
  readonly outbox: Outbox;
  readonly audit: AuditTrail;
  readonly unitOfWork: UnitOfWork;
  /** Today's date, YYYY-MM-DD, in UTC. */
  readonly today: () => string;
  readonly notify: (notice: Notice) => Promise<void>;
}

/**
 * Locks a quote for a move that nothing stands against.
 * @param further what else may stand against it, asked only of a quote in the right state
 * @throws NotFound, or Refused with every reason at once
 */
export async function lockForMove(
  deps: QuoteDeps,
  transaction: Transaction,
  id: string,
  move: QuoteMove,
  actor: Actor | null,
  further: (quote: QuoteRecord) => Promise<Reason[]> = () => Promise.resolve([]),
): Promise<QuoteRecord> {
  const quote = await deps.quotes.lock(transaction, id);
  if (quote === null) throw new NotFound('quote');
  const reasons = reasonsAgainst(move, quote, actor, deps.today());
  if (TRANSITIONS[move].from.includes(quote.state)) reasons.push(...(await further(quote)));
  if (reasons.length > 0) throw new Refused(reasons);
  return quote;
}

/** Tells the screens after the commit that a quote has moved. */
export async function tell(deps: QuoteDeps, quoteId: string): Promise<void> {
  await deps.notify({ topic: 'quote', id: quoteId, roles: ['underwriter', 'senior underwriter', 'actuary'] });
}
