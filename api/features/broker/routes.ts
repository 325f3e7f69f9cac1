import * as contract from '../../contract/broker';
import type { BrokerQuote } from '../../contract/broker';
import { amountOf, numberOf, unitsOf } from '../../domain/money';
import type { QuoteRecord } from '../../domain/quote/quote';
import { reasonsAgainst } from '../../domain/quote/rules';
import type { Actor } from '../../domain/shared/actor';
import { NotFound } from '../../domain/shared/errors';
import { serve, type ApiRouter } from '../../http/serve';
import { answererOf, mailCode, openLink, takeOrder, takeRefusal, type Answerer } from './answers';
import type { BrokerDeps } from './deps';

/** Everything a broker may see of a quote: built up from what is agreed, so that nothing technical can slip through. */
function brokerView(quote: QuoteRecord, today: string): BrokerQuote {
  return {
    id: quote.id,
    reference: quote.reference,
    number: quote.number,
    kind: quote.kind,
    state: quote.state,
    cedant: quote.cedant.name,
    programmeName: quote.terms.name,
    currency: quote.terms.currency,
    inceptionOn: quote.terms.inceptionOn,
    validUntil: quote.validUntil,
    issuedAt: quote.issuedAt ?? '',
    underwriter: { name: quote.author.name, email: quote.author.email },
    contact: { name: quote.contact.name },
    layers: quote.terms.layers.map((layer) => {
      const premium = unitsOf(quote.premiums.find(({ key }) => key === layer.key)?.premium ?? '0');
      return {
        key: layer.key,
        name: layer.name,
        limit: layer.limit,
        attachment: layer.attachment,
        annualDeductible: layer.annualDeductible,
        reinstatements: [...layer.reinstatements],
        brokerage: layer.brokerage,
        writtenLine: layer.writtenLine,
        premium: amountOf(premium),
        rateOnLine: numberOf(premium) / numberOf(unitsOf(layer.limit)),
      };
    }),
    order: quote.order === null ? null : { receivedAt: quote.order.receivedAt, layers: [...quote.order.layers], note: quote.order.note },
    cautions: [
      quote.kind === 'firm' ? 'Firm until the end of its validity.' : 'Indication only: not binding, and no capacity is held.',
      'Subject to local law, licence and sanctions rules, which come first.',
      'Not an actuarial opinion.',
    ],
    mayAnswer: reasonsAgainst('order', quote, null, today).length === 0,
  };
}

export function registerBroker(router: ApiRouter, deps: BrokerDeps): void {
  const view = (quote: QuoteRecord): BrokerQuote => brokerView(quote, deps.today());
  const tell = (id: string) => deps.notify({ topic: 'quote', id, roles: ['underwriter', 'senior underwriter', 'actuary'] });
  const firmOf = (actor: Actor): string => {
    if (actor.firmId === null) throw new NotFound('broker firm');
    return actor.firmId;
  };
  /** A quote that was never issued, or is another firm's, is not there. */
  const own = async (actor: Actor, id: string): Promise<QuoteRecord> => {
    const quote = await deps.quotes.read(id);
    if (quote === null || quote.issuedAt === null || quote.brokerFirm.id !== firmOf(actor)) throw new NotFound('quote');
    return quote;
  };
  const after = async (id: string): Promise<BrokerQuote> => {
    await tell(id);
    const quote = await deps.quotes.read(id);
    if (quote === null) throw new NotFound('quote');
    return view(quote);
  };
  const personOf = (actor: Actor): Answerer => ({ kind: 'person', personId: actor.personId, name: actor.name, firmId: firmOf(actor) });

  serve(router, contract.listBrokerQuotes, async ({ actor }) => (await deps.quotes.list({ brokerFirmId: firmOf(actor), everIssued: true })).map(view));
  serve(router, contract.readBrokerQuote, async ({ actor, params }) => view(await own(actor, params.id)));
  serve(router, contract.orderAsBroker, async ({ actor, params, body }) => {
    await takeOrder(deps, params.id, personOf(actor), body);
    return after(params.id);
  });
  serve(router, contract.declineAsBroker, async ({ actor, params, body }) => {
    await takeRefusal(deps, params.id, personOf(actor), body.note);
    return after(params.id);
  });

  serve(router, contract.readLink, async ({ params }) => {
    const quote = await deps.quotes.read((await openLink(deps, params.token)).quoteId);
    if (quote === null) throw new NotFound('quote');
    return view(quote);
  });
  serve(router, contract.requestLinkCode, async ({ params }) => mailCode(deps, await openLink(deps, params.token)));
  serve(router, contract.orderByLink, async ({ params, body }) => {
    const link = await openLink(deps, params.token);
    const { code, ...order } = body;
    await takeOrder(deps, link.quoteId, await answererOf(deps, link, code), order);
    return after(link.quoteId);
  });
  serve(router, contract.declineByLink, async ({ params, body }) => {
    const link = await openLink(deps, params.token);
    await takeRefusal(deps, link.quoteId, await answererOf(deps, link, body.code), body.note);
    return after(link.quoteId);
  });
}
