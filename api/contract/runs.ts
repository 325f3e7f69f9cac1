import * as z from 'zod';
import { RUN_STANDINGS, RUN_STATES } from '../domain/vocabulary';
import { id, idParams, personRef } from './common';
import { programmeTerms } from './programmes';
import { route } from './route';

const tag = 'Runs';

/** A Monte Carlo figure with its standard error, both in the same unit. */
const estimate = z.object({ value: z.number(), standardError: z.number() });

/** Return periods (years) at which exceedance is read; 1 in N is a yearly probability of 1/N. */
const exceedancePoint = z.object({
  years: z.number(),
  occurrence: estimate.nullable(),
  occurrenceTail: estimate.nullable(),
  aggregate: estimate.nullable(),
  aggregateTail: estimate.nullable(),
});

const houseTailPoint = z.object({ years: z.number(), loss: z.number(), lossError: z.number() });

/** The premium taken apart: amounts for 100%, programme currency; the steps add up to the marginal premium. */
const premiumSplit = z.object({
  /** E[m]·E[Z]: expected loss at the riskless rate. */
  risklessLoss: z.number(),
  /** Cov(m, Z): the load for paying when capital is lean. */
  leanLoad: z.number(),
  lossAdjustment: z.number(),
  fixedExpense: z.number(),
  brokerageAndExpense: z.number(),
  /** Less the value of reinstatement premiums; negative or zero. */
  reinstatementValue: z.number(),
  marginalPremium: z.number(),
  /** From the marginal to the walk-away premium at the written line. */
  lineSizeLoad: z.number(),
  walkAwayPremium: z.number(),
  margin: z.number(),
  /** What the minimum rate on line adds; zero where it does not bind. */
  minimumTopUp: z.number(),
  technicalPremium: z.number(),
});

/** One simulated year of a layer: amounts for 100%, programme currency; the book's loss in house currency. */
const explainedYear = z.object({
  state: z.number().int(),
  occurrences: z.array(
    z.object({
      event: z.string(),
      peril: z.string(),
      region: z.string(),
      /** Since inception. */
      day: z.number(),
      loss: z.number(),
      net: z.number(),
      counted: z.number(),
      paid: z.number(),
      reinstatement: z.number(),
    }),
  ),
  counted: z.number(),
  payoff: z.number(),
  reinstatement: z.number(),
  bookLoss: z.number(),
  /** Capital at the year's end, as a share of opening capital. */
  capital: z.number(),
  /** m, today's value of one unit paid in this year. */
  hunger: z.number(),
  /** m·Z/S, what the year adds to E[m·Z]. */
  contribution: z.number(),
});
export type ExplainedYear = z.infer<typeof explainedYear>;

export const layerResult = z.object({
  key: z.string(),
  name: z.string(),
  expectedLoss: estimate,
  expectedLossShareOfLimit: z.number(),
  standardDeviation: z.number(),
  attachmentProbability: estimate,
  exhaustionProbability: estimate,
  /** P(Z > 0) under the price-weighted probabilities. */
  pricedAttachmentProbability: estimate,
  /** E[ρ], reinstatement premium as a share of the layer premium. */
  expectedReinstatement: estimate,
  marginalPremium: estimate,
  walkAwayPremium: estimate,
  /** The layer's part of the programme walk-away; the parts add up. */
  programmeWalkAwayPart: z.number(),
  technicalPremium: z.number(),
  technicalRateOnLine: z.number(),
  /** (premium + expected reinstatement premium) ÷ expected loss, at the technical premium; null without expected loss. */
  multiple: z.number().nullable(),
  /** (E[m·Z]/E[m] − E[Z])/sd(Z): the standard-deviation load that the price implies, for comparison only. */
  impliedDeviationLoad: z.number().nullable(),
  split: premiumSplit,
  effectiveStates: z.number(),
  /** Fewer than 2,500 effective states carry the price. */
  thin: z.boolean(),
  /** Ten groups of states from the leanest to the most plentiful. */
  deciles: z.array(z.object({ meanCapital: z.number(), lossShare: z.number(), priceShare: z.number() })),
  /** Simulated years in the middle of each tenth of the price, leanest first, told from occurrence to contribution. */
  tellingYears: z.array(explainedYear),
  topEvents: z.array(z.object({ event: z.string(), peril: z.string(), region: z.string(), priceShare: z.number() })),
  perils: z.array(z.object({ name: z.string(), priceShare: z.number() })),
  regions: z.array(z.object({ name: z.string(), priceShare: z.number() })),
  /** Simulated against exact E[ΣY] before annual terms, in standard errors; null where the exact value is 0. */
  selfCheckErrors: z.number().nullable(),
});
export type LayerResult = z.infer<typeof layerResult>;

/** One bar of the lean lens: states between two shares, leanest first. */
export const lensBin = z.object({
  /** Share of states at least this lean, both ends; the axis is logarithmic. */
  shareFrom: z.number(),
  shareTo: z.number(),
  /** Mean m/E[m]. */
  hunger: z.number(),
  meanCapital: z.number(),
  /** Per layer: mean Z ÷ limit. */
  payoff: z.array(z.number()),
  /** Per layer: density on the log axis of hunger × payoff; its area is the price over the limit. */
  product: z.array(z.number()),
  /** Per layer: the same without hunger; its area is the expected loss over the limit. */
  plain: z.array(z.number()),
});
export type LensBin = z.infer<typeof lensBin>;

export const runResult = z.object({
  currency: z.string(),
  states: z.number().int(),
  layers: z.array(layerResult),
  programme: z.object({
    expectedLoss: estimate,
    expectedLossShareOfLimit: z.number(),
    standardDeviation: z.number(),
    /** Any layer pays; all of them are exhausted. */
    attachmentProbability: estimate,
    exhaustionProbability: estimate,
    pricedAttachmentProbability: estimate,
    effectiveStates: z.number(),
    thin: z.boolean(),
    /** At our written lines, as are the walk-away and the technical premium. */
    marginalPremium: z.number(),
    walkAwayPremium: estimate,
    technicalPremium: z.number(),
    exceedance: z.array(exceedancePoint),
  }),
  lens: z.array(lensBin),
  house: z.object({
    currency: z.string(),
    capital: z.number(),
    /** E[m], today's value of one unit for sure in a year. */
    sureValue: z.number(),
    risklessRate: z.number(),
    largestSharpeRatio: z.number(),
    floorShare: z.number(),
    effectiveStates: z.number(),
    tailBefore: z.array(houseTailPoint),
    tailAfter: z.array(houseTailPoint),
  }),
  selfCheck: z.object({
    /** Largest distance of simulated from exact, in standard errors. */
    largest: z.number(),
    /** Over 4: the run cannot be quoted. */
    flagged: z.boolean(),
    /** Simulated against exact E[ΣX], in standard errors. */
    groundUp: z.number().nullable(),
  }),
});
export type RunResult = z.infer<typeof runResult>;

export const run = z.object({
  id,
  programmeId: id,
  submissionId: id,
  programmeVersion: z.number().int(),
  terms: programmeTerms,
  state: z.enum(RUN_STATES),
  /** Only a succeeded run has one. */
  standing: z.enum(RUN_STANDINGS).nullable(),
  /** What has moved since, in words; empty when current. */
  moved: z.array(z.string()),
  states: z.number().int(),
  basis: z.object({ id, number: z.number().int() }),
  bookVersion: z.number().int(),
  inputHash: z.string(),
  resultHash: z.string().nullable(),
  progress: z.object({ done: z.number(), total: z.number(), doing: z.string() }),
  /** Counts the worker's attempts; the fencing number of the current one. */
  attempt: z.number().int(),
  error: z.string().nullable(),
  startedBy: personRef,
  createdAt: z.string(),
  startedAt: z.string().nullable(),
  endedAt: z.string().nullable(),
  result: runResult.nullable(),
});
export type Run = z.infer<typeof run>;
export const runSummary = run.omit({ result: true, terms: true });
export type RunSummary = z.infer<typeof runSummary>;

export const startRun = route({
  method: 'post', path: '/programmes/:id/runs', access: 'runs.start', tag,
  summary: 'Value the programme as it stands. The same Idempotency-Key header answers the run it first made', params: idParams,
  body: z.object({
    /** Size of the state grid; the basis states the default. */
    states: z.number().int().min(10_000, 'must be 10,000 states or more').max(1_000_000, 'must be 1,000,000 states or fewer').optional(),
  }),
  reply: run, status: 201,
});
export const listRuns = route({
  method: 'get', path: '/programmes/:id/runs', access: 'runs.read', tag, summary: 'Runs of a programme, newest first', params: idParams,
  reply: z.array(runSummary),
});
export const readRun = route({
  method: 'get', path: '/runs/:id', access: 'runs.read', tag, summary: 'One run, with its result once it has succeeded', params: idParams, reply: run,
});
export const cancelRun = route({
  method: 'post', path: '/runs/:id/cancel', access: 'runs.start', tag, summary: 'Stop a run', params: idParams, reply: run,
});
export const readPayoffs = route({
  method: 'get', path: '/runs/:id/payoffs', access: 'runs.read', tag, form: 'bytes',
  summary: 'The yearly payoffs: little-endian doubles, capital share k for all states, then for each layer Z in the programme currency',
  params: idParams,
});
export const listenEvents = route({
  method: 'get', path: '/events', access: 'signed in', tag, form: 'stream',
  summary: 'Server-sent events naming what has moved: {topic, id, ...}; read it again to see it',
});
