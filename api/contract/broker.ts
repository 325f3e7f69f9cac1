import * as z from 'zod';
import { QUOTE_KINDS, QUOTE_STATES } from '../domain/vocabulary';
import { id, idParams, note, reason } from './common';
import { orderLayer } from './quotes';
import { route } from './route';

const tag = 'Broker';

/** What a broker sees of a quote: terms and premium, nothing technical and nothing of the house. */
export const brokerQuote = z.object({
  id,
  reference: z.string(),
  number: z.number().int(),
  kind: z.enum(QUOTE_KINDS),
  state: z.enum(QUOTE_STATES),
  cedant: z.string(),
  programmeName: z.string(),
  currency: z.string(),
  inceptionOn: z.string(),
  validUntil: z.string(),
  issuedAt: z.string(),
  underwriter: z.object({ name: z.string(), email: z.string() }),
  contact: z.object({ name: z.string() }),
  layers: z.array(
    z.object({
      key: z.string(),
      name: z.string(),
      limit: z.string(),
      attachment: z.string(),
      annualDeductible: z.string(),
      reinstatements: z.array(z.number()),
      brokerage: z.number(),
      writtenLine: z.number(),
      premium: z.string(),
      rateOnLine: z.number(),
    }),
  ),
  order: z.object({ receivedAt: z.string(), layers: z.array(orderLayer), note: z.string() }).nullable(),
  cautions: z.array(z.string()),
  mayAnswer: z.boolean(),
});
export type BrokerQuote = z.infer<typeof brokerQuote>;

const order = z.object({ layers: z.array(orderLayer).min(1, 'must order at least one layer'), note: note.default('') });
const tokenParams = z.object({ token: z.string().min(10).max(512) });
const code = z.string().regex(/^\d{6}$/, 'must be the six digits from the mail');

export const listBrokerQuotes = route({
  method: 'get', path: '/broker/quotes', access: 'broker.read', tag, summary: "Quotes issued to the own firm", reply: z.array(brokerQuote),
});
export const readBrokerQuote = route({
  method: 'get', path: '/broker/quotes/:id', access: 'broker.read', tag, summary: 'One quote issued to the own firm', params: idParams, reply: brokerQuote,
});
export const orderAsBroker = route({
  method: 'post', path: '/broker/quotes/:id/order', access: 'broker.answer', tag, summary: 'Give a firm order', params: idParams, body: order,
  reply: brokerQuote,
});
export const declineAsBroker = route({
  method: 'post', path: '/broker/quotes/:id/decline', access: 'broker.answer', tag, summary: 'Decline: not taken up', params: idParams,
  body: z.object({ note: reason }), reply: brokerQuote,
});
export const readLink = route({
  method: 'get', path: '/links/:token', access: 'link', tag, summary: 'The quote behind a signed link; shows, never acts', params: tokenParams,
  reply: brokerQuote,
});
export const requestLinkCode = route({
  method: 'post', path: '/links/:token/code', access: 'link', tag, summary: 'Mail a one-time code to the named contact', params: tokenParams,
  reply: z.object({ sentTo: z.string(), expiresInSeconds: z.number().int() }), status: 202,
});
export const orderByLink = route({
  method: 'post', path: '/links/:token/order', access: 'link', tag, summary: 'Give a firm order with the one-time code', params: tokenParams,
  body: order.extend({ code }), reply: brokerQuote,
});
export const declineByLink = route({
  method: 'post', path: '/links/:token/decline', access: 'link', tag, summary: 'Decline with the one-time code', params: tokenParams,
  body: z.object({ note: reason, code }), reply: brokerQuote,
});
