import type { Quote, QuoteSummary } from '../../contract/quotes';
import { lineAmountText, measuredLayers } from '../../domain/authority/authority';
import { amountOf, numberOf, timesShare, unitsOf } from '../../domain/money';
import type { QuoteRecord } from '../../domain/quote/quote';
import { authorityOver } from '../../domain/quote/refer';
import { movesFor } from '../../domain/quote/rules';
import type { Actor } from '../../domain/shared/actor';
import type { QuoteDeps } from './deps';


export function quoteSummary(quote: QuoteRecord): QuoteSummary {
  const layers = measuredLayers(quote);
  const income = layers.reduce((sum, layer) => sum + timesShare(layer.premium, layer.writtenLine), 0n);
  return {
    id: quote.id,
    familyId: quote.familyId,
    reference: quote.reference,
    number: quote.number,
    state: quote.state,
    kind: quote.kind,
    submissionId: quote.submissionId,
    programmeId: quote.programmeId,
    programmeName: quote.terms.name,
    cedant: quote.cedant.name,
    brokerFirm: quote.brokerFirm,
    contact: quote.contact,
    currency: quote.terms.currency,
    inceptionOn: quote.terms.inceptionOn,
    validUntil: quote.validUntil,
    houseShareOfPremium: amountOf(income),
    lowestAdequacy: Math.min(...layers.map((layer) => layer.adequacy)),
    author: { id: quote.author.id, name: quote.author.name },
    submittedBy: quote.submittedBy,
    submittedAt: quote.submittedAt,
    updatedAt: quote.updatedAt,
    version: quote.version,
  };
}

/** A quote for a person of the house: figures, the rules of authority, history, and the moves open to them now. */
export async function quoteView(deps: QuoteDeps, quote: QuoteRecord, actor: Actor): Promise<Quote> {
  const measured = measuredLayers(quote);
  // Before a decision the reader's own authority is what matters to them; an author sees whether it will be referred.
  const authority = await authorityOver(deps, quote, actor.personId);
  return {
    ...quoteSummary(quote),
    terms: {
      ...quote.terms,
      lossTableIds: [...quote.terms.lossTableIds],
      layers: quote.terms.layers.map((layer) => ({ ...layer, reinstatements: [...layer.reinstatements] })),
    },
    layers: quote.terms.layers.map((layer) => {
      const figures = measured.find(({ key }) => key === layer.key);
      const premium = unitsOf(quote.premiums.find(({ key }) => key === layer.key)?.premium ?? '0');
      return {
        key: layer.key,
        name: layer.name,
        limit: layer.limit,
        attachment: layer.attachment,
        writtenLine: layer.writtenLine,
        premium: amountOf(premium),
        rateOnLine: numberOf(premium) / numberOf(unitsOf(layer.limit)),
        expectedLoss: figures?.expectedLoss ?? 0,
        walkAwayPremium: Number.isFinite(figures?.walkAwayPremium) ? (figures?.walkAwayPremium ?? 0) : 0,
        technicalPremium: figures?.technicalPremium ?? 0,
        adequacy: figures?.adequacy ?? 0,
        lineAmount: figures === undefined ? '0' : lineAmountText(figures),
      };
    }),
    runId: quote.run.id,
    runStanding: quote.run.standing,
    moved: [...quote.run.moved],
    note: quote.note,
    decidedBy: quote.decidedBy,
    decisionNote: quote.decisionNote,
    issuedAt: quote.issuedAt,
    order: quote.order === null ? null : { ...quote.order, layers: [...quote.order.layers] },
    contractId: quote.contractId,
    authority,
    moves: movesFor(quote, actor, authority, deps.today()),
    history: await deps.quotes.history(quote.id),
  };
}
