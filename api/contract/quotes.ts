import * as z from 'zod';
import { AUTHORITY_RULES, QUOTE_KINDS, QUOTE_MOVES, QUOTE_STATES, RUN_STANDINGS } from '../domain/vocabulary';
import { id, idParams, isoDate, note, personRef, positiveAmountText, reason, share } from './common';
import { programmeTerms } from './programmes';
import { route } from './route';

const tag = 'Quotes';

/** A layer as quoted: frozen terms, the premium asked, and the technical figures beside it. Amounts for 100%. */
export const quotedLayer = z.object({
  key: z.string(),
  name: z.string(),
  limit: z.string(),
  attachment: z.string(),
  writtenLine: z.number(),
  premium: z.string(),
  rateOnLine: z.number(),
  expectedLoss: z.number(),
  walkAwayPremium: z.number(),
  technicalPremium: z.number(),
  /** Quoted ÷ technical premium. */
  adequacy: z.number(),
  /** Written line × occurrence limit, house currency. */
  lineAmount: z.string(),
});
export type QuotedLayer = z.infer<typeof quotedLayer>;

export const ruleOutcome = z.object({
  rule: z.enum(AUTHORITY_RULES),
  layer: z.string().nullable(),
  figure: z.string(),
  bound: z.string(),
  pass: z.boolean(),
  message: z.string(),
});
export type RuleOutcome = z.infer<typeof ruleOutcome>;

/** A move that may come next for the person asking; refused ones say all their reasons. */
export const moveOffer = z.object({
  move: z.enum(QUOTE_MOVES),
  label: z.string(),
  allowed: z.boolean(),
  reasons: z.array(z.object({ code: z.string(), message: z.string() })),
  needsNote: z.boolean(),
});
export type MoveOffer = z.infer<typeof moveOffer>;

export const orderLayer = z.object({ key: z.string(), orderShare: share.gt(0, 'must be above 0%') });
export const quoteOrder = z.object({
  receivedAt: z.string(),
  by: z.string(),
  layers: z.array(orderLayer),
  note: z.string(),
});

export const quoteSummary = z.object({
  /** Identifies this version of the quote. */
  id,
  familyId: id,
  reference: z.string(),
  number: z.number().int(),
  state: z.enum(QUOTE_STATES),
  kind: z.enum(QUOTE_KINDS),
  submissionId: id,
  programmeId: id,
  programmeName: z.string(),
  cedant: z.string(),
  brokerFirm: z.object({ id, name: z.string() }),
  contact: z.object({ id, name: z.string(), email: z.string() }),
  currency: z.string(),
  inceptionOn: z.string(),
  /** Last day on which the broker can order. */
  validUntil: z.string(),
  /** Σ written line × premium, programme currency. */
  houseShareOfPremium: z.string(),
  lowestAdequacy: z.number(),
  author: personRef,
  submittedBy: personRef.nullable(),
  submittedAt: z.string().nullable(),
  updatedAt: z.string(),
  version: z.number().int(),
});
export type QuoteSummary = z.infer<typeof quoteSummary>;

export const quote = quoteSummary.extend({
  terms: programmeTerms,
  layers: z.array(quotedLayer),
  runId: id,
  runStanding: z.enum(RUN_STANDINGS),
  moved: z.array(z.string()),
  note: z.string(),
  decidedBy: personRef.nullable(),
  decisionNote: z.string().nullable(),
  issuedAt: z.string().nullable(),
  order: quoteOrder.nullable(),
  contractId: id.nullable(),
  authority: z.array(ruleOutcome),
  moves: z.array(moveOffer),
  history: z.array(
    z.object({
      at: z.string(),
      actor: z.string(),
      move: z.string(),
      from: z.string().nullable(),
      to: z.string(),
      note: z.string().nullable(),
    }),
  ),
});
export type Quote = z.infer<typeof quote>;

export const newQuote = z.object({
  runId: id,
  kind: z.enum(QUOTE_KINDS),
  validUntil: isoDate,
  layers: z.array(z.object({ key: z.string(), premium: positiveAmountText })).min(1),
  note: note.default(''),
});
/** Only in draft: a new run brings its own frozen terms. */
export const quoteEdit = newQuote;

const withNote = z.object({ note: note.default('') });
const withReason = z.object({ note: reason });

export const listQuotes = route({
  method: 'get', path: '/quotes', access: 'quotes.read', tag, summary: 'Quotes, newest first',
  query: z.object({ state: z.enum(QUOTE_STATES).optional(), submissionId: id.optional(), programmeId: id.optional() }),
  reply: z.array(quoteSummary),
});
export const createQuote = route({
  method: 'post', path: '/programmes/:id/quotes', access: 'quotes.draft', tag, summary: 'Draft a quote on a succeeded, current run',
  params: idParams, body: newQuote, reply: quote, status: 201,
});
export const readQuote = route({
  method: 'get', path: '/quotes/:id', access: 'quotes.read', tag, summary: 'One version of a quote, with the moves open to the reader',
  params: idParams, reply: quote, edits: 'etag',
});
export const updateQuote = route({
  method: 'put', path: '/quotes/:id', access: 'quotes.draft', tag, summary: 'Change a draft', params: idParams, body: quoteEdit, reply: quote,
  edits: 'if-match',
});
export const submitQuote = route({
  method: 'post', path: '/quotes/:id/submit', access: 'quotes.draft', tag,
  summary: 'Submit: approved within own authority, otherwise referred', params: idParams, body: withNote, reply: quote,
});
export const clearQuote = route({
  method: 'post', path: '/quotes/:id/clear', access: 'referrals.clear', tag, summary: 'Clear a referral of somebody else', params: idParams,
  body: withNote, reply: quote,
});
export const returnQuote = route({
  method: 'post', path: '/quotes/:id/return', access: 'referrals.clear', tag, summary: 'Return a referral to its author with a note',
  params: idParams, body: withReason, reply: quote,
});
export const declineQuote = route({
  method: 'post', path: '/quotes/:id/decline', access: 'referrals.clear', tag, summary: 'Decline a referral with a reason', params: idParams,
  body: withReason, reply: quote,
});
export const issueQuote = route({
  method: 'post', path: '/quotes/:id/issue', access: 'quotes.issue', tag,
  summary: 'Issue an approved quote to the broker; a firm one holds zone capacity', params: idParams, body: withNote, reply: quote,
});
export const withdrawQuote = route({
  method: 'post', path: '/quotes/:id/withdraw', access: 'quotes.draft', tag, summary: 'Withdraw a quote', params: idParams, body: withReason, reply: quote,
});
export const reviseQuote = route({
  method: 'post', path: '/quotes/:id/revise', access: 'quotes.draft', tag,
  summary: 'Supersede an issued quote by a new draft; answers the draft', params: idParams, body: withNote, reply: quote, status: 201,
});
export const bindQuote = route({
  method: 'post', path: '/quotes/:id/bind', access: 'quotes.bind', tag,
  summary: 'Bind an ordered quote: the contract enters the book as a new version', params: idParams, body: withNote, reply: quote,
});
export const listReferrals = route({
  method: 'get', path: '/referrals', access: 'referrals.clear', tag, summary: 'Referred quotes, oldest first, with the rules they failed',
  reply: z.array(quoteSummary.extend({ failures: z.array(ruleOutcome), own: z.boolean() })),
});
