import * as z from 'zod';
import { BASIS_STATES, MAIL_KINDS, MAIL_STATES } from '../domain/vocabulary';
import { id, idParams, page, pageOf, personRef } from './common';
import { route } from './route';

/** What the house prices on. Shares and rates as fractions of 1; amounts in house currency. */
export const basisTerms = z.object({
  currency: z.string().regex(/^[A-Z]{3}$/),
  capital: z.number().positive(),
  riskAversion: z.number().min(0).max(20),
  /** `anchored`: discount solved so that a sure unit costs 1/(1 + riskless rate). `stated`: discount given, the riskless rate follows. */
  discounting: z.discriminatedUnion('mode', [
    z.object({ mode: z.literal('anchored'), risklessRate: z.number().min(-0.02).max(0.1) }),
    z.object({ mode: z.literal('stated'), discountFactor: z.number().positive().max(1.1) }),
  ]),
  /** Return on own assets; null: the riskless rate. */
  returnOnAssets: z.number().min(-0.5).max(1).nullable(),
  /** Capital share below which utility goes on as a straight line. */
  floor: z.number().positive().max(1),
  targetMargin: z.number().min(0).max(1),
  minimumRateOnLine: z.number().min(0).max(1),
  /** Taxes on premium, also on reinstatement premium. */
  taxes: z.number().min(0).max(0.5),
  /** Variable expense on premium. */
  variableExpense: z.number().min(0).max(0.5),
  /** Loss adjustment expense on recoveries. */
  lossAdjustment: z.number().min(0).max(0.5),
  /** Fixed expense of a contract, borne whatever the line. */
  fixedExpensePerContract: z.number().min(0),
  /** Attritional loss and outward cost taken off the book's premium. */
  attritionalAndOutward: z.number().min(0),
  /** Units of house currency for one unit. */
  exchangeRates: z.record(z.string().regex(/^[A-Z]{3}$/), z.number().positive()),
  grid: z.object({ seed: z.string().regex(/^[0-9a-f]{16}$/), states: z.number().int().min(10_000).max(1_000_000) }),
});
export type BasisTerms = z.infer<typeof basisTerms>;

export const basis = z.object({
  id,
  number: z.number().int(),
  state: z.enum(BASIS_STATES),
  terms: basisTerms,
  createdBy: personRef,
  releasedBy: personRef.nullable(),
  releasedAt: z.string().nullable(),
});
export type Basis = z.infer<typeof basis>;

export const zone = z.object({
  id,
  name: z.string(),
  perils: z.array(z.string()),
  regions: z.array(z.string()),
  capacity: z.string(),
  held: z.string(),
  used: z.string(),
  free: z.string(),
});
export type Zone = z.infer<typeof zone>;

export const bookContract = z.object({
  id,
  name: z.string(),
  cedant: z.string(),
  brokerFirm: z.string(),
  currency: z.string(),
  inceptionOn: z.string(),
  expiresOn: z.string(),
  origin: z.enum(['opening book', 'bound quote']),
  quoteId: id.nullable(),
  enteredInVersion: z.number().int(),
  layers: z.array(
    z.object({
      key: z.string(),
      name: z.string(),
      limit: z.string(),
      attachment: z.string(),
      annualDeductible: z.string(),
      reinstatements: z.array(z.number()),
      brokerage: z.number(),
      signedLine: z.number(),
      premium: z.string(),
      rateOnLine: z.number(),
      /** What is left of a loss-hit layer's cover, for 100%; null when untouched. */
      remainingLimit: z.string().nullable(),
    }),
  ),
  houseShareOfPremium: z.string(),
});
export type BookContract = z.infer<typeof bookContract>;

export const book = z.object({
  version: z.number().int(),
  contracts: z.array(bookContract),
  /** House share of premium, house currency. */
  premium: z.string(),
  /** Σ signed line × occurrence limit, house currency. */
  exposure: z.string(),
  currency: z.string(),
});
export type Book = z.infer<typeof book>;

export const listBases = route({
  method: 'get', path: '/bases', access: 'basis.read', tag: 'House', summary: 'House bases, newest first', reply: z.array(basis),
});
export const readBook = route({
  method: 'get', path: '/book', access: 'book.read', tag: 'House', summary: 'The book as it stands', reply: book,
});
export const listBookVersions = route({
  method: 'get', path: '/book/versions', access: 'book.read', tag: 'House', summary: 'What made each version of the book', query: page,
  reply: pageOf(z.object({ number: z.number().int(), cause: z.string(), at: z.string(), contractId: id.nullable() })),
});
export const listZones = route({
  method: 'get', path: '/zones', access: 'book.read', tag: 'House', summary: 'Accumulation zones: capacity, held, used, free', reply: z.array(zone),
});

/** Something that waits for the reader. */
export const deskItem = z.object({
  kind: z.enum(['draft', 'returned', 'referral', 'approved', 'answered', 'order', 'run', 'catalogue', 'mail', 'expiring']),
  title: z.string(),
  detail: z.string(),
  /** Path inside the application. */
  href: z.string(),
  since: z.string(),
});
export const readDesk = route({
  method: 'get', path: '/desk', access: 'desk.read', tag: 'Desk', summary: 'What waits for me, oldest first',
  reply: z.object({
    items: z.array(deskItem),
    counts: z.object({ openSubmissions: z.number().int(), issuedQuotes: z.number().int(), boundThisYear: z.number().int() }),
    /** What keeps the desk from pricing, with what to do: no released catalogue, no released basis. */
    missing: z.array(z.string()),
  }),
});
export type DeskItem = z.infer<typeof deskItem>;

export const mailSummary = z.object({
  id,
  kind: z.enum(MAIL_KINDS),
  to: z.string(),
  subject: z.string(),
  state: z.enum(MAIL_STATES),
  messageId: z.string(),
  attempts: z.number().int(),
  lastError: z.string().nullable(),
  quoteId: id.nullable(),
  at: z.string(),
  /** How many copies arrived at the local post office; only in demo mode. */
  arrived: z.number().int().nullable(),
});
export type MailSummary = z.infer<typeof mailSummary>;
export const mail = mailSummary.extend({ text: z.string().nullable(), html: z.string().nullable() });
export type Mail = z.infer<typeof mail>;

export const listMails = route({
  method: 'get', path: '/post-room', access: 'post-room.read', tag: 'Post room', summary: 'Mails of quotes the reader has part in, newest first',
  query: page, reply: pageOf(mailSummary),
});
export const readMail = route({
  method: 'get', path: '/post-room/:id', access: 'post-room.read', tag: 'Post room', summary: 'One mail as it arrived (demo mode), or its state',
  params: idParams, reply: mail,
});

export const auditEntry = z.object({
  id: z.string(),
  at: z.string(),
  actor: z.string(),
  action: z.string(),
  subject: z.string(),
  subjectId: z.string().nullable(),
  from: z.string().nullable(),
  to: z.string().nullable(),
  note: z.string().nullable(),
  sealed: z.boolean(),
});
export type AuditEntry = z.infer<typeof auditEntry>;
export const listAudit = route({
  method: 'get', path: '/audit', access: 'audit.read', tag: 'Audit', summary: 'The audit trail, newest first',
  query: page.extend({ subjectId: id.optional() }), reply: pageOf(auditEntry),
});
