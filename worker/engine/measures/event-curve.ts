import expm1 from '@stdlib/math-base-special-expm1';
import { demand } from '../model/refusal';

/** What a reader of the curve must know, to be shown beside it. */
export const EVENT_CURVE_HELP =
  'Each event’s figure is read as a rate: the mean number of times it happens in a year, a Poisson number. ' +
  'The chance of a loss or a larger one in a year is 1 − exp(−the summed rates of the events that bring it).';

/** One loss of an event list. */
export interface EventCurvePoint {
  /** Same unit as the losses given. */
  readonly loss: number;
  /** Mean yearly number of events that bring this loss or a larger one. */
  readonly rate: number;
  /** Probability that the year's largest loss is this or larger. */
  readonly probability: number;
}

function demandEvents(rates: readonly number[], losses: readonly number[]): void {
  demand(
    losses.length === rates.length,
    'The number of losses',
    losses.length,
    `that of rates, ${rates.length}`,
  );
  rates.forEach((rate, i) =>
    demand(rate >= 0 && rate < Infinity, `The rate of event ${i + 1}`, rate, '0 or more'),
  );
  losses.forEach((loss, i) =>
    demand(loss >= 0 && loss < Infinity, `The loss of event ${i + 1}`, loss, '0 or more'),
  );
}

/**
 * Exceedance curve of the year's largest loss, from an event list with one certain loss an event. Exact, by the Poisson
 * law of independent events: P = 1 − exp(−Σ rate). Events without a loss are not on the curve.
 * @param rates of each event, a year, 0 or more, read as Poisson rates
 * @param losses of each event, 0 or more
 * @returns one point a loss, the largest first
 * @throws EngineInputError for lists of different lengths or a value out of its domain
 */
export function eventCurve(rates: readonly number[], losses: readonly number[]): EventCurvePoint[] {
  demandEvents(rates, losses);
  const order = losses
    .map((_loss, i) => i)
    .filter((i) => losses[i]! > 0)
    .sort((a, b) => losses[b]! - losses[a]!);
  const points: EventCurvePoint[] = [];
  let rate = 0;
  order.forEach((event, at) => {
    const loss = losses[event]!;
    rate += rates[event]!;
    const next = order[at + 1];
    // Events of the same loss are one point.
    if (next === undefined || losses[next]! < loss) points.push({ loss, rate, probability: -expm1(-rate) });
  });
  return points;
}

/** Σ rate × loss: the mean yearly loss, exact whatever the law of the counts. Arguments and errors as `eventCurve`. */
export function yearlyMean(rates: readonly number[], losses: readonly number[]): number {
  demandEvents(rates, losses);
  return rates.reduce((sum, rate, i) => sum + rate * losses[i]!, 0);
}
