import { lossAt, severityOf } from '../../worker/engine/losses/severity';
import type { LossMoments } from './layer-moments';

export const EXPOSED = 1000;

export interface TailLayer {
  readonly attachment: number;
  readonly limit: number;
}

/** A law of a loss given its event, by name. */
export interface TailLaw {
  readonly name: string;
  readonly moments: LossMoments;
}

/** By the shapes of the damage ratio. */
export function beta(a: number, b: number): TailLaw {
  const share = a / (a + b);
  const sd = Math.sqrt((share * b) / (a + b) / (a + b + 1));
  return {
    name: `beta, shapes ${a} and ${b}`,
    moments: { mean: EXPOSED * share, sd: EXPOSED * sd, exposed: EXPOSED },
  };
}

/** By sd ÷ mean. */
export function lognormal(variation: number): TailLaw {
  return {
    name: `lognormal, sd ÷ mean ${variation}`,
    moments: { mean: 100, sd: 100 * variation, exposed: Number.NaN },
  };
}

/** Sd ÷ mean 0.001. */
export const ALMOST_CERTAIN = beta(700_000, 1_600_000);

/** Layers of a law. */
export type LayersOf = (law: LossMoments) => TailLayer[];

/** Layers that adjoin each other between rising losses. */
function between(edges: readonly number[]): TailLayer[] {
  return edges.slice(1).map((top, e) => ({ attachment: edges[e] ?? 0, limit: top - (edges[e] ?? 0) }));
}

/** Between the losses at normal scores: −1, 0.5, 2.3, 3.7 and 4.75 are reached by 0.84, 0.31, 0.01, 1e-4 and 1e-6 of losses. */
const tower =
  (...scores: readonly number[]): LayersOf =>
  ({ mean, sd, exposed }) =>
    between(scores.map((score) => lossAt(severityOf(mean, sd, exposed), score)));

/** Between shares of the exposed value, for laws under which nearly all is next to nothing or next to all of it. */
const shares =
  (...edges: readonly number[]): LayersOf =>
  () =>
    between(edges.map((edge) => edge * EXPOSED));

/** All of the loss, next to all of it where no bound is exposed. */
const ground: LayersOf = ({ mean, sd, exposed }) => [
  { attachment: 0, limit: Number.isNaN(exposed) ? lossAt(severityOf(mean, sd, exposed), 5.2) : EXPOSED },
];
export const UPPER = tower(0.5, 2.3, 3.7, 4.75);
/** The whole loss, a working layer, and each one remoter than the last. */
export const WHOLE: LayersOf = (law) => [...ground(law), ...tower(-1, 0.5)(law), ...UPPER(law)];
/** The same where a working layer would lie within the 1e-15th part of the exposed value: so skewed is the law. */
export const SKEWED: LayersOf = (law) => [...ground(law), ...UPPER(law)];
export const REMOTE = tower(2.3, 3.7, 4.75);
export const BOTH_ENDS = shares(0, 1e-6, 1e-3, 0.2, 0.5, 0.9, 0.999, 1);
export const UPPER_END = shares(0.5, 0.9, 0.99, 0.999, 1);
