import { linkIdOf, orderCode } from '../../domain/mail/secrets';
import type { LinkRecord } from '../../domain/quote/ports';
import type { QuoteRecord } from '../../domain/quote/quote';
import { reasonsAgainst } from '../../domain/quote/rules';
import { InvalidInput, NotFound, Refused } from '../../domain/shared/errors';
import type { Transaction } from '../../domain/shared/transaction';
import type { QuoteMove } from '../../domain/vocabulary';
import type { BrokerDeps } from './deps';

const CODE_MINUTES = 10;
const MOST_ATTEMPTS = 5;
const CODES_AN_HOUR = 5;

export interface OrderInput {
  readonly layers: readonly { readonly key: string; readonly orderShare: number }[];
  readonly note: string;
}

/** Who answers for the broker: a signed-in person of the firm, or the contact named on the link. */
export type Answerer =
  | { readonly kind: 'person'; readonly personId: string; readonly name: string; readonly firmId: string }
  | { readonly kind: 'contact'; readonly contactId: string; readonly name: string; readonly codeId: string };

/** The link behind a token, if it is genuine and still open. A forged one names nothing. */
export async function openLink(deps: BrokerDeps, token: string): Promise<LinkRecord> {
  const linkId = linkIdOf(deps.linkSecret, token);
  const link = linkId === null ? null : await deps.links.read(linkId);
  if (link === null) throw new NotFound('link');
  if (link.revokedAt !== null) throw new Refused([{ code: 'link revoked', message: 'This link has been withdrawn: a newer version of the quote, or a message from the underwriter, takes its place.' }]);
  if (link.expiresAt.getTime() <= Date.now()) throw new Refused([{ code: 'link expired', message: 'This link has expired. Ask the underwriter for a new one.' }]);
  return link;
}

/** Mails a one-time code to the contact whom the link names. */
export async function mailCode(deps: BrokerDeps, link: LinkRecord): Promise<{ sentTo: string; expiresInSeconds: number }> {
  const quote = await deps.quotes.read(link.quoteId);
  if (quote === null) throw new NotFound('quote');
  // A code serves to decline as well, which is open for longer than an order.
  const reasons = reasonsAgainst('broker decline', quote, null, deps.today());
  if (reasons.length > 0) throw new Refused(reasons);
  await deps.unitOfWork.run(async (transaction) => {
    if ((await deps.links.recentCodes(transaction, link.id)) >= CODES_AN_HOUR) {
      throw new Refused([{ code: 'codes', message: 'Five codes were sent within an hour: wait before asking for another.' }]);
    }
    const codeId = await deps.links.createCode(transaction, link.id, new Date(Date.now() + CODE_MINUTES * 60_000));
    await deps.mails.put(transaction, {
      kind: 'order code',
      to: { contactId: link.contactId },
      quoteId: quote.id,
      subject: `Your code for ${quote.reference}`,
      model: { reference: quote.reference, codeId, minutesValid: CODE_MINUTES },
    });
  });
  const [name = '', domain = ''] = quote.contact.email.split('@');
  return { sentTo: `${name.slice(0, 1)}…@${domain}`, expiresInSeconds: CODE_MINUTES * 60 };
}

/** Checks a code; trying counts even when what follows is refused. */
export async function answererOf(deps: BrokerDeps, link: LinkRecord, code: string): Promise<Answerer> {
  const codeId = await deps.unitOfWork.run((transaction) => deps.links.tryCode(transaction, link.id, MOST_ATTEMPTS));
  if (codeId === null || orderCode(deps.linkSecret, codeId) !== code) {
    throw new InvalidInput([{ path: 'code', message: 'is not the present code: ask for a new one if it is older than ten minutes or was tried five times' }]);
  }
  const quote = await deps.quotes.read(link.quoteId);
  return { kind: 'contact', contactId: link.contactId, name: quote?.contact.name ?? '', codeId };
}

async function lockForAnswer(deps: BrokerDeps, transaction: Transaction, quoteId: string, who: Answerer, move: QuoteMove): Promise<QuoteRecord> {
  const quote = await deps.quotes.lock(transaction, quoteId);
  if (quote === null || quote.issuedAt === null || (who.kind === 'person' && who.firmId !== quote.brokerFirm.id)) throw new NotFound('quote');
  const reasons = reasonsAgainst(move, quote, null, deps.today());
  if (reasons.length > 0) throw new Refused(reasons);
  if (who.kind === 'contact' && !(await deps.links.useCode(transaction, who.codeId))) {
    throw new InvalidInput([{ path: 'code', message: 'was used already: ask for a new one' }]);
  }
  return quote;
}

async function record(deps: BrokerDeps, transaction: Transaction, quote: QuoteRecord, who: Answerer, move: 'order' | 'broker decline', note: string): Promise<void> {
  await deps.audit.append(transaction, {
    actorId: who.kind === 'person' ? who.personId : null,
    actor: who.kind === 'person' ? who.name : `${who.name} (signed link)`,
    action: `quote ${move}`,
    subject: 'quote',
    subjectId: quote.id,
    from: quote.state,
    to: move === 'order' ? 'ordered' : 'not taken up',
    note: note || null,
  });
  const readers = new Set([quote.author.id, quote.issuedBy?.id ?? quote.author.id]);
  const answer = move === 'order' ? 'firm order' : 'not taken up';
  for (const personId of readers) {
    await deps.mails.put(transaction, {
      kind: 'broker answered',
      to: { personId },
      quoteId: quote.id,
      subject: `${move === 'order' ? 'Firm order' : 'Not taken up'}: ${quote.reference}, version ${quote.number}`,
      model: { reference: quote.reference, number: quote.number, answer, by: `${who.name}, ${quote.brokerFirm.name}`, note, quoteId: quote.id },
    });
  }
}

/** Takes a firm order in time and within the quote's layers. */
export async function takeOrder(deps: BrokerDeps, quoteId: string, who: Answerer, order: OrderInput): Promise<void> {
  await deps.unitOfWork.run(async (transaction) => {
    const quote = await lockForAnswer(deps, transaction, quoteId, who, 'order');
    const errors = order.layers.flatMap(({ key }, i) => {
      if (!quote.terms.layers.some((layer) => layer.key === key)) return [{ path: `layers.${i}.key`, message: 'is not a layer of this quote' }];
      return order.layers.findIndex((other) => other.key === key) === i ? [] : [{ path: `layers.${i}.key`, message: 'is ordered twice' }];
    });
    if (errors.length > 0) throw new InvalidInput(errors);
    await deps.quotes.placeOrder(transaction, quote.id, {
      by: who.kind === 'person' ? { personId: who.personId } : { contactId: who.contactId },
      ...order,
    });
    await deps.quotes.move(transaction, quote, 'ordered');
    await record(deps, transaction, quote, who, 'order', order.note);
  });
}

/** Takes the broker's refusal: not taken up, and what the quote held is given back. */
export async function takeRefusal(deps: BrokerDeps, quoteId: string, who: Answerer, note: string): Promise<void> {
  await deps.unitOfWork.run(async (transaction) => {
    const quote = await lockForAnswer(deps, transaction, quoteId, who, 'broker decline');
    await deps.quotes.move(transaction, quote, 'not taken up');
    await deps.zones.release(transaction, quote.id);
    await record(deps, transaction, quote, who, 'broker decline', note);
  });
}
